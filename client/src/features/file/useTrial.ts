import { apiPaths, type ReadingCorrections, type SpectrumDetail } from '@foreveil/shared';
import { useRef, useState } from 'react';
import { http } from '../../lib/http.js';
import type { FileRead } from '../../workers/protocol.js';
import { useReader } from '../../workers/use-reader.js';

interface Trial {
  readonly corrections: ReadingCorrections;
  /** null until a correction was tried */
  readonly read: FileRead | null;
  readonly busy: boolean;
  readonly error: unknown;
}

/** Tries corrections on the original bytes, fetched once, in this browser; nothing is saved. */
export function useTrial(programmeId: string, spectrum: SpectrumDetail) {
  const [trial, setTrial] = useState<Trial>({ corrections: spectrum.corrections, read: null, busy: false, error: null });
  const file = useRef<Promise<File>>(undefined);
  const newest = useRef<ReadingCorrections>(spectrum.corrections);
  const reader = useReader();
  const fetched = () =>
    (file.current ??= http
      .bytes(apiPaths.original(programmeId, spectrum.id))
      .then((bytes) => new File([bytes], spectrum.fileName, { lastModified: 0 })));

  const correct = async (corrections: ReadingCorrections) => {
    newest.current = corrections;
    setTrial((old) => ({ ...old, corrections, busy: true, error: null }));
    try {
      const read = await reader().read(await fetched(), corrections);
      // an answer to corrections that have changed since is out of date
      if (newest.current === corrections) setTrial({ corrections, read, busy: false, error: null });
    } catch (error) {
      file.current = undefined;
      if (newest.current === corrections) setTrial((old) => ({ ...old, busy: false, error }));
    }
  };
  return { ...trial, correct: (corrections: ReadingCorrections) => void correct(corrections) };
}
