import type { NoiseModel } from '../noise/index.js';
import { medianInPlace } from '../numeric/select.js';
import type { Spectrum } from '../spectrum/index.js';
import type { Blocks } from './blocks.js';
import type { Refined } from './refine.js';
import type { SmoothModel } from './smooth-model.js';

/** How well the continuum holds where it was fitted, and what was left out. */
export interface Quality {
  /** of the samples that were kept; null when none were */
  readonly chi2PerDegree: number | null;
  /** part of the good samples that lie in lines, bands or outliers */
  readonly clippedFraction: number;
  /** part of the blocks without any say in the fit */
  readonly emptyBlocks: number;
  /** light above the continuum beats what is missing below it, and is not negligible */
  readonly emissionDominates: boolean;
}

/** Light in emission lines counts from this equivalent width, per width of the spectrum, on. */
const EMISSION_SHARE = 0.003;

export function describeQuality({ bad, wavelength }: Spectrum, blocks: Blocks, { space, values, fit }: Refined): Quality {
  const { residual, rejected, level, inverseSigma } = space;
  const n = residual.length;
  let kept = 0;
  let good = 0;
  let chi2 = 0;
  let above = 0;
  let below = 0;
  for (let i = 0; i < n; i++) {
    if (bad[i]) continue;
    good++;
    const z = residual[i]!;
    if (!rejected[i]) {
      kept++;
      chi2 += z * z;
    } else {
      const excess = Math.abs(z / (inverseSigma[i]! * level[i]!)) * spacing(wavelength, i);
      // a single bright sample is more likely a cosmic ray than a line
      if (z > 0) above += (residual[i - 1] ?? 0) > 2 || (residual[i + 1] ?? 0) > 2 ? excess : 0;
      else below += excess;
    }
  }
  let empty = 0;
  for (let b = 0; b < blocks.count; b++) if (!(values.weight[b]! > 0)) empty++;
  const range = wavelength[n - 1]! - wavelength[0]!;
  const degrees = kept - fit.coefficients.length;
  return {
    chi2PerDegree: degrees > 0 ? chi2 / degrees : null,
    clippedFraction: good ? (good - kept) / good : 0,
    emptyBlocks: empty / blocks.count,
    emissionDominates: above > 2 * below && above > EMISSION_SHARE * range,
  };
}

const spacing = (wavelength: Float64Array, i: number): number =>
  0.5 * (wavelength[Math.min(wavelength.length - 1, i + 1)]! - wavelength[Math.max(0, i - 1)]!);

/** Dips too weak to be seen lower the level by about this much of the noise per sample, times the part of the samples clipped. */
const UNSEEN_DIPS = 0.15;
/** Blocks looked at for a median over all. */
const ENOUGH_BLOCKS = 64;

/**
 * Relative 1 sigma error of the level, median over the blocks: from the covariance of the smooth fit, and from dips too weak to be clipped,
 * judged from those that were.
 */
export function placementSigma({ fit, space }: Refined, model: SmoothModel, noise: NoiseModel, quality: Quality): number {
  const m = model.columns;
  const blocks = model.centre.length / m;
  const stride = Math.max(1, Math.floor(blocks / ENOUGH_BLOCKS));
  const rows = Math.ceil(blocks / stride);
  const variances = new Float64Array(rows);
  const solved = new Float64Array(m);
  for (let r = 0; r < rows; r++) {
    // the variance is row' (L L')^-1 row = |L^-1 row|^2: one forward substitution
    const at = r * stride * m;
    let sum = 0;
    for (let i = 0; i < m; i++) {
      let v = model.centre[at + i]!;
      for (let k = 0; k < i; k++) v -= fit.factor[i * m + k]! * solved[k]!;
      v /= fit.factor[i * m + i]!;
      solved[i] = v;
      sum += v * v;
    }
    variances[r] = sum;
  }
  const relativeNoise = new Float64Array(rows);
  const step = noise.sigma.length / rows;
  for (let b = 0; b < rows; b++) {
    const i = Math.floor((b + 0.5) * step);
    relativeNoise[b] = Math.abs(noise.sigma[i]! / space.level[i]!);
  }
  return Math.hypot(Math.sqrt(medianInPlace(variances, rows)), UNSEEN_DIPS * quality.clippedFraction * medianInPlace(relativeNoise, rows));
}
