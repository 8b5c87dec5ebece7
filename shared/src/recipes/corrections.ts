import type { ReadingCorrections } from '../reading/index.js';
import { isSimilar, type FileSignature } from './signature.js';

/** Corrections that belong to one exposure and say nothing about the next file of the same kind. */
const OF_ONE_FILE = new Set(['objectName', 'time', 'exposureS', 'pointing']);

/** What of a person's corrections holds for every file of the kind. */
export const transferable = (corrections: ReadingCorrections): ReadingCorrections =>
  Object.fromEntries(Object.entries(corrections).filter(([field, value]) => !OF_ONE_FILE.has(field) && value !== undefined));

/** The corrections of a kind put on a file: what is the file's own stays, all else is as in `general`. */
export function withGeneral(own: ReadingCorrections, general: ReadingCorrections): ReadingCorrections {
  const kept = Object.fromEntries(Object.entries(own).filter(([field]) => OF_ONE_FILE.has(field)));
  return { ...kept, ...transferable(general) };
}

/** Same fields with the same values, in whatever order. */
export function sameCorrections(a: ReadingCorrections, b: ReadingCorrections): boolean {
  const text = (corrections: ReadingCorrections) => JSON.stringify(sorted(corrections));
  return text(a) === text(b);
}

function sorted(value: unknown): unknown {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return value;
  const entries = Object.entries(value).filter(([, inner]) => inner !== undefined);
  return Object.fromEntries(entries.sort(([a], [b]) => (a < b ? -1 : 1)).map(([field, inner]) => [field, sorted(inner)]));
}

interface Recipe {
  readonly signature: FileSignature;
  /** ISO 8601 */
  readonly changedAt: string;
}

/** Recipes for files of this kind, the one that was changed last first. */
export const recipesFor = <R extends Recipe>(recipes: readonly R[], signature: FileSignature): R[] =>
  recipes.filter((recipe) => isSimilar(recipe.signature, signature)).sort((a, b) => (a.changedAt < b.changedAt ? 1 : -1));
