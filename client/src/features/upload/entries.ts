import type { FileSignature, KnownFile, ReadingCorrections } from '@foreveil/shared';
import type { FileRead } from '../../workers/protocol.js';
import { labelFrom, type Entry, type Sending, type TargetChoice } from './entry.js';

export type Change =
  | { readonly type: 'chosen'; readonly files: readonly File[]; readonly firstId: number }
  | {
      readonly type: 'read';
      readonly id: number;
      readonly corrections: ReadingCorrections;
      readonly read: FileRead;
      readonly guess: TargetChoice | null;
      readonly signature: FileSignature | null;
    }
  /** by the hand of a person, or by a recipe of that name */
  | { readonly type: 'corrected'; readonly id: number; readonly corrections: ReadingCorrections; readonly recipe?: string | null }
  | { readonly type: 'targeted'; readonly id: number; readonly target: TargetChoice }
  | { readonly type: 'labelled'; readonly id: number; readonly label: string }
  | { readonly type: 'sending'; readonly id: number; readonly sending: Sending }
  | { readonly type: 'known'; readonly files: readonly KnownFile[] }
  | { readonly type: 'left_out'; readonly id: number };

/** One object for all, because an answer is recognised by the corrections it was read with. */
export const NO_CORRECTIONS: ReadingCorrections = {};
const NO_TARGET: TargetChoice = { name: '', kind: 'star', why: 'file_name' };

export const freshEntry = (file: File, id: number): Entry => ({
  id,
  file,
  label: labelFrom(file.name),
  corrections: NO_CORRECTIONS,
  target: NO_TARGET,
  read: null,
  rereading: false,
  sending: { at: 'not_sent' },
  signature: null,
  recipe: null,
  sha256: null,
  known: null,
  twinOf: null,
});

const isSameFile = (a: File, b: File) => a.name === b.name && a.size === b.size && a.lastModified === b.lastModified;
/** Files that a folder holds for the computer's own use. */
const isHidden = (file: File) => file.name.startsWith('.') || file.name === 'Thumbs.db';

/** Files not yet on the page: choosing one twice shows it once. */
export const newcomers = (entries: readonly Entry[], files: readonly File[]): File[] =>
  files.filter(
    (file, i) =>
      !isHidden(file) &&
      !entries.some((entry) => isSameFile(entry.file, file)) &&
      !files.slice(0, i).some((other) => isSameFile(other, file)),
  );

/** The files on the page after a change. */
export function changeEntries(entries: readonly Entry[], change: Change): readonly Entry[] {
  return withTwins(changed(entries, change));
}

function changed(entries: readonly Entry[], change: Change): readonly Entry[] {
  if (change.type === 'chosen') return [...entries, ...change.files.map((file, i) => freshEntry(file, change.firstId + i))];
  if (change.type === 'left_out') return entries.filter(({ id }) => id !== change.id);
  if (change.type === 'known') {
    const byHash = new Map(change.files.map((file) => [file.sha256, file]));
    return entries.map((entry) => (entry.sha256 && byHash.has(entry.sha256) ? { ...entry, known: byHash.get(entry.sha256)! } : entry));
  }
  return entries.map((entry) => (entry.id === change.id ? changeEntry(entry, change) : entry));
}

/** Marks each file whose bytes stand further up on the page already, or were added from it. */
function withTwins(entries: readonly Entry[]): readonly Entry[] {
  const first = new Map<string, string>();
  const added = new Map(
    entries.flatMap((entry) => (entry.sha256 && entry.sending.at === 'added' ? [[entry.sha256, addedAs(entry.sending)] as const] : [])),
  );
  return entries.map((entry) => {
    const { sha256, file } = entry;
    const twinOf = sha256 ? (first.get(sha256) ?? null) : null;
    if (sha256 && twinOf === null) first.set(sha256, file.name);
    const known = entry.known ?? (sha256 && twinOf !== null ? (added.get(sha256) ?? null) : null);
    return twinOf === entry.twinOf && known === entry.known ? entry : { ...entry, twinOf, known };
  });
}

const addedAs = ({ spectrum: { id, sha256, label, targetId, targetName } }: Extract<Sending, { at: 'added' }>): KnownFile => ({
  ...{ sha256, spectrumId: id, label, targetId, targetName },
});

function changeEntry(entry: Entry, change: Exclude<Change, { type: 'chosen' | 'left_out' | 'known' }>): Entry {
  switch (change.type) {
    case 'read': {
      // an answer to corrections that have changed since is out of date
      if (change.corrections !== entry.corrections) return entry;
      const { read, signature, guess } = change;
      const settled = entry.target.why === 'chosen' || entry.target.why === 'position';
      const target = settled || !guess ? entry.target : guess;
      const sha256 = read.sha256 ?? entry.sha256;
      // the first reading that succeeds says what kind of file it is: later ones look at it through corrections
      return { ...entry, read, sha256, rereading: false, target, signature: entry.signature ?? signature };
    }
    case 'corrected': {
      const { corrections, recipe } = change;
      const by = recipe ? { name: recipe, before: entry.recipe?.before ?? entry.corrections } : null;
      return { ...entry, corrections, rereading: true, recipe: by, sending: { at: 'not_sent' } };
    }
    case 'targeted':
      return { ...entry, target: change.target, sending: { at: 'not_sent' } };
    case 'labelled':
      return { ...entry, label: change.label, sending: { at: 'not_sent' } };
    case 'sending':
      return { ...entry, sending: change.sending };
  }
}
