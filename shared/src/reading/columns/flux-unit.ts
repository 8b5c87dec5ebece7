import type { FluxKind } from '../../spectrum/index.js';

const PER_WAVELENGTH = new Set('angstrom angstroms ang aa a å nm um µm μm micron microns'.split(' '));
const PER_FREQUENCY = new Set(['hz', 'ghz', 'mhz', 'thz']);
const JANSKY = /^(?:u|µ|m|k)?jy$/;
const COUNTS = new Set('count counts ct cts adu dn du electron electrons photon photons ph'.split(' '));

/**
 * What a flux unit measures: 'erg/s/cm**2/Angstrom', 'W m-2 um-1', '1E-17 erg/cm^2/s/Ang', 'Jy', 'count'.
 * Null when the unit is empty or says nothing.
 */
export function fluxKindOfUnit(text: string): FluxKind | null {
  const unit = text.trim().toLowerCase().slice(0, 200);
  if (unit === '') return null;
  if (unit === 'flam') return 'per_wavelength';
  if (unit === 'fnu') return 'per_frequency';
  const powers = unitPowers(unit);
  for (const [name, power] of powers) if (JANSKY.test(name) && power > 0) return 'per_frequency';
  for (const [name, power] of powers) if (PER_FREQUENCY.has(name) && power < 0) return 'per_frequency';
  for (const [name, power] of powers) if (PER_WAVELENGTH.has(name) && power < 0) return 'per_wavelength';
  // W m-3: an area and a length together
  if (powers.some(([name, power]) => name === 'm' && power === -3)) return 'per_wavelength';
  if (powers.some(([name, power]) => COUNTS.has(name) && power > 0)) return 'counts';
  return null;
}

/**
 * Unit names with their exponents. A slash turns the next name, or all names of the next bracket, into the denominator.
 * Numbers in front are skipped.
 */
function unitPowers(unit: string): [string, number][] {
  const plain = unit
    .replace(/(?:\*\*|\^)\(([+-]?\d+)\)/g, '$1')
    .replace(/\*\*|\^/g, '')
    .replace(/\be-(?!\d)/g, 'electron');
  const powers: [string, number][] = [];
  let below = false;
  let bracketBelow = false;
  for (const [token, name, exponent] of plain.matchAll(/[/()]|\d+(?:\.\d+)?(?:e?[+-]\d+)?|(\p{L}+)([+-]?\d+)?/gu)) {
    if (token === '/') below = true;
    else if (token === '(') bracketBelow = below;
    else if (token === ')') bracketBelow = false;
    if (name === undefined) continue;
    const power = Number(exponent ?? 1);
    powers.push([name, below || bracketBelow ? -power : power]);
    below = false;
  }
  return powers;
}

/** erg s-1 cm-2 Hz-1 in one unit of a flux per frequency; null when the unit is not one of the common ones. */
export function cgsPerHz(text: string): number | null {
  const unit = text.trim().toLowerCase().replace(/\s+/g, ' ');
  const jansky: Record<string, number> = { jy: 1e-23, mjy: 1e-26, ujy: 1e-29, µjy: 1e-29 };
  if (unit in jansky) return jansky[unit]!;
  const plain = unit.replace(/\*\*|\^/g, '');
  if (['erg/s/cm2/hz', 'erg s-1 cm-2 hz-1', 'erg/cm2/s/hz', 'erg.s-1.cm-2.hz-1', 'fnu'].includes(plain)) return 1;
  return ['w/m2/hz', 'w m-2 hz-1', 'w.m-2.hz-1'].includes(plain) ? 1e3 : null;
}
