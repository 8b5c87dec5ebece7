import { apiPaths, type SpectrumDetail, type UploadMeta } from '@foreveil/shared';
import { isApiError } from '../../lib/api-error.js';
import { upload } from '../../lib/http-upload.js';
import type { Sending } from './entry.js';

interface Job {
  readonly programmeId: string;
  readonly file: File;
  readonly meta: UploadMeta;
  readonly signal: AbortSignal;
  readonly onSending: (sending: Sending) => void;
}

/** Sends one file and tells how it goes; never rejects. Cancelled, it is as if it had never been sent. */
export async function sendEntry({ programmeId, file, meta, signal, onSending }: Job): Promise<void> {
  const form = new FormData();
  form.append('meta', JSON.stringify(meta));
  form.append('file', file, file.name);
  try {
    onSending({ at: 'sending', sent: 0 });
    const spectrum = await upload<SpectrumDetail>(apiPaths.spectra(programmeId), form, {
      signal,
      onProgress: (sent) => onSending({ at: 'sending', sent }),
    });
    onSending({ at: 'added', spectrum });
  } catch (error) {
    if (signal.aborted) onSending({ at: 'not_sent' });
    else if (isApiError(error, 'duplicate_spectrum')) {
      onSending({ at: 'duplicate', existing: (error.problem?.current as SpectrumDetail | undefined) ?? null });
    } else onSending({ at: 'refused', error });
  }
}

/** Runs at most `most` jobs at a time, in order of arrival. */
export function makeQueue(most: number) {
  const waiting: (() => Promise<void>)[] = [];
  let running = 0;
  const next = () => {
    while (running < most) {
      const job = waiting.shift();
      if (!job) return;
      running++;
      const ended = () => {
        running--;
        next();
      };
      job().then(ended, ended);
    }
  };
  return (job: () => Promise<void>) => {
    waiting.push(job);
    next();
  };
}
