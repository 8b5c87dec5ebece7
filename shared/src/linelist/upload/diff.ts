import type { Line } from '../line.js';

export interface ChangedLine {
  readonly before: Line;
  readonly after: Line;
  readonly fields: readonly (keyof Line)[];
}

/** How one version of a list differs from another. Lines are the same line when their ids are. */
export interface LineListDiff {
  readonly added: readonly Line[];
  readonly removed: readonly Line[];
  readonly changed: readonly ChangedLine[];
  readonly unchanged: number;
}

export function diffLines(before: readonly Line[], after: readonly Line[]): LineListDiff {
  const old = new Map(before.map((line) => [line.id, line]));
  const kept = new Set<string>();
  const added: Line[] = [];
  const changed: ChangedLine[] = [];
  for (const line of after) {
    const was = old.get(line.id);
    if (!was) {
      added.push(line);
      continue;
    }
    kept.add(line.id);
    const fields = (Object.keys(line) as (keyof Line)[]).filter((key) => !same(was[key], line[key]));
    if (fields.length) changed.push({ before: was, after: line, fields });
  }
  return { added, removed: before.filter(({ id }) => !kept.has(id)), changed, unchanged: kept.size - changed.length };
}

const same = (a: Line[keyof Line], b: Line[keyof Line]): boolean =>
  Array.isArray(a) && Array.isArray(b) ? a.length === b.length && a.every((item, i) => item === b[i]) : a === b;

/** A list with rows of another put in: an id that both have is taken from `over`. */
export function mergeLines(base: readonly Line[], over: readonly Line[]): Line[] {
  const replaced = new Set(over.map(({ id }) => id));
  return [...base.filter(({ id }) => !replaced.has(id)), ...over].sort((a, b) => a.wavelengthNm - b.wavelengthNm);
}
