import { AIR_STARTS_NM, C_M_PER_S, J_PER_EV, PLANCK_J_S, vacuumToAir, type VacuumNm } from '../units/index.js';
import { digits, text, type Cell } from './csv.js';
import { plain, roundedToError } from './rounding.js';
import type { ReportRow } from './rows.js';

export interface Column {
  readonly name: string;
  /** what it holds, with its unit, for the comments */
  readonly what: string;
  readonly cell: (row: ReportRow) => Cell;
}

const PM_PER_NM = 1000;
/** hc in eV cm: an energy of 1 cm^-1 in eV; exact by the definitions of the SI */
const EV_PER_WAVENUMBER = (PLANCK_J_S * C_M_PER_S * 100) / J_PER_EV;

type Measured = (row: ReportRow) => readonly [value: number | null, sigma: number | null];

/** A measured number and its error, rounded together. */
function measured(name: string, unit: string, what: string, of: Measured): Column[] {
  const suffix = unit && `_${unit.replace('/', '_')}`;
  const rounded = (row: ReportRow) => {
    const [value, sigma] = of(row);
    return value === null ? { value: '', sigma: '' } : roundedToError(value, sigma);
  };
  return [
    { name: `${name}${suffix}`, what: `${what}${unit && `, ${unit}`}`, cell: (row) => digits(rounded(row).value) },
    { name: `${name}_err${suffix}`, what: `1 sigma error of ${name}${suffix}`, cell: (row) => digits(rounded(row).sigma) },
  ];
}

const listed = (name: string, what: string, of: (row: ReportRow) => number | null | undefined, most = 10): Column => ({
  name,
  what,
  cell: (row) => {
    const value = of(row);
    return digits(value === null || value === undefined || !Number.isFinite(value) ? '' : plain(value, most));
  },
});

const words = (name: string, what: string, of: (row: ReportRow) => string | null | undefined): Column => ({
  name,
  what,
  cell: (row) => text(of(row) ?? null),
});

const airNm = (restNm: number | null): number | null =>
  restNm === null || restNm < AIR_STARTS_NM ? null : Number(vacuumToAir(restNm as VacuumNm).toFixed(6));
const inEv = (perCm: number | null | undefined): number | null =>
  perCm === null || perCm === undefined ? null : perCm * EV_PER_WAVENUMBER;
const title = ({ species, restNm }: ReportRow['reading']): string =>
  species === null || restNm === null ? 'unidentified' : `${species} ${restNm.toFixed(3)}`;

/** The columns of a line report, in their order. */
export const COLUMNS: readonly Column[] = [
  listed('spectrum', 'number of the spectrum in the comments', (row) => row.spectrum),
  listed('feature', 'number of the feature in the analysis; empty when the newest analysis no longer finds it', (row) => row.feature),
  words('kind', 'A absorption, E emission', (row) => (row.kind === 'dip' ? 'A' : 'E')),
  ...measured('lambda_obs', 'nm', 'measured centre, vacuum wavelength in the velocity frame named above', (row) => [
    row.wavelengthNm,
    row.wavelengthSigmaNm,
  ]),
  listed('lambda_rest_vac_nm', 'rest wavelength in vacuum, nm', ({ reading }) => reading.restNm),
  listed('lambda_rest_air_nm', 'rest wavelength in standard air, nm; empty below 200 nm', ({ reading }) => airNm(reading.restNm)),
  words('title', 'the line in words, rest wavelength in vacuum, nm', ({ reading }) => title(reading)),
  words('species', 'atom, ion, molecule or band; empty: unidentified', ({ reading }) => reading.species),
  listed('ion_stage', '1 neutral, 2 singly ionised; empty for molecules and bands', ({ reading }) => reading.line?.ionStage || null),
  words('multiplet', 'lower and upper term', ({ reading }) => reading.line?.multiplet),
  listed('e_low_ev', 'energy of the lower level, eV', ({ reading }) => inEv(reading.line?.lowerEnergyPerCm), 6),
  listed('log_gf', 'log10 of statistical weight times oscillator strength', ({ reading }) => reading.line?.logGf),
  listed('einstein_a_per_s', 'transition probability, 1/s', ({ reading }) => reading.line?.einsteinA),
  words('source', 'source of the rest wavelength and of log gf', ({ reading }) => reading.source),
  ...measured('ew', 'pm', 'equivalent width (1 pm = 10 mA), positive in absorption', (row) => [
    row.equivalentWidthNm * PM_PER_NM,
    row.equivalentWidthSigmaNm * PM_PER_NM,
  ]),
  ...measured('fwhm', 'pm', 'full width at half depth as observed', (row) => [
    row.fwhmNm * PM_PER_NM,
    row.fwhmSigmaNm === null ? null : row.fwhmSigmaNm * PM_PER_NM,
  ]),
  ...measured('depth', '', 'one minus flux over continuum at the centre; negative in emission', (row) => [row.depth, row.depthSigma]),
  ...measured('rv', 'km/s', 'velocity, positive when receding', ({ reading }) => [reading.velocityKmPerS, reading.velocitySigmaKmPerS]),
  listed('snr', 'signal to noise of the continuum per sample', (row) => row.snr, 4),
  words('family', 'stellar, interstellar, nebular or telluric', ({ reading }) => reading.family),
  words('system', 'velocity system of the analysis', ({ reading }) => reading.systemId),
  listed('probability', 'of the reading, by the analysis; of being no listed line where unidentified', (row) =>
    Number(row.reading.probability.toFixed(6)),
  ),
  words('status', 'accepted, rejected or proposed by a person; unreviewed: the opinion of the analysis', (row) => row.status),
  words('flags', 'cosmic, blend, saturated, edge, band, sky, by_hand (placed by a person); not found again', (row) => row.flags.join(' ')),
  words('reviewer', 'who decided last', (row) => row.reviewer),
  words('reviewed_at', 'when, UTC', (row) => row.reviewedAt),
  words('remark', 'remark on the last decision', (row) => row.remark),
];
