import { profileOf, type Component } from './component.js';

/** Flux over continuum with inverse variances (0 where a sample must not count); columns of equal length. */
export interface NormalisedSamples {
  /** vacuum nm, ascending */
  readonly wavelength: Float64Array;
  readonly flux: Float64Array;
  readonly weight: Float64Array;
}

/** Index of the first sample at or beyond a wavelength. */
export function indexAt(wavelength: Float64Array, value: number): number {
  let low = 0;
  let high = wavelength.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (wavelength[mid]! < value) low = mid + 1;
    else high = mid;
  }
  return low;
}

/** Multiplies a dip into `dips`, or adds a peak to `peaks`, over samples [from, to); both arrays begin at sample `offset`. */
export function addComponent(
  c: Component,
  wavelength: Float64Array,
  from: number,
  to: number,
  dips: Float64Array,
  peaks: Float64Array,
  offset = from,
): void {
  const a = Math.max(from, indexAt(wavelength, c.centre - c.reach));
  const z = Math.min(to, indexAt(wavelength, c.centre + c.reach));
  const phi = profileOf(c);
  for (let i = a; i < z; i++) {
    const p = phi(wavelength[i]!);
    if (c.kind === 'dip') dips[i - offset]! *= 1 - c.amplitude * p;
    else peaks[i - offset]! += c.amplitude * p;
  }
}
