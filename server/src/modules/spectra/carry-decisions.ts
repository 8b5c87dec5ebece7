import { dopplerFactor, velocityOfFactor, type KmPerS } from '@foreveil/shared';

type Samples = { readonly wavelength: Float64Array; readonly flux: Float64Array };
/** null: the new reading has no such place */
type WavelengthMap = (nm: number) => number | null;

/**
 * From wavelengths of one reading of a file to those of another. Where both hold the same samples, in the same order or the opposite one
 * (a wavenumber taken for a wavelength), a place between two samples of the one lies between the same two of the other.
 */
export function wavelengthMap(before: Samples, after: Samples): WavelengthMap {
  const from = before.wavelength;
  const to = after.wavelength;
  const n = from.length;
  if (n !== to.length || n < 2) return () => null;
  const same = (other: Float64Array, mine: Float64Array) => mine.every((value, i) => Object.is(value, other[i]));
  if (same(to, from)) return within(from, (nm) => nm);
  if (same(after.flux, before.flux)) return within(from, (nm) => interpolate(nm, from, to));
  const reversed = (column: Float64Array) => Float64Array.from(column).reverse();
  if (!same(reversed(after.flux), before.flux)) return () => null;
  const backwards = reversed(to);
  return within(from, (nm) => interpolate(nm, from, backwards));
}

const within =
  (range: Float64Array, map: (nm: number) => number): WavelengthMap =>
  (nm) =>
    nm >= range[0]! && nm <= range[range.length - 1]! ? map(nm) : null;

function interpolate(nm: number, from: Float64Array, to: Float64Array): number {
  let [low, high] = [0, from.length - 1];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (from[middle]! <= nm) low = middle;
    else high = middle;
  }
  const step = from[high]! - from[low]!;
  const share = step > 0 ? (nm - from[low]!) / step : 0;
  return to[low]! + share * (to[high]! - to[low]!);
}

export interface Placed {
  readonly wavelengthNm: number;
  readonly wavelengthSigmaNm: number;
  readonly fwhmNm: number;
  readonly equivalentWidthNm: number;
  readonly equivalentWidthSigmaNm: number;
  /** null where 'unidentified' was decided */
  readonly velocityKmPerS: number | null;
}

/** A decision at its place in the new reading: widths grow with the wavelength, the velocity by the shift. Null: there is no such place. */
export function carried(decision: Placed, map: WavelengthMap): Placed | null {
  const wavelengthNm = map(decision.wavelengthNm);
  if (wavelengthNm === null || !(wavelengthNm > 0)) return null;
  const scale = wavelengthNm / decision.wavelengthNm;
  const { velocityKmPerS: velocity } = decision;
  return {
    wavelengthNm,
    wavelengthSigmaNm: decision.wavelengthSigmaNm * scale,
    fwhmNm: decision.fwhmNm * scale,
    equivalentWidthNm: decision.equivalentWidthNm * scale,
    equivalentWidthSigmaNm: decision.equivalentWidthSigmaNm * scale,
    velocityKmPerS: velocity === null ? null : velocityOfFactor(dopplerFactor(velocity as KmPerS) * scale),
  };
}
