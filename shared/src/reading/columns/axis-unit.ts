import type { AxisUnit } from '../types.js';

/** A unit of the file in terms of ours: value * scale is in `unit`. */
export interface ScaledAxisUnit {
  readonly unit: AxisUnit;
  readonly scale: number;
}

const exactly = (unit: AxisUnit, scale = 1): ScaledAxisUnit => ({ unit, scale });

/** Spellings where case matters or is the only sign; 'A' is the ampere elsewhere but never on a spectral axis. */
const SPELLINGS: Record<string, ScaledAxisUnit> = {
  A: exactly('angstrom'),
  Å: exactly('angstrom'),
  m: exactly('m'),
  J: exactly('ev', 1 / 1.602176634e-19),
};
const WORDS: [string, ScaledAxisUnit][] = [
  ['angstrom angstroms angstroem ang aa å a ångström ångströms', exactly('angstrom')],
  ['nm nanometer nanometers nanometre nanometres', exactly('nm')],
  ['um µm μm micron microns micrometer micrometers micrometre micrometres', exactly('micron')],
  ['mm millimetre millimeter', exactly('m', 1e-3)],
  ['cm centimetre centimeter', exactly('m', 1e-2)],
  ['meter metre meters metres', exactly('m')],
  ['pm picometre picometer', exactly('nm', 1e-3)],
  ['hz hertz', exactly('hz')],
  ['khz', exactly('hz', 1e3)],
  ['mhz', exactly('hz', 1e6)],
  ['ghz', exactly('ghz')],
  ['thz', exactly('thz')],
  ['ev', exactly('ev')],
  ['kev', exactly('kev')],
  ['cm-1 1/cm cm**-1 cm^-1 cm**(-1) cm^(-1) /cm kayser', exactly('wavenumber_per_cm')],
  ['m-1 1/m m**-1 m^-1 m**(-1) /m', exactly('wavenumber_per_m')],
  ['um-1 1/um um**-1 um^-1 µm-1 1/µm micron-1 1/micron micron**-1 micron^-1', exactly('wavenumber_per_m', 1e6)],
  ['m/s m.s-1 ms-1 m.s**-1 m*s-1', exactly('velocity', 1e-3)],
  ['km/s km.s-1 kms-1 km.s**-1 kms km*s-1', exactly('velocity')],
];
const BY_WORD = new Map(WORDS.flatMap(([names, unit]) => names.split(' ').map((name) => [name, unit] as const)));

/**
 * A unit text of a file ('Angstrom', 'um', '0.1nm', 'cm**-1', 'log10(Angstrom)') as one of ours; null when it is none.
 * A factor in front multiplies, as VOUnits and the FITS Standard allow.
 */
export function parseAxisUnit(text: string): (ScaledAxisUnit & { log10: boolean }) | null {
  let plain = text.trim();
  const log = /^(?:log10|log|dex)\s*[([]?\s*(.*?)\s*[)\]]?$/i.exec(plain.slice(0, 60));
  if (log) plain = log[1]!;
  const factor = /^(?:(\d+(?:\.\d+)?)|10(?:\*\*|\^)(?:\(([+-]?\d+)\)|([+-]?\d+)))\s*[*. ]?\s*(?=\D)/.exec(plain.slice(0, 60));
  const scale = factor ? (factor[1] !== undefined ? Number(factor[1]) : 10 ** Number(factor[2] ?? factor[3])) : 1;
  const isReciprocal = plain.startsWith('1/');
  const name = (factor && !isReciprocal ? plain.slice(factor[0].length) : plain).trim().replace(/\.$/, '');
  const unit =
    SPELLINGS[name] ?? BY_WORD.get(name.toLowerCase().replace(/\s+/g, ' ')) ?? BY_WORD.get(name.toLowerCase().replace(/\s+/g, ''));
  if (!unit) return null;
  return { unit: unit.unit, scale: unit.scale * (isReciprocal ? 1 : scale), log10: log !== null };
}

/** How a unit is called in sentences. */
export const AXIS_UNIT_NAMES: Record<AxisUnit, string> = {
  m: 'm',
  nm: 'nm',
  angstrom: 'Angstrom',
  micron: 'micrometre',
  wavenumber_per_cm: 'cm^-1',
  wavenumber_per_m: 'm^-1',
  hz: 'Hz',
  ghz: 'GHz',
  thz: 'THz',
  ev: 'eV',
  kev: 'keV',
  velocity: 'km/s',
};
