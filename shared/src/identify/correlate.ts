import { dopplerFactor, featureAt, velocityOf, type FeatureView } from './views.js';

/** Velocities tried, evenly spaced, km/s. */
export interface VelocityGrid {
  readonly from: number;
  readonly step: number;
  readonly count: number;
}

/** What a template of lines looks like: rest wavelengths ascending, and how much each should count. */
export interface Template {
  readonly wavelength: ArrayLike<number>;
  readonly weight: ArrayLike<number>;
}

/**
 * Cross-correlation of features with a template of lines over a velocity grid (Tonry & Davis 1979, AJ 84, 1511; on lists instead of
 * pixels). Each pair of feature and line adds the product of its weights, spread over the feature's own position error.
 * @param spread km/s, 1 sigma allowed to each feature
 * @returns correlation coefficient-like score at each velocity
 */
export function correlate(
  features: readonly FeatureView[],
  featureWeight: ArrayLike<number>,
  spread: ArrayLike<number>,
  template: Template,
  grid: VelocityGrid,
): Float64Array {
  const out = new Float64Array(grid.count);
  const low = dopplerFactor(grid.from);
  const high = dopplerFactor(grid.from + grid.step * (grid.count - 1));
  let sumLines = 0;
  for (let k = 0; k < template.wavelength.length; k++) {
    const weight = template.weight[k]!;
    if (weight <= 0) continue;
    sumLines += weight * weight;
    const rest = template.wavelength[k]!;
    for (let i = featureAt(features, rest * low); i < features.length && features[i]!.wavelength <= rest * high; i++) {
      const product = weight * featureWeight[i]!;
      if (product > 0) addBump(out, grid, velocityOf(features[i]!.wavelength, rest), spread[i]!, product);
    }
  }
  let sumFeatures = 0;
  for (let i = 0; i < features.length; i++) sumFeatures += featureWeight[i]! ** 2;
  const norm = Math.sqrt(sumLines * sumFeatures) || 1;
  for (let i = 0; i < out.length; i++) out[i]! /= norm;
  return out;
}

function addBump(out: Float64Array, grid: VelocityGrid, v: number, sigma: number, height: number): void {
  const s = Math.max(sigma, 0.6 * grid.step);
  const a = Math.max(0, Math.ceil((v - 3 * s - grid.from) / grid.step));
  const z = Math.min(grid.count - 1, Math.floor((v + 3 * s - grid.from) / grid.step));
  for (let i = a; i <= z; i++) {
    const d = (grid.from + i * grid.step - v) / s;
    out[i]! += height * Math.exp(-0.5 * d * d);
  }
}

export interface Peak {
  readonly velocity: number;
  readonly height: number;
  /** height above the grid's median in units of its robust scatter */
  readonly significance: number;
}

/** Local maxima of a score, highest first, at least `apart` km/s from each other. */
export function peaksOf(score: Float64Array, grid: VelocityGrid, apart: number, most: number): Peak[] {
  const sorted = Float64Array.from(score).sort();
  const median = sorted[sorted.length >> 1]!;
  const deviations = sorted.map((v) => Math.abs(v - median)).sort();
  const scatter = 1.4826 * deviations[deviations.length >> 1]! || 1e-12;
  const all: Peak[] = [];
  for (let i = 1; i < score.length - 1; i++) {
    const [a, b, c] = [score[i - 1]!, score[i]!, score[i + 1]!];
    if (b <= 0 || b < a || b <= c) continue;
    const bend = a - 2 * b + c;
    const offset = bend < 0 ? (0.5 * (a - c)) / bend : 0;
    all.push({ velocity: grid.from + (i + offset) * grid.step, height: b, significance: (b - median) / scatter });
  }
  all.sort((p, q) => q.height - p.height || p.velocity - q.velocity);
  const kept: Peak[] = [];
  for (const p of all) {
    if (kept.length >= most) break;
    if (kept.every((k) => Math.abs(k.velocity - p.velocity) >= apart)) kept.push(p);
  }
  return kept;
}
