import type { ReadingCorrections, TargetSummary } from '@foreveil/shared';
import { useQueryClient } from '@tanstack/react-query';
import { useCallback, useEffect, useReducer, useRef } from 'react';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { startReader, type SpectrumReader } from '../../workers/spectrum-reader.js';
import { changeEntries, newcomers, NO_CORRECTIONS } from './entries.js';
import { guessTarget, metaOf, type Entry, type TargetChoice } from './entry.js';
import { makeQueue, sendEntry } from './send-entry.js';

const AT_A_TIME = 2;

interface Options {
  readonly programmeId: string;
  readonly targets: readonly TargetSummary[];
  /** the target whose page one came from */
  readonly page: TargetSummary | undefined;
}

/** The files of the upload page: reads each before anything is sent, re-reads after a correction, sends those that are told to go. */
export function useUploads({ programmeId, targets, page }: Options) {
  const [entries, dispatch] = useReducer(changeEntries, []);
  const client = useQueryClient();
  const reader = useReader();
  const ids = useRef(0);
  const queue = useRef<ReturnType<typeof makeQueue>>(undefined);
  const aborts = useRef(new Map<number, AbortController>());

  const read = useCallback(
    async (id: number, file: File, corrections: ReadingCorrections) => {
      const result = await reader().read(file, corrections);
      const guess = result.ok ? guessTarget(result.reading, file.name, targets, page) : null;
      dispatch({ type: 'read', id, corrections, read: result, guess });
    },
    [reader, targets, page],
  );

  useEffect(() => {
    const running = aborts.current;
    return () => running.forEach((abort) => abort.abort());
  }, []);

  const add = (files: readonly File[]) => {
    const fresh = newcomers(entries, files);
    const firstId = ids.current + 1;
    ids.current += fresh.length;
    dispatch({ type: 'chosen', files: fresh, firstId });
    fresh.forEach((file, i) => void read(firstId + i, file, NO_CORRECTIONS));
  };

  const send = (entry: Entry) => {
    const abort = new AbortController();
    aborts.current.set(entry.id, abort);
    dispatch({ type: 'sending', id: entry.id, sending: { at: 'waiting' } });
    queue.current ??= makeQueue(AT_A_TIME);
    queue.current(async () => {
      if (!abort.signal.aborted) {
        const meta = metaOf(entry, targets);
        await sendEntry({
          ...{ programmeId, file: entry.file, meta, signal: abort.signal },
          onSending: (sending) => dispatch({ type: 'sending', id: entry.id, sending }),
        });
        // awaited, so that the next file of a target just made finds it
        await client.invalidateQueries({ queryKey: programmeQueries.within(programmeId) });
      }
      if (aborts.current.get(entry.id) === abort) aborts.current.delete(entry.id);
    });
  };

  return {
    entries,
    add,
    send,
    cancel: ({ id }: Entry) => {
      aborts.current.get(id)?.abort();
      dispatch({ type: 'sending', id, sending: { at: 'not_sent' } });
    },
    correct: (entry: Entry, corrections: ReadingCorrections) => {
      dispatch({ type: 'corrected', id: entry.id, corrections });
      void read(entry.id, entry.file, corrections);
    },
    retarget: ({ id }: Entry, target: TargetChoice) => dispatch({ type: 'targeted', id, target }),
    relabel: ({ id }: Entry, label: string) => dispatch({ type: 'labelled', id, label }),
    leaveOut: ({ id }: Entry) => dispatch({ type: 'left_out', id }),
  };
}

/** One reader while the page is shown, started with the first file. */
function useReader(): () => SpectrumReader {
  const current = useRef<SpectrumReader | null>(null);
  const shown = useRef(false);
  useEffect(() => {
    shown.current = true;
    return () => {
      shown.current = false;
      // React's strict mode takes the page away and puts it back at once: then the reader stays
      queueMicrotask(() => {
        if (shown.current) return;
        current.current?.close();
        current.current = null;
      });
    };
  }, []);
  return useCallback(() => (current.current ??= startReader()), []);
}
