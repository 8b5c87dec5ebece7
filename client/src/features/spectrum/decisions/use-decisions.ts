import type { Identification } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useCallback, useRef, useState } from 'react';
import { isApiError } from '../../../lib/api-error.js';
import { targetQueries } from '../../../lib/queries/programmes.js';
import { decide, identificationQueries } from '../../../lib/queries/spectra.js';
import type { LineRow } from '../lines/reading.js';
import { decisionOf, foreseen, stepsOver, undoSteps, type Act, type UndoStep } from './act.js';

/** A teammate was faster: what they made of the line, and what was wanted here. */
export interface Conflict {
  readonly row: LineRow;
  readonly mine: Act;
  readonly theirs: Identification;
}

interface Where {
  programmeId: string;
  spectrumId: string;
  analysisId: string;
  /** name of the person, for the row until the server answers */
  by: string;
}

const put = (list: readonly Identification[] = [], featureIndex: number, row: Identification | null) => [
  ...list.filter((i) => i.featureIndex !== featureIndex),
  ...(row ? [row] : []),
];

const UNDO_STEPS = 100;

/**
 * Decisions on the lines of a spectrum: shown at once, rolled back when refused, undone on request. One decision a line at a time.
 * `decide` resolves to whether the server agreed.
 */
export function useDecisions({ programmeId, spectrumId, analysisId, by }: Where) {
  const client = useQueryClient();
  const { queryKey } = identificationQueries.list(programmeId, spectrumId);
  const [conflict, setConflict] = useState<Conflict | null>(null);
  const [pending, setPending] = useState<ReadonlySet<number>>(new Set());
  const undoable = useRef<{ analysisId: string; featureIndex: number; steps: UndoStep[] }[]>([]);
  const inFlight = useRef(new Set<number>());

  const mutation = useMutation({
    mutationFn: ({ act }: { row: LineRow; act: Act }) => decide(programmeId, analysisId, act.featureIndex, act.version, decisionOf(act)),
    onMutate: async ({ row, act }) => {
      await client.cancelQueries({ queryKey });
      client.setQueryData<Identification[]>(queryKey, (list) =>
        put(list, act.featureIndex, foreseen(row, act, by, new Date().toISOString())),
      );
    },
    onSuccess: (saved, { act }) => client.setQueryData<Identification[]>(queryKey, (list) => put(list, act.featureIndex, saved)),
    onError: (error, { row, act }) => {
      const theirs = isApiError(error, 'stale_version') ? (error.problem?.current as Identification | undefined) : undefined;
      client.setQueryData<Identification[]>(queryKey, (list) => put(list, act.featureIndex, theirs ?? row.identification));
      if (theirs) setConflict({ row, mine: act, theirs });
    },
  });
  const { mutateAsync } = mutation;

  const send = useCallback(
    async (row: LineRow, act: Act): Promise<Identification | null> => {
      inFlight.current.add(act.featureIndex);
      setPending(new Set(inFlight.current));
      try {
        return await mutateAsync({ row, act });
      } catch (error) {
        if (isApiError(error, 'stale_version')) return null;
        throw error;
      } finally {
        inFlight.current.delete(act.featureIndex);
        setPending(new Set(inFlight.current));
        if (inFlight.current.size === 0) {
          void client.invalidateQueries({ queryKey });
          void client.invalidateQueries({ queryKey: targetQueries.all(programmeId), refetchType: 'none' });
        }
      }
    },
    [client, mutateAsync, programmeId, queryKey],
  );

  /** Carries steps out one after the other, each on the version that the one before left. */
  const walk = useCallback(
    async (row: LineRow, steps: readonly UndoStep[], remark: string): Promise<boolean> => {
      for (const [place, { action, reading }] of steps.entries()) {
        const now = client.getQueryData<Identification[]>(queryKey)?.find((i) => i.featureIndex === row.feature.index) ?? null;
        const seen: LineRow = { ...row, identification: now, state: now?.state ?? 'proposed' };
        const isLast = place === steps.length - 1;
        const act: Act = { action, reading, remark: isLast ? remark : '', version: now?.version ?? 0, featureIndex: row.feature.index };
        if (!(await send(seen, act))) return false;
      }
      return true;
    },
    [client, queryKey, send],
  );

  const decideOn = useCallback(
    async (row: LineRow, act: Act): Promise<boolean> => {
      if (inFlight.current.has(act.featureIndex)) return false;
      const saved = await send(row, act);
      if (!saved) return false;
      undoable.current.push({ analysisId, featureIndex: act.featureIndex, steps: undoSteps(row, act) });
      if (undoable.current.length > UNDO_STEPS) undoable.current.shift();
      return true;
    },
    [analysisId, send],
  );

  /** Takes back the last decision made here; resolves to the index of its feature, null when there is none or it could not be. */
  const undo = useCallback(
    async (rows: readonly LineRow[]): Promise<number | null> => {
      const last = undoable.current.pop();
      const row = rows.find((r) => r.feature.index === last?.featureIndex);
      if (!last || !row || last.analysisId !== analysisId) return null; // a new analysis numbers its features anew
      return (await walk(row, last.steps, '')) ? last.featureIndex : null;
    },
    [analysisId, walk],
  );

  const keepTheirs = useCallback(() => setConflict(null), []);
  /** Puts what was wanted over the teammate's version; resolves to whether the server agreed. */
  const applyMine = useCallback(async (): Promise<boolean> => {
    if (!conflict) return false;
    setConflict(null);
    return walk(conflict.row, stepsOver(conflict.theirs, conflict.mine), conflict.mine.remark);
  }, [conflict, walk]);

  return { decide: decideOn, undo, pending, conflict, keepTheirs, applyMine };
}

export type Decisions = ReturnType<typeof useDecisions>;
