import type { RawSpectrum } from './raw.js';
import { quoted, refuse } from './refusal.js';
import type { ReadWarning } from './types.js';

/**
 * 1 sigma from the uncertainty column, in place; NaN or zero stays where the column gives no usable value. Null when there is
 * no column or none of its values can be used.
 */
export function sigmaOf(raw: RawSpectrum, warnings: ReadWarning[]): Float64Array | null {
  if (!raw.uncertainty) return null;
  const { values, name, kind } = raw.uncertainty;
  let usable = 0;
  for (let i = 0; i < values.length; i++) {
    const value = values[i]!;
    const sigma = kind.value === 'sigma' ? value : kind.value === 'variance' ? Math.sqrt(value) : 1 / Math.sqrt(value);
    values[i] = sigma;
    if (sigma > 0 && sigma < Infinity) usable++;
  }
  if (usable > 0) return values;
  warnings.push({
    code: 'no_uncertainty',
    sentence: `No value of the uncertainty column ${quoted(name)} is a positive number; the uncertainties count as unknown.`,
    column: name,
  });
  return null;
}

/** A mask that takes out more than this share of the samples is not believed. */
const MOST_MASKED = 0.5;

/**
 * 1 where a sample must not be used: no flux, masked, or without a positive sigma although the file gives sigmas.
 * @param isMaskChosen a person named the mask, so it is believed whatever it takes out
 */
export function badSamples(
  raw: RawSpectrum,
  sigma: Float64Array | null,
  isMaskChosen: boolean,
  warnings: ReadWarning[],
): { bad: Uint8Array; maskUsed: boolean } {
  const { flux, mask } = raw;
  const bad = new Uint8Array(flux.length);
  let good = 0;
  for (let i = 0; i < flux.length; i++) {
    if (Number.isNaN(flux[i]!) || (sigma !== null && !(sigma[i]! > 0 && sigma[i]! < Infinity))) bad[i] = 1;
    else good++;
  }
  if (sigma) for (let i = 0; i < sigma.length; i++) if (!(sigma[i]! > 0 && sigma[i]! < Infinity)) sigma[i] = NaN;
  if (good === 0)
    refuse(
      'no_usable_sample',
      'No sample can be used: everywhere the flux is missing or its uncertainty is not a positive number. Choose other columns.',
      { column: raw.fluxName },
    );
  if (!mask) return { bad, maskUsed: false };
  let masked = 0;
  for (let i = 0; i < bad.length; i++) if (!bad[i] && mask.values[i]! >= 1) masked++;
  if (!isMaskChosen && masked > MOST_MASKED * good) {
    warnings.push({
      code: 'mask_not_used',
      sentence: `Column ${quoted(mask.name)} marks ${masked} of ${good} samples, more than half; it was not used as a mask. Its values may be remarks rather than faults.`,
      column: mask.name,
    });
    return { bad, maskUsed: false };
  }
  for (let i = 0; i < bad.length; i++) if (mask.values[i]! >= 1) bad[i] = 1;
  return { bad, maskUsed: true };
}
