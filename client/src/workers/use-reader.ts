import { useCallback, useEffect, useRef } from 'react';
import { startReader, type SpectrumReader } from './spectrum-reader.js';

/** One reader while the page is shown, started with the first file. */
export function useReader(): () => SpectrumReader {
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
