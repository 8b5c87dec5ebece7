import type { Reading, ReadingCorrections, SpectrumDetail, TargetKind, TargetSummary, UploadMeta } from '@foreveil/shared';
import type { FileRead } from '../../workers/protocol.js';

/** Where a spectrum goes, and why the page thinks so. */
export interface TargetChoice {
  readonly name: string;
  /** for a target that has yet to be made */
  readonly kind: TargetKind;
  readonly why: 'object' | 'page' | 'file_name' | 'chosen';
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

export type Verdict = 'reading' | 'ready' | 'asks' | 'unreadable' | 'sending' | 'added' | 'duplicate' | 'refused';

export function verdict(entry: Entry): Verdict {
  const { sending, read, rereading } = entry;
  if (sending.at === 'waiting' || sending.at === 'sending') return 'sending';
  if (sending.at !== 'not_sent') return sending.at;
  if (!read || rereading) return 'reading';
  if (!read.ok) return 'unreadable';
  return questions(entry).length ? 'asks' : 'ready';
}

/** Whether leaving the page would lose something a person may still want. */
export const isUnfinished = (entry: Entry): boolean => ['reading', 'ready', 'asks', 'sending', 'refused'].includes(verdict(entry));

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

/** What goes with the bytes. */
export function metaOf({ target, label, corrections }: Entry, targets: readonly TargetSummary[]): UploadMeta {
  const existing = sameTarget(target.name, targets);
  return {
    ...(existing ? { targetId: existing.id } : { targetName: target.name.trim(), targetKind: target.kind }),
    label: label.trim(),
    ...(Object.keys(corrections).length ? { corrections } : {}),
  };
}
