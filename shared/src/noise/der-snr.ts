import { medianInPlace } from '../numeric/index.js';

/** Gaussian sigma over the median of |2 f(i) - f(i-2) - f(i+2)| for white noise: 1.482602 / sqrt(6). */
export const DIFFERENCE_TO_SIGMA = 1.482602218505602 / Math.sqrt(6);

export interface DerSnr {
  /** median flux, in the unit of the flux */
  readonly signal: number;
  /** 1 sigma per pixel, in the unit of the flux */
  readonly noise: number;
  /** NaN when the noise is 0 */
  readonly signalToNoise: number;
}

/**
 * Noise of a spectrum from its own third-order differences: blind to slopes and curvature, robust against lines and outliers.
 * NaN samples and exact zeros (padding) are left out first. Null with fewer than five samples. It is too small for noise that is
 * correlated from pixel to pixel.
 * Source: DER_SNR, Stoehr et al. 2008, ASP Conf. Ser. 394, 505.
 */
export function derSnr(flux: ArrayLike<number>): DerSnr | null {
  const kept = new Float64Array(flux.length);
  let n = 0;
  for (let i = 0; i < flux.length; i++) {
    const value = flux[i]!;
    if (value === value && value !== 0) kept[n++] = value;
  }
  if (n < 5) return null;
  const differences = new Float64Array(n - 4);
  for (let i = 2; i < n - 2; i++) differences[i - 2] = Math.abs(2 * kept[i]! - kept[i - 2]! - kept[i + 2]!);
  const noise = DIFFERENCE_TO_SIGMA * medianInPlace(differences, differences.length);
  const signal = medianInPlace(kept, n);
  return { signal, noise, signalToNoise: noise > 0 ? signal / noise : NaN };
}
