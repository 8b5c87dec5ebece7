import type { ContinuumMove } from '../identify/analysis.js';
import type { ContinuumFit } from './model.js';

/** Part of a region, at each end, over which a correction fades. */
const FADE = 0.25;
/** Samples of the drawn continuum within a correction. */
const DRAWN = 24;

/** Factor of one correction at a wavelength: in full over the middle half of its region, 1 outside, a cosine between. */
export function moveAt({ fromNm, toNm, factor }: ContinuumMove, nm: number): number {
  const x = (nm - fromNm) / (toNm - fromNm);
  if (x <= 0 || x >= 1) return 1;
  const inside = Math.min(x, 1 - x) / FADE;
  return inside >= 1 ? factor : 1 + (factor - 1) * 0.5 * (1 - Math.cos(Math.PI * inside));
}

/**
 * The continuum with a person's corrections: level and drawn samples, more of which stand where a correction bends the curve.
 * The error of the placement stays as fitted: how sure the person is, nobody knows.
 */
export function moveContinuum(fit: ContinuumFit, wavelength: Float64Array, moves: readonly ContinuumMove[]): ContinuumFit {
  if (moves.length === 0) return fit;
  const factor = (nm: number) => moves.reduce((product, move) => product * moveAt(move, nm), 1);
  const { sampleNm, sampleFlux } = fit.summary;
  const first = sampleNm[0] ?? 0;
  const last = sampleNm.at(-1) ?? 0;
  const extra = moves.flatMap(({ fromNm, toNm }) => Array.from({ length: DRAWN + 1 }, (_, i) => fromNm + ((toNm - fromNm) * i) / DRAWN));
  const places = [...new Set([...sampleNm, ...extra.filter((nm) => nm > first && nm < last)])].sort((a, b) => a - b);
  return {
    ...fit,
    level: fit.level.map((value, i) => value * factor(wavelength[i]!)),
    summary: { ...fit.summary, sampleNm: places, sampleFlux: places.map((nm) => between(sampleNm, sampleFlux, nm) * factor(nm)) },
  };
}

/** Linear between samples in ascending order; at and beyond the ends the nearest sample. */
function between(x: readonly number[], y: readonly number[], at: number): number {
  let low = 0;
  let high = x.length - 1;
  while (high - low > 1) {
    const mid = (low + high) >> 1;
    if (x[mid]! <= at) low = mid;
    else high = mid;
  }
  const span = x[high]! - x[low]!;
  const t = span > 0 ? Math.max(0, Math.min(1, (at - x[low]!) / span)) : 0;
  return y[low]! + t * (y[high]! - y[low]!);
}
