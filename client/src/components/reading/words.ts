import type {
  AxisUnit,
  FluxKind,
  Frame,
  How,
  Medium,
  ObservingTime,
  ReadingCorrections,
  Stated,
  TimeMark,
  TimeScale,
  UncertaintyKind,
} from '@foreveil/shared';
import { declination, rightAscension } from '../../lib/position.js';

export const MEDIUM_WORD: Record<Medium, string> = { vacuum: 'vacuum', air: 'air' };

export const FRAME_WORD: Record<Frame, string> = {
  topocentric: 'topocentric',
  geocentric: 'geocentric',
  heliocentric: 'heliocentric',
  barycentric: 'barycentric',
  lsrk: 'local standard of rest, kinematic',
  lsrd: 'local standard of rest, dynamic',
  source: 'rest frame of the source',
  unknown: 'not known',
};

export const FLUX_WORD: Record<FluxKind, string> = {
  per_wavelength: 'per wavelength',
  per_frequency: 'per frequency',
  normalised: 'normalised to the continuum',
  counts: 'counts',
  unknown: 'not known',
};

export const UNIT_WORD: Record<AxisUnit, string> = {
  m: 'm',
  nm: 'nm',
  angstrom: 'Å',
  micron: 'µm',
  wavenumber_per_cm: 'cm⁻¹',
  wavenumber_per_m: 'm⁻¹',
  hz: 'Hz',
  ghz: 'GHz',
  thz: 'THz',
  ev: 'eV',
  kev: 'keV',
  velocity: 'km/s',
};

export const ERROR_WORD: Record<UncertaintyKind, string> = {
  sigma: 'standard deviation',
  variance: 'variance',
  inverse_variance: 'inverse variance',
};

export const SCALE_WORD: Record<TimeScale, string> = {
  utc: 'UTC',
  tai: 'TAI',
  tt: 'TT',
  tdb: 'TDB',
  ut1: 'UT1',
  gps: 'GPS',
  unknown: 'scale not known',
};

export const MARK_WORD: Record<TimeMark, string> = { start: 'start', mid: 'middle', end: 'end', unknown: 'which part not known' };

const HOW_WORD: Record<How, string> = { stated: 'stated', assumed: 'assumed', corrected: 'said by you', not_stated: 'not stated' };

/** How a fact is known. What the file does not say stands out, because it may be wrong; beside a correction, what the file said. */
export function howKnown<T>(
  { how, where, said }: Pick<Stated<T>, 'how' | 'where' | 'said'>,
  inWords?: (value: T) => string,
): { words: string; loud: boolean } {
  if (how === 'corrected') return { words: HOW_WORD.corrected + saidInWords(said, inWords), loud: false };
  return { words: HOW_WORD[how] + (where ? `, ${where}` : ''), loud: how === 'assumed' || how === 'not_stated' };
}

function saidInWords<T>(said: Stated<T>['said'], inWords?: (value: T) => string): string {
  if (!said || !inWords) return '';
  if (said.how === 'not_stated' || said.value === null) return '; the file does not say';
  return `; the file: ${inWords(said.value)}${said.how === 'assumed' ? ', assumed' : ''}`;
}

/** Choices of a Select from a table of words. */
export const optionsOf = <K extends string>(words: Record<K, string>): { value: K; label: string }[] =>
  (Object.entries(words) as [K, string][]).map(([value, label]) => ({ value, label }));

/** One more correction, or one less: a value equal to what stands is no correction. */
export function withCorrection<K extends keyof ReadingCorrections>(
  corrections: ReadingCorrections,
  field: K,
  value: ReadingCorrections[K] | undefined,
): ReadingCorrections {
  const next = { ...corrections, [field]: value };
  if (value === undefined) delete next[field];
  return next;
}

export const timeWords = ({ iso, scale, marks }: ObservingTime): string =>
  `${iso.replace('T', ' ')} ${SCALE_WORD[scale]}, ${MARK_WORD[marks]}`;

type Says = { [K in keyof ReadingCorrections]-?: (value: NonNullable<ReadingCorrections[K]> | null) => string };
const of =
  <T>(say: (value: NonNullable<T>) => string, none = 'none') =>
  (value: NonNullable<T> | null) =>
    value === null ? none : say(value);

const SAYS: Says = {
  place: of((place) => `part ${place}`),
  wavelengthColumn: of((name) => `wavelength in ${name}`),
  fluxColumn: of((name) => `flux in ${name}`),
  uncertaintyColumn: of((name) => `error in ${name}`, 'no error column'),
  uncertaintyKind: of((kind: UncertaintyKind) => `error is a ${ERROR_WORD[kind]}`),
  maskColumn: of((name) => `mask in ${name}`, 'no mask'),
  axisUnit: of((unit: AxisUnit) => `axis in ${UNIT_WORD[unit]}`),
  restWavelengthNm: of((nm) => `rest wavelength ${nm} nm`),
  medium: of((medium: Medium) => MEDIUM_WORD[medium]),
  frame: of((frame: Frame) => `frame ${FRAME_WORD[frame]}`),
  fluxUnit: of((unit) => `flux in ${unit}`),
  fluxKind: of((kind: FluxKind) => `flux ${FLUX_WORD[kind]}`),
  resolvingPower: of((r) => `resolving power ${r}`),
  objectName: of((name) => `object ${name}`),
  time: of((time: ObservingTime) => timeWords(time)),
  exposureS: of((s) => `exposure ${s} s`),
  site: of(({ latitudeDeg, longitudeDegEast, heightM }) => `site ${latitudeDeg}°, ${longitudeDegEast}° east, ${heightM} m`),
  pointing: of(({ raDeg, decDeg }) => `pointing ${rightAscension(raDeg)} ${declination(decDeg)}`),
  delimiter: of((cell) => `cells parted by ${cell === '\t' ? 'tabs' : cell === ' ' ? 'blanks' : `"${cell}"`}`),
  decimalComma: of((comma) => (comma ? 'decimal comma' : 'decimal point')),
};

/** What was corrected, one phrase a field. */
export const correctionWords = (corrections: ReadingCorrections): string[] =>
  (Object.entries(corrections) as [keyof ReadingCorrections, never][]).flatMap(([field, value]) =>
    value === undefined || !(field in SAYS) ? [] : SAYS[field](value),
  );
