import type { Identification } from '../contract/index.js';
import type { Analysis } from '../identify/index.js';
import type { Line } from '../linelist/index.js';
import type { Reading } from '../reading/index.js';

/** A spectrum in a report, with its current analysis and what people decided on it. */
export interface ReportedSpectrum {
  readonly label: string;
  readonly fileName: string;
  readonly sha256: string;
  readonly reading: Reading;
  /** null: none was completed yet */
  readonly analysis: Analysis | null;
  readonly identifications: readonly Identification[];
}

export interface LineReport {
  readonly programmeName: string;
  readonly targetName: string;
  readonly simulated: boolean;
  readonly spectra: readonly ReportedSpectrum[];
  /** the lines that candidates and decisions name */
  readonly lines: ReadonlyMap<string, Line>;
  readonly programVersion: string;
  /** date and time of writing, ISO 8601 UTC; nothing here reads a clock */
  readonly writtenAt: string;
}
