import type { FoundIdentification, IdentificationQuery } from '../contract/index.js';
import { digits, text, writeCsv, type Cell } from './csv.js';
import { roundedToError } from './rounding.js';

interface FoundReport {
  readonly rows: readonly FoundIdentification[];
  readonly query: IdentificationQuery;
  /** more were found than the file holds */
  readonly cut: boolean;
  readonly programVersion: string;
  readonly writtenAt: string;
}

const PM_PER_NM = 1000;

const NAMES = [
  ...['programme', 'target', 'spectrum', 'species', 'family', 'lambda_rest_nm', 'lambda_obs_nm', 'lambda_obs_err_nm', 'ew_pm', 'ew_err_pm'],
  ...['rv_km_s', 'rv_err_km_s', 'probability', 'status', 'decided_by', 'decided_at', 'list_ref', 'simulated'],
];

/** What a search found, one row an identification, numbers rounded to their errors. */
export function foundCsv({ rows, query, cut, programVersion, writtenAt }: FoundReport): string {
  const asked = Object.entries(query).filter(([, value]) => value !== undefined);
  const comments = [
    `Identifications found by Foreveil ${programVersion} on ${writtenAt}`,
    `search: ${asked.length ? asked.map(([name, value]) => `${name} ${String(value)}`).join(', ') : 'all accepted'}`,
    'wavelengths: vacuum nm in the frame of each spectrum; equivalent width: pm, positive in absorption; velocity: km/s, positive receding',
    ...(cut ? [`only the first ${rows.length} rows: more were found`] : []),
  ];
  return writeCsv(comments, NAMES, rows.map(cells));
}

function cells(row: FoundIdentification): Cell[] {
  const pair = (value: number | null, sigma: number | null): Cell[] => {
    if (value === null) return [digits(''), digits('')];
    const rounded = roundedToError(value, sigma);
    return [digits(rounded.value), digits(rounded.sigma)];
  };
  return [
    text(row.programmeName),
    text(row.targetName),
    text(row.spectrumLabel),
    text(row.species ?? 'unidentified'),
    text(row.family),
    digits(row.restNm === null ? '' : String(row.restNm)),
    ...pair(row.wavelengthNm, row.wavelengthSigmaNm),
    ...pair(row.equivalentWidthNm * PM_PER_NM, row.equivalentWidthSigmaNm * PM_PER_NM),
    ...pair(row.velocityKmPerS, row.velocitySigmaKmPerS),
    digits(row.probability.toFixed(3)),
    text(row.state),
    text(row.decidedBy),
    text(row.decidedAt),
    text(row.lineSource),
    text(row.simulated ? 'simulated' : ''),
  ];
}
