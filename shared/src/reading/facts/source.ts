import type { FluxCalibration } from '../../spectrum/index.js';
import { assumed, notStated, stated } from '../columns/medium.js';
import type { Stated } from '../types.js';

/** A value with the place it was found in. */
export interface Found<T> {
  readonly value: T;
  readonly where: string;
}

/**
 * Where facts are looked up: the cards of FITS headers, or the 'key: value' remarks of a text table. Keywords are written as
 * in FITS ('DATE-OBS'); remarks are matched without regard to case and separators ('date obs'). The first found wins.
 */
export interface FactSource {
  text(...keywords: string[]): Found<string> | null;
  number(...keywords: string[]): Found<number> | null;
}

/** How a keyword is compared: 'DATE-OBS', 'date_obs' and 'Date obs' are one. */
export const plainKey = (keyword: string): string => keyword.toLowerCase().replace(/[_.\s-]+/g, ' ');

/**
 * Degrees from a number or a text: '12.5', '18:03:41.7', '-70 44 33', '18h03m41s'. A sexagesimal text counts units of
 * `perUnit` degrees, 15 for hours of right ascension. Null when it is neither.
 */
export function angleOf(text: string, perUnit = 1): number | null {
  const plain = text.trim().slice(0, 60);
  if (/^[+-]?\d{1,3}(?:\.\d*)?$/.test(plain)) return Number(plain);
  const parts = /^([+-]?)(\d{1,3})(?:[:\s]|h|d|°)\s*(\d{1,2})(?:(?:[:\s]|m|'|′)\s*(\d{1,2}(?:\.\d*)?))?\s*(?:s|"|″)?$/.exec(plain);
  if (!parts) return null;
  const value = Number(parts[2]) + Number(parts[3]) / 60 + Number(parts[4] ?? 0) / 3600;
  return (parts[1] === '-' ? -value : value) * perUnit;
}

/** The first of `keywords` that holds an angle. */
export function findAngle(source: FactSource, keywords: readonly string[], perUnit = 1): Found<number> | null {
  for (const keyword of keywords) {
    const number = source.number(keyword);
    if (number) return number;
    const text = source.text(keyword);
    const value = text && angleOf(text.value, perUnit);
    if (text && value !== null) return { value, where: text.where };
  }
  return null;
}

const CALIBRATIONS: Record<string, FluxCalibration> = {
  ...{ absolute: 'absolute', relative: 'relative', normalized: 'normalised', normalised: 'normalised', calibrated: 'relative' },
  uncalibrated: 'uncalibrated',
};

/** FLUXCAL of archive products, Char.FluxAxis.Calibration of the IVOA Spectrum model. */
export function fluxCalibrationOf(source: FactSource): Stated<FluxCalibration | null> {
  const found = source.text('FLUXCAL', 'FLUX-CALIBRATION');
  const value = found && CALIBRATIONS[found.value.toLowerCase()];
  return value ? stated(value, found.where) : notStated(null);
}

/** LAMRMS counts in nm as the other wavelength cards of archive products (WAVELMIN, WAVELMAX) do; the card itself names no unit. */
export function wavelengthRmsOf(source: FactSource): Stated<number | null> {
  const found = source.number('LAMRMS');
  return found && found.value > 0 && found.value < 10 ? assumed(found.value, `${found.where}, taken as nm`) : notStated(null);
}
