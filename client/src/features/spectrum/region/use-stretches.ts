import { useMemo } from 'react';
import type { Stretch } from '../../../plot/Stretches.js';
import type { Steering } from '../steering/use-steering.js';
import { useRegion, type RegionStore } from './region-store.js';

/** Stretches to be shown over the curve: what the next run masks or moves (that of the page included), and what is marked. */
export function useStretches(store: RegionStore, { draft, run }: Steering): readonly Stretch[] {
  const { region } = useRegion(store);
  return useMemo(() => {
    const isRun = (one: object, of: readonly object[]) => of.some((r) => JSON.stringify(r) === JSON.stringify(one));
    return [
      ...draft.maskedRegions.map((r): Stretch => ({ ...r, kind: 'masked', word: isRun(r, run.maskedRegions) ? 'masked' : 'to be masked' })),
      ...draft.continuumMoves.map((m): Stretch => ({
        ...m,
        kind: 'moved',
        word: isRun(m, run.continuumMoves) ? 'continuum moved' : 'continuum to be moved',
      })),
      ...(region ? [{ ...region, kind: 'marked', word: '' } satisfies Stretch] : []),
    ];
  }, [region, draft, run]);
}
