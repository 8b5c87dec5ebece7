import type { ReadingCorrections } from '@foreveil/shared';
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
    }
  | { readonly type: 'corrected'; readonly id: number; readonly corrections: ReadingCorrections }
  | { readonly type: 'targeted'; readonly id: number; readonly target: TargetChoice }
  | { readonly type: 'labelled'; readonly id: number; readonly label: string }
  | { readonly type: 'sending'; readonly id: number; readonly sending: Sending }
  | { readonly type: 'left_out'; readonly id: number };

/** One object for all, because an answer is recognised by the corrections it was read with. */
export const NO_CORRECTIONS: ReadingCorrections = {};
const NO_TARGET: TargetChoice = { name: '', kind: 'star', why: 'file_name' };

const fresh = (file: File, id: number): Entry => ({
  id,
  file,
  label: labelFrom(file.name),
  corrections: NO_CORRECTIONS,
  target: NO_TARGET,
  read: null,
  rereading: false,
  sending: { at: 'not_sent' },
});

const isSameFile = (a: File, b: File) => a.name === b.name && a.size === b.size && a.lastModified === b.lastModified;

/** Files not yet on the page: choosing one twice shows it once. */
export const newcomers = (entries: readonly Entry[], files: readonly File[]): File[] =>
  files.filter(
    (file, i) => !entries.some((entry) => isSameFile(entry.file, file)) && !files.slice(0, i).some((other) => isSameFile(other, file)),
  );

/** The files on the page after a change. */
export function changeEntries(entries: readonly Entry[], change: Change): readonly Entry[] {
  if (change.type === 'chosen') return [...entries, ...change.files.map((file, i) => fresh(file, change.firstId + i))];
  if (change.type === 'left_out') return entries.filter(({ id }) => id !== change.id);
  return entries.map((entry) => (entry.id === change.id ? changeEntry(entry, change) : entry));
}

function changeEntry(entry: Entry, change: Exclude<Change, { type: 'chosen' | 'left_out' }>): Entry {
  switch (change.type) {
    case 'read': {
      // an answer to corrections that have changed since is out of date
      if (change.corrections !== entry.corrections) return entry;
      const target = entry.target.why === 'chosen' || !change.guess ? entry.target : change.guess;
      return { ...entry, read: change.read, rereading: false, target };
    }
    case 'corrected':
      return { ...entry, corrections: change.corrections, rereading: true, sending: { at: 'not_sent' } };
    case 'targeted':
      return { ...entry, target: change.target, sending: { at: 'not_sent' } };
    case 'labelled':
      return { ...entry, label: change.label, sending: { at: 'not_sent' } };
    case 'sending':
      return { ...entry, sending: change.sending };
  }
}
