import type { ChangedLine, Line, RowProblem } from '../linelist/index.js';
import type { Medium } from '../units/index.js';
import type { Iso } from './api.js';

/** One version of a list. It never changes; an edit makes a new version that names this one in `previousId`. */
export interface LineListSummary {
  id: string;
  name: string;
  version: string;
  citation: string;
  /** of this programme; others are shared by all programmes */
  own: boolean;
  isDefault: boolean;
  lines: number;
  previousId: string | null;
  createdBy: string | null;
  createdAt: Iso;
  /** no longer offered for analyses */
  archived: boolean;
}
export interface LineListDetail extends LineListSummary {
  /** vacuum nm */
  fromNm: number | null;
  toNm: number | null;
  species: { species: string; lines: number }[];
  /** within this programme */
  analyses: number;
  decisions: { accepted: number; rejected: number; other: number };
}

/** The part `meta` of a multipart upload beside `file`. */
export interface NewLineList {
  name: string;
  version: string;
  /** source of rows that name none */
  citation?: string;
  /** of wavelengths whose column does not say it */
  medium?: Medium;
  /** lines of this list are kept; those of the file come on top, replacing equal ids */
  baseId?: string;
  /** ids of lines of the base to leave out */
  remove?: string[];
  /** the version that this one follows; its name is kept */
  previousId?: string;
  /** only look, store nothing */
  dryRun?: boolean;
}
export interface LineListPreview {
  lines: number;
  first: Line[];
  problems: RowProblem[];
  problemCount: number;
  notes: string[];
  /** against the base, or the version before; null without either. The lists are cut at a hundred each */
  diff: LineListChanges | null;
}
export interface LineListChanges {
  added: Line[];
  removed: Line[];
  changed: ChangedLine[];
  counts: { added: number; removed: number; changed: number; unchanged: number };
}
export interface LineListAnswer {
  preview: LineListPreview;
  /** null after a dry run */
  list: LineListSummary | null;
}

/** Query of the lines of a list; all parts may be left out. */
export interface LineQuery {
  fromNm?: number;
  toNm?: number;
  species?: string;
  /** highest lower energy, cm^-1 */
  lowerEnergyTo?: number;
  after?: string;
  limit?: number;
}
/** One page of rows; `next` asks for the following one, null at the end. */
export interface Page<T> {
  rows: T[];
  next: string | null;
}
