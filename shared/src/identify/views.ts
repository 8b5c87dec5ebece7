import { C_KM_PER_S } from '../units/index.js';
import type { FeatureFlag } from './analysis.js';

/** A measured feature as the identification sees it. */
export interface FeatureView {
  readonly index: number;
  readonly kind: 'dip' | 'peak';
  /** vacuum nm */
  readonly wavelength: number;
  /** 1 sigma of the centre, km/s */
  readonly sigmaV: number;
  /** log10 of |W| in nm, and its 1 sigma in dex */
  readonly logW: number;
  readonly sigmaLogW: number;
  readonly fwhmNm: number;
  readonly fwhmV: number;
  readonly significance: number;
  readonly flags: readonly FeatureFlag[];
}

/** What the data could have shown where no feature was found. */
export interface Coverage {
  readonly fromNm: number;
  readonly toNm: number;
  /** km/s, FWHM of the instrument profile */
  readonly elementV: number;
  /** matched-filter threshold of the detection, sigma */
  readonly threshold: number;
  /** 1-sigma error of the equivalent width (nm) of a line of the given FWHM (nm) there; NaN where not covered */
  sigmaW(wavelength: number, fwhmNm: number): number;
}

/** How well the wavelength scale of a reduced spectrum can be trusted, km/s: commonly to some hundredths of a resolution element. */
export const scaleSigma = ({ elementV }: Pick<Coverage, 'elementV'>): number => 0.06 * elementV;

/** Coverage of a spectrum from its normalised inverse variances. */
export function coverageOf(wavelength: Float64Array, weight: Float64Array, resolvingPower: number, threshold: number): Coverage {
  const n = wavelength.length;
  const bins = Math.max(1, Math.min(4000, n >> 3));
  const from = wavelength[0]!;
  const to = wavelength[n - 1]!;
  const sum = new Float64Array(bins); // sum of inverse variance a nm
  const count = new Float64Array(bins);
  const good = new Float64Array(bins);
  for (let i = 0; i < n; i++) {
    const b = Math.min(bins - 1, Math.floor(((wavelength[i]! - from) / (to - from)) * bins));
    count[b]!++;
    if (weight[i]! > 0) {
      good[b]!++;
      sum[b]! += weight[i]!;
    }
  }
  const width = (to - from) / bins;
  return {
    fromNm: from,
    toNm: to,
    elementV: C_KM_PER_S / resolvingPower,
    threshold,
    sigmaW(at, fwhmNm) {
      const b = Math.floor(((at - from) / (to - from)) * bins);
      if (b < 0 || b >= bins || good[b]! < 0.5 * count[b]! || at - from < 0.3 * fwhmNm || to - at < 0.3 * fwhmNm) return NaN;
      // amplitude error of a matched filter 1 / sqrt(sum w g^2), with sum g^2 = 0.753 FWHM / step for a Gaussian, times its area 1.064 FWHM
      return (1.0645 * fwhmNm) / Math.sqrt((sum[b]! / width) * 0.753 * fwhmNm);
    },
  };
}

/** Index of the first feature at or beyond a wavelength; features ascend in wavelength. */
export function featureAt(features: readonly FeatureView[], wavelength: number): number {
  let low = 0;
  let high = features.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (features[mid]!.wavelength < wavelength) low = mid + 1;
    else high = mid;
  }
  return low;
}

/** Velocity, km/s, that carries a rest wavelength to an observed one; relativistic, positive receding. */
export function velocityOf(observed: number, rest: number): number {
  const q = (observed / rest) ** 2;
  return (C_KM_PER_S * (q - 1)) / (q + 1);
}

/** Doppler factor of a velocity in km/s. */
export function dopplerFactor(velocity: number): number {
  const beta = velocity / C_KM_PER_S;
  return Math.sqrt((1 + beta) / (1 - beta));
}
