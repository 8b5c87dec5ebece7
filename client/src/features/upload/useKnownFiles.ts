import { useEffect, useRef, type Dispatch } from 'react';
import { findKnownFiles } from '../../lib/queries/files.js';
import type { Change } from './entries.js';
import type { Entry } from './entry.js';

/** Files that are dropped together are asked for together. */
const GATHER_MS = 150;

/** Asks the server, before anything is sent, which of the files the programme has already. Without an answer the server says so later. */
export function useKnownFiles(programmeId: string, entries: readonly Entry[], dispatch: Dispatch<Change>): void {
  const asked = useRef(new Set<string>());
  useEffect(() => {
    const fresh = entries.flatMap(({ sha256 }) => (sha256 && !asked.current.has(sha256) ? [sha256] : []));
    if (!fresh.length) return;
    const timer = setTimeout(() => {
      fresh.forEach((sha256) => asked.current.add(sha256));
      findKnownFiles(programmeId, [...new Set(fresh)]).then(
        (files) => files.length && dispatch({ type: 'known', files }),
        () => fresh.forEach((sha256) => asked.current.delete(sha256)),
      );
    }, GATHER_MS);
    return () => clearTimeout(timer);
  }, [programmeId, entries, dispatch]);
}
