import { COLUMNS } from './columns.js';
import { writeCsv } from './csv.js';
import { aboutReport, aboutSpectrum } from './header.js';
import { reportRows } from './rows.js';
import type { LineReport } from './types.js';

/** The line report as CSV: comments that say how to read it, then one row per feature, spectrum by spectrum, by wavelength. */
export function lineReportCsv(report: LineReport): string {
  const comments = [
    ...aboutReport(report),
    ...report.spectra.flatMap((spectrum, i) => aboutSpectrum(spectrum, report.spectra.length > 1 ? i + 1 : null)),
    ...COLUMNS.map(({ name, what }) => `column ${name}: ${what}`),
  ];
  const rows = report.spectra.flatMap((spectrum, i) => reportRows(spectrum, i + 1, report.lines));
  return writeCsv(
    comments,
    COLUMNS.map(({ name }) => name),
    rows.map((row) => COLUMNS.map(({ cell }) => cell(row))),
  );
}
