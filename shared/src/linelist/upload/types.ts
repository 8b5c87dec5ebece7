import type { Line } from '../line.js';
import type { Medium } from '../../units/index.js';

/** A table as text, whatever file it came in: names, and what the file says of each column. */
export interface TextTable {
  readonly columns: readonly TextColumn[];
  readonly rows: readonly TextRow[];
}

export interface TextColumn {
  readonly name: string;
  /** as the file writes it; '' when it says none */
  readonly unit: string;
  readonly utype: string;
  readonly ucd: string;
}

export interface TextRow {
  /** line of the file, or number of the row in a VOTable; from 1 */
  readonly at: number;
  readonly cells: readonly string[];
}

/** What a person says of a list beside what its file says. */
export interface ListStatements {
  /** of wavelengths longer than 200 nm where neither name nor unit of the column says it */
  readonly medium?: Medium;
  /** source of the rows that name none */
  readonly citation?: string;
}

export interface RowProblem {
  readonly row: number;
  readonly column: string;
  /** complete, and says what to do */
  readonly sentence: string;
}

/** What a file of lines holds. With problems it is not stored: all or nothing. */
export interface ParsedLines {
  readonly lines: readonly Line[];
  /** the first hundred */
  readonly problems: readonly RowProblem[];
  readonly problemCount: number;
  /** which column was taken for what, and what was derived; complete sentences */
  readonly notes: readonly string[];
}

/** More lines than this make no list: the analysis holds a list in memory. */
export const MOST_LINES = 200_000;
