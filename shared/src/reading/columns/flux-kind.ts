import type { FluxKind } from '../../spectrum/index.js';
import { corrected } from '../corrections.js';
import type { ReadingCorrections, Stated } from '../types.js';
import type { ColumnInfo } from './choose.js';
import { fluxKindOfUnit } from './flux-unit.js';
import { assumed, notStated, stated } from './medium.js';
import { saysNormalised } from './words.js';

const BY_NAME: [RegExp, FluxKind][] = [
  [/^f(?:lux)?_?(?:lam|lambda)$/, 'per_wavelength'],
  [/^f(?:lux)?_?nu$/, 'per_frequency'],
  [/^(?:counts?|cts|adu|electrons)$/, 'counts'],
];

/**
 * What the flux is: by its unit, its UCD, its name, or a card that says the continuum was divided out (`normalised`).
 * `where` names the place of the unit.
 */
export function fluxKindOf(info: Pick<ColumnInfo, 'name' | 'unit' | 'ucd'>, where: string, normalised: boolean): Stated<FluxKind> {
  const byUnit = fluxKindOfUnit(info.unit);
  if (byUnit) return stated(byUnit, where);
  const ucd = info.ucd.toLowerCase();
  if (ucd.includes('arith.ratio')) return stated('normalised', 'UCD');
  if (saysNormalised(info.name)) return stated('normalised', 'column name');
  if (normalised) return stated('normalised', 'CONTNORM');
  const byName = BY_NAME.find(([pattern]) => pattern.test(info.name.toLowerCase()))?.[1];
  if (byName) return stated(byName, 'column name');
  if (ucd.startsWith('phot.count')) return stated('counts', 'UCD');
  if (/^phot\.flux\.density;(?:.*;)?em\.wl/.test(ucd)) return assumed('per_wavelength', 'UCD');
  if (/^phot\.flux\.density;(?:.*;)?em\.freq/.test(ucd)) return assumed('per_frequency', 'UCD');
  return notStated('unknown');
}

/** The flux unit as a person corrected it, or as the file gives it at `where`. */
export function settleFluxUnit(unit: string, where: string, corrections: ReadingCorrections): Stated<string> {
  return corrected(corrections.fluxUnit, unit === '' ? notStated('') : stated(unit, where));
}
