import { median } from '../numeric/select.js';
import { C_KM_PER_S } from '../units/index.js';
import type { Blocks } from './blocks.js';
import { BALMER_LIMIT_NM } from './smooth-model.js';
import type { Start } from './start.js';

/** Balmer lines alpha to delta, vacuum nm (NIST). */
const BALMER_NM = [656.461, 486.269, 434.169, 410.289];
/** Below this the wings of the higher lines overlap and no continuum is seen down to the Balmer limit. */
const OVERLAP_BELOW_NM = 402;
/** Where wings are looked for, and where the continuum beside them, km/s from the centre. */
const WING_KM_PER_S: readonly [number, number] = [1000, 2600];
const BESIDE_KM_PER_S: readonly [number, number] = [5500, 9000];
/** Wings this deep, in two lines at least, are those of a star's broad hydrogen lines. */
const DEPTH = 0.015;
const SIGNIFICANT = 4;
/** Spectra that look cooler than this, dust or not, have molecular bands rather than broad hydrogen lines, K. */
const COOLEST_K = 4500;
/** Reach of the zones that are left out for wings of 1.5 % depth, and of 6 % and more, km/s. */
const REACH_KM_PER_S: readonly [number, number] = [5000, 8500];

/**
 * 0 for blocks in the wings of broad Balmer lines, 1 elsewhere. Wings are smooth and wide, and a smooth continuum would sink into them;
 * the model bridges them instead. All 1 where the lines are narrow, in emission, or not covered.
 */
export function trustBesideHydrogen(blocks: Blocks, { values: { value, weight } }: Start, startK: number): Float64Array {
  const trust = new Float64Array(blocks.count).fill(1);
  if (startK < COOLEST_K) return trust;
  const depths = BALMER_NM.map((nm) => wingDepth(blocks, value, weight, nm))
    .filter(({ depth, sigma }) => depth > DEPTH && depth > SIGNIFICANT * sigma)
    .map(({ depth }) => depth);
  if (depths.length < 2) return trust;
  const share = Math.min(1, (median(depths) - DEPTH) / (3 * DEPTH));
  const reach = (REACH_KM_PER_S[0] + share * (REACH_KM_PER_S[1] - REACH_KM_PER_S[0])) / C_KM_PER_S;
  for (let b = 0; b < blocks.count; b++) {
    const nm = blocks.centreNm[b]!;
    const overlaps = nm < OVERLAP_BELOW_NM && nm > BALMER_LIMIT_NM - 1;
    if (overlaps || BALMER_NM.some((line) => Math.abs(nm / line - 1) < reach)) trust[b] = 0;
  }
  // nothing may be left out where hardly anything would remain
  return trust.reduce((a, t) => a + t, 0) > 0.3 * blocks.count ? trust : trust.fill(1);
}

/** How far the wings lie below a straight line across the whole profile, as part of the continuum; NaN where not covered on both sides. */
function wingDepth(blocks: Blocks, lnFlux: Float64Array, weight: Float64Array, centreNm: number): { depth: number; sigma: number } {
  let depth = 0;
  let variance = 0;
  for (const side of [-1, 1]) {
    for (const [sign, [near, far]] of [
      [0.5, BESIDE_KM_PER_S],
      [-0.5, WING_KM_PER_S],
    ] as const) {
      const found: number[] = [];
      let weights = 0;
      for (let b = 0; b < blocks.count; b++) {
        const velocity = side * (blocks.centreNm[b]! / centreNm - 1) * C_KM_PER_S;
        if (!(velocity > near && velocity < far && weight[b]! > 0)) continue;
        found.push(lnFlux[b]!);
        weights += weight[b]!;
      }
      depth += sign * median(found);
      variance += (sign * sign * 1.57) / weights; // a median is worth 1 / 1.57 of a mean
    }
  }
  return { depth, sigma: Math.sqrt(variance) };
}
