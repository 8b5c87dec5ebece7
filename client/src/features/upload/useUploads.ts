import {
  isSimilar,
  signatureOf,
  withGeneral,
  type FileSignature,
  type ReadingCorrections,
  type ReadingRecipe,
  type TargetSummary,
} from '@foreveil/shared';
import { useQueryClient } from '@tanstack/react-query';
import { useCallback, useEffect, useReducer, useRef } from 'react';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { useReader } from '../../workers/use-reader.js';
import { changeEntries, newcomers, NO_CORRECTIONS } from './entries.js';
import { guessTarget, isOpen, metaOf, recipesOf, type Entry, type TargetChoice } from './entry.js';
import { makeQueue, sendEntry } from './send-entry.js';
import { useKnownFiles } from './useKnownFiles.js';

const AT_A_TIME = 2;

interface Options {
  readonly programmeId: string;
  readonly targets: readonly TargetSummary[];
  readonly recipes: readonly ReadingRecipe[];
  /** the target whose page one came from */
  readonly page: TargetSummary | undefined;
}

/** The files of the upload page: reads each before anything is sent, re-reads after a correction, sends those that are told to go. */
export function useUploads({ programmeId, targets, recipes, page }: Options) {
  const [entries, dispatch] = useReducer(changeEntries, []);
  const client = useQueryClient();
  const reader = useReader();
  const ids = useRef(0);
  const queue = useRef<ReturnType<typeof makeQueue>>(undefined);
  const aborts = useRef(new Map<number, AbortController>());
  useKnownFiles(programmeId, entries, dispatch);

  const read = useCallback(
    async (id: number, file: File, corrections: ReadingCorrections) => {
      const result = await reader().read(file, corrections);
      const guess = result.ok ? guessTarget(result.reading, file.name, targets, page) : null;
      const signature = result.ok ? signatureOf(result.reading) : null;
      dispatch({ type: 'read', id, corrections, read: result, guess, signature });
      return { ok: result.ok, signature };
    },
    [reader, targets, page],
  );
  const correctTo = (id: number, file: File, corrections: ReadingCorrections, recipe: string | null = null) => {
    dispatch({ type: 'corrected', id, corrections, recipe });
    return read(id, file, corrections);
  };
  const readFirst = async (id: number, file: File) => {
    const first = await read(id, file, NO_CORRECTIONS);
    const recipe = first.signature
      ? recipesOf({ signature: first.signature } as Entry, recipes)[0]
      : await recipeThatReads(file, recipes, reader);
    if (recipe) await correctTo(id, file, withGeneral(NO_CORRECTIONS, recipe.corrections), recipe.name);
  };

  useEffect(() => {
    const running = aborts.current;
    return () => running.forEach((abort) => abort.abort());
  }, []);

  const add = (files: readonly File[]) => {
    const fresh = newcomers(entries, files);
    const firstId = ids.current + 1;
    ids.current += fresh.length;
    dispatch({ type: 'chosen', files: fresh, firstId });
    fresh.forEach((file, i) => void readFirst(firstId + i, file));
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
    correct: (entry: Entry, corrections: ReadingCorrections) => void correctTo(entry.id, entry.file, corrections),
    /** the corrections of one file for all of its kind that can still be corrected */
    correctSimilar: async (source: Entry) => {
      for (const { id, file, corrections } of await similarTo(source, entries, reader)) {
        void correctTo(id, file, withGeneral(corrections, source.corrections), source.recipe?.name);
      }
    },
    applyRecipe: (entry: Entry, { name, corrections }: ReadingRecipe) =>
      void correctTo(entry.id, entry.file, withGeneral(entry.corrections, corrections), name),
    retarget: ({ id }: Entry, target: TargetChoice) => dispatch({ type: 'targeted', id, target }),
    relabel: ({ id }: Entry, label: string) => dispatch({ type: 'labelled', id, label }),
    leaveOut: ({ id }: Entry) => dispatch({ type: 'left_out', id }),
  };
}

type Reader = ReturnType<typeof useReader>;

/** For a file that cannot be read as it stands: the recipe with which it can, and whose kind it then is of. */
async function recipeThatReads(file: File, recipes: readonly ReadingRecipe[], reader: Reader): Promise<ReadingRecipe | undefined> {
  for (const recipe of recipes) if (await readsAs(file, recipe.signature, recipe.corrections, reader)) return recipe;
  return undefined;
}

async function readsAs(file: File, signature: FileSignature, corrections: ReadingCorrections, reader: Reader): Promise<boolean> {
  const result = await reader().read(file, corrections);
  return result.ok && isSimilar(signatureOf(result.reading), signature);
}

/** Other files of the same kind; one that cannot be read yet is tried with the same corrections. */
async function similarTo(source: Entry, entries: readonly Entry[], reader: Reader): Promise<Entry[]> {
  const { signature } = source;
  if (!signature) return [];
  const similar: Entry[] = [];
  for (const entry of entries) {
    if (entry.id === source.id || !isOpen(entry)) continue;
    const of = entry.signature;
    if (of ? isSimilar(of, signature) : await readsAs(entry.file, signature, source.corrections, reader)) similar.push(entry);
  }
  return similar;
}
