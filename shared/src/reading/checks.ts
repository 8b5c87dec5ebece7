import type { Spectrum } from '../spectrum/index.js';
import type { RawSpectrum } from './raw.js';
import { quoted, refuse } from './refusal.js';
import type { ReadWarning } from './types.js';

/** From gamma rays to the longest radio waves, nm: what lies beyond is no wavelength, and squares of it may overflow. */
const SHORTEST_NM = 1e-6;
const LONGEST_NM = 1e14;
export const isWavelength = (nm: number): boolean => nm > SHORTEST_NM && nm < LONGEST_NM;

/** Wavelengths must be positive; samples without one are left out with a warning. */
export function checkAxis(raw: RawSpectrum, warnings: ReadWarning[]) {
  const nm = raw.axis.nm;
  let usable = 0;
  let firstUnusable = -1;
  for (let i = 0; i < nm.length; i++) {
    const value = nm[i]!;
    if (value < 0) {
      const at = raw.locate(i);
      refuse(
        'negative_wavelength',
        `The wavelength at ${at.words} is negative (column ${quoted(raw.axisName)}); wavelengths must be positive. Check which column holds the wavelengths.`,
        {
          row: at.row,
          column: raw.axisName,
        },
      );
    }
    if (isWavelength(value)) usable++;
    else if (firstUnusable < 0) firstUnusable = i;
  }
  if (usable === 0 && nm.length > 0)
    refuse(
      'no_wavelength',
      `There is no valid wavelength: every value of ${quoted(raw.axisName)} is missing, not a number (NaN), zero or out of range (infinite).`,
      {
        column: raw.axisName,
      },
    );
  if (firstUnusable < 0) return;
  const at = raw.locate(firstUnusable);
  warnings.push({
    code: 'no_wavelength',
    sentence: `${nm.length - usable} samples were left out because their wavelength is missing, zero, out of range or not finite (first at ${at.words}).`,
    row: at.row,
    column: raw.axisName,
  });
}

/** There must be some flux; infinite values become NaN, in place. */
export function checkFlux(raw: RawSpectrum, warnings: ReadWarning[]) {
  const { flux } = raw;
  let min = Infinity;
  let max = -Infinity;
  let missing = 0;
  for (let i = 0; i < flux.length; i++) {
    const value = flux[i]!;
    if (!Number.isFinite(value)) {
      // an infinite flux is as useless as a missing one, and NaN says so
      flux[i] = NaN;
      missing++;
      continue;
    }
    if (value < min) min = value;
    if (value > max) max = value;
  }
  if (missing === flux.length && missing > 0)
    refuse(
      'no_flux',
      `There is no valid flux: every value of column ${quoted(raw.fluxName)} is missing (null) or not a number (NaN). Choose another flux column.`,
      {
        column: raw.fluxName,
      },
    );
  if (missing > 0)
    warnings.push({
      code: 'missing_flux',
      sentence: `${missing} samples have no flux (missing, NaN or infinite) and are not used.`,
      column: raw.fluxName,
    });
  if (min === max && flux.length > 1)
    warnings.push({
      code: 'constant_flux',
      sentence: `The flux is constant: every value of column ${quoted(raw.fluxName)} is ${min}. There is nothing to find in it.`,
      column: raw.fluxName,
    });
}

/** Fewer samples than this cannot hold a continuum and a line. */
const FEW_POINTS = 20;

export function checkSize({ wavelength, bad }: Pick<Spectrum, 'wavelength' | 'bad'>, fluxName: string, warnings: ReadWarning[]) {
  const points = wavelength.length;
  if (points < 2)
    refuse('too_few_points', `The file has ${points === 1 ? 'one usable point' : 'no usable points'}; a spectrum needs at least two.`);
  let usable = 0;
  for (const one of bad) if (one === 0) usable++;
  if (usable < 2)
    refuse(
      'no_usable_sample',
      `Of ${points} samples ${usable === 0 ? 'none' : 'only one'} can be used: elsewhere the flux is missing (NaN), masked or without an uncertainty. Choose other columns.`,
      { column: fluxName },
    );
  if (points < FEW_POINTS)
    warnings.push({ code: 'few_points', sentence: `The spectrum has only ${points} points, too few to fit a continuum or a line.` });
}
