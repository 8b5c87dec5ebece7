import {
  isSimilar,
  recipesFor,
  type FileSignature,
  type KnownFile,
  type Reading,
  type ReadingCorrections,
  type ReadingRecipe,
  type SpectrumDetail,
  type TargetKind,
  type TargetSummary,
  type UploadMeta,
} from '@foreveil/shared';
import { separationArcsec } from '../../lib/position.js';
import type { FileRead } from '../../workers/protocol.js';

/** Where a spectrum goes, and why the page thinks so. */
export interface TargetChoice {
  readonly name: string;
  /** for a target that has yet to be made */
  readonly kind: TargetKind;
  readonly why: 'object' | 'page' | 'file_name' | 'chosen' | 'position';
}

export type Sending =
  | { readonly at: 'not_sent' }
  | { readonly at: 'waiting' }
  /** 0 to 1; at 1 the server reads the file itself */
  | { readonly at: 'sending'; readonly sent: number }
  | { readonly at: 'added'; readonly spectrum: SpectrumDetail }
  | { readonly at: 'duplicate'; readonly existing: SpectrumDetail | null }
  | { readonly at: 'refused'; readonly error: unknown };

/** One chosen file on its way to the programme. */
export interface Entry {
  readonly id: number;
  readonly file: File;
  readonly label: string;
  readonly corrections: ReadingCorrections;
  readonly target: TargetChoice;
  /** null while it is being read */
  readonly read: FileRead | null;
  /** a correction is being read; `read` still shows the state before */
  readonly rereading: boolean;
  readonly sending: Sending;
  /** what tells files of its kind; null while no reading of it has succeeded */
  readonly signature: FileSignature | null;
  /** the recipe whose corrections stand, and what stood before */
  readonly recipe: { readonly name: string; readonly before: ReadingCorrections } | null;
  readonly sha256: string | null;
  /** the spectrum of the programme that has these bytes */
  readonly known: KnownFile | null;
  /** name of a file further up on the page that has the same bytes */
  readonly twinOf: string | null;
}

export type Question = 'medium' | 'target' | 'label';

/** What the file leaves open and a person must answer before it may be sent. */
export function questions({ read, target, label }: Entry): Question[] {
  if (!read?.ok) return [];
  return [
    ...(read.reading.medium.how === 'not_stated' ? (['medium'] as const) : []),
    ...(target.name.trim() ? [] : (['target'] as const)),
    ...(label.trim() ? [] : (['label'] as const)),
  ];
}

export type Verdict = 'reading' | 'ready' | 'asks' | 'unreadable' | 'sending' | 'added' | 'duplicate' | 'known' | 'twin' | 'refused';

export function verdict(entry: Entry): Verdict {
  const { sending, read, rereading, known, twinOf } = entry;
  if (sending.at === 'waiting' || sending.at === 'sending') return 'sending';
  if (sending.at !== 'not_sent') return sending.at;
  if (!read || rereading) return 'reading';
  if (known) return 'known';
  if (twinOf !== null) return 'twin';
  if (!read.ok) return 'unreadable';
  return questions(entry).length ? 'asks' : 'ready';
}

/** Whether leaving the page would lose something a person may still want. */
export const isUnfinished = (entry: Entry): boolean => ['reading', 'ready', 'asks', 'sending', 'refused'].includes(verdict(entry));

/** Whether it can still be corrected. */
export const isOpen = (entry: Entry): boolean => ['ready', 'asks', 'unreadable', 'refused'].includes(verdict(entry));

/** A file's name without its endings: what a spectrum is called when nobody says otherwise. */
export const labelFrom = (fileName: string): string => fileName.replace(/(\.[A-Za-z0-9]{1,5}){1,2}$/, '').slice(0, 120) || 'spectrum';

const plain = (name: string) =>
  name
    .toLocaleLowerCase('en')
    .replace(/[\s_-]+/g, ' ')
    .trim();

/** The target of this name, however its letters, blanks, hyphens and underscores are written. */
export const sameTarget = <T extends Pick<TargetSummary, 'name'>>(name: string, targets: readonly T[]): T | undefined =>
  targets.find((target) => plain(target.name) === plain(name));

/** First guess: the target whose page one came from, else OBJECT of the file, else the file's name. */
export function guessTarget(
  reading: Reading,
  fileName: string,
  targets: readonly TargetSummary[],
  page: TargetSummary | undefined,
): TargetChoice {
  if (page) return { name: page.name, kind: page.kind, why: 'page' };
  const object = reading.objectName.value?.trim().slice(0, 120);
  if (!object) return { name: labelFrom(fileName), kind: 'star', why: 'file_name' };
  const known = sameTarget(object, targets);
  return { name: known?.name ?? object, kind: known?.kind ?? 'star', why: 'object' };
}

/** Nearer than this a target may be the one a telescope was pointed at: acquisition and catalogue errors, a nebula's slit. */
const NEAR_ARCSEC = 120;

export interface Neighbour {
  readonly target: TargetSummary;
  readonly arcsec: number;
}

/** The target nearest to where the file says the telescope looked, when one is near. */
export function nearestTarget({ pointing }: Pick<Reading, 'pointing'>, targets: readonly TargetSummary[]): Neighbour | null {
  const at = pointing.value;
  if (!at) return null;
  const placed = targets.flatMap((target) =>
    target.raDeg === null || target.decDeg === null
      ? []
      : [{ target, arcsec: separationArcsec(at, { raDeg: target.raDeg, decDeg: target.decDeg }) }],
  );
  const nearest = placed.sort((a, b) => a.arcsec - b.arcsec)[0];
  return nearest && nearest.arcsec <= NEAR_ARCSEC ? nearest : null;
}

/** How many other files the corrections of this one could be put on: those of its kind, and those that no reading has told yet. */
export function similarCount(entry: Entry, entries: readonly Entry[]): number {
  const { signature } = entry;
  if (!signature) return 0;
  return entries.filter(
    (other) => other.id !== entry.id && isOpen(other) && (other.signature === null || isSimilar(other.signature, signature)),
  ).length;
}

/** Recipes of the team for files of this kind, the newest first. */
export const recipesOf = ({ signature }: Entry, recipes: readonly ReadingRecipe[]): ReadingRecipe[] =>
  signature ? recipesFor(recipes, signature) : [];

/** What goes with the bytes. */
export function metaOf({ target, label, corrections, recipe }: Entry, targets: readonly TargetSummary[]): UploadMeta {
  const existing = sameTarget(target.name, targets);
  return {
    ...(existing ? { targetId: existing.id } : { targetName: target.name.trim(), targetKind: target.kind }),
    label: label.trim(),
    ...(Object.keys(corrections).length ? { corrections } : {}),
    ...(recipe ? { recipe: recipe.name } : {}),
  };
}
