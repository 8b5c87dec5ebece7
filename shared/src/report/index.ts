export { comparisonCsv } from './comparison-csv.js';
export { lineReportCsv } from './line-report.js';
export type { LineReport, ReportedSpectrum } from './types.js';
export { roundedToError, type Rounded } from './rounding.js';
export { foundCsv } from './found-csv.js';
