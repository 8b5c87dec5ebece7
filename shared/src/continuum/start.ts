import type { NoiseModel } from '../noise/index.js';
import { selectInPlace } from '../numeric/select.js';
import type { Spectrum } from '../spectrum/index.js';
import { makeBlockValues, type BlockValues, type Blocks } from './blocks.js';
import { C2_NM_K, lnExpm1, wienPeakNm } from './planck.js';

/** Whether features pull the flux down, push it up, or do neither on the whole. */
export type Pull = 'dips' | 'peaks' | 'neither';

/** First guesses of ln flux per block, and the side to which features pull. */
export interface Start {
  readonly values: BlockValues;
  readonly pull: Pull;
}

/** Samples looked at per block: enough for a quantile to a tenth of the noise. */
const SAMPLES = 96;
const QUARTILE_SIGMA = 0.6744897501960817;

/** Quartiles of each block in one array, three per block; NaN where a block has too few good samples. */
function blockQuartiles({ flux, bad }: Spectrum, blocks: Blocks): Float64Array {
  const out = new Float64Array(3 * blocks.count).fill(NaN);
  const scratch = new Float64Array(2 * SAMPLES);
  for (let b = 0; b < blocks.count; b++) {
    const from = blocks.first[b]!;
    const to = blocks.first[b + 1]!;
    const stride = Math.max(1, Math.floor((to - from) / SAMPLES));
    let m = 0;
    for (let i = from; i < to && m < scratch.length; i += stride) if (!bad[i]) scratch[m++] = flux[i]!;
    if (m < 4) continue;
    const middle = m >> 1;
    out[3 * b + 1] = selectInPlace(scratch, middle, 0, m);
    out[3 * b] = selectInPlace(scratch, m >> 2, 0, middle);
    out[3 * b + 2] = selectInPlace(scratch, (3 * m) >> 2, middle, m);
  }
  return out;
}

/**
 * A first guess per block: the upper quartile where dips dominate, the lower one where peaks do, the median else, each freed of what
 * noise alone makes of it. A block full of narrow dips up to three quarters still shows its continuum there.
 */
export function startValues(spectrum: Spectrum, noise: NoiseModel, blocks: Blocks): Start {
  const quartiles = blockQuartiles(spectrum, blocks);
  const sigma = (b: number) => noise.sigma[(blocks.first[b]! + blocks.first[b + 1]!) >> 1]!;
  let down = 0;
  let up = 0;
  let usable = 0;
  for (let b = 0; b < blocks.count; b++) {
    const half = QUARTILE_SIGMA * sigma(b);
    const middle = quartiles[3 * b + 1]!;
    if (!(middle === middle)) continue;
    down += Math.min(10, (middle - quartiles[3 * b]!) / half);
    up += Math.min(10, (quartiles[3 * b + 2]! - middle) / half);
    usable++;
  }
  const lean = usable ? (down - up) / usable : 0;
  const pull: Pull = lean > 0.15 ? 'dips' : lean < -0.15 ? 'peaks' : 'neither';
  const which = pull === 'dips' ? 2 : pull === 'peaks' ? 0 : 1;
  const values = makeBlockValues(blocks.count);
  for (let b = 0; b < blocks.count; b++) {
    const v = quartiles[3 * b + which]! - (which - 1) * QUARTILE_SIGMA * sigma(b);
    if (!(v > 0)) continue;
    values.value[b] = Math.log(v);
    // a quartile of m samples is good to 1.36 sigma / sqrt(m)
    values.weight[b] = (v / sigma(b)) ** 2 * (Math.min(SAMPLES, blocks.first[b + 1]! - blocks.first[b]!) / 1.85);
  }
  return { values, pull };
}

/** How the best of a grid of Planck curves, with no freedom but the scale, follows the block values. */
export interface PlanckStart {
  readonly temperatureK: number;
  /** root mean square of what is left of ln flux */
  readonly rms: number;
}

/** The grid runs from curves whose peak lies at this many times the longest wavelength up to the Rayleigh-Jeans tail. */
const COOLEST = 6;
const HOTTEST_K = 80_000;

/** Best Planck curve on a grid of temperatures in 10 % steps; `known` is the ln of all that is known beside it. */
export function startPlanck(blocks: Blocks, { value, weight }: BlockValues, known: (nm: number) => number): PlanckStart {
  const { centreNm } = blocks;
  const y = value.map((v, b) => v - known(centreNm[b]!) + 5 * Math.log(centreNm[b]!));
  const stride = Math.max(1, blocks.count >> 6);
  let best: PlanckStart = { temperatureK: 6000, rms: Infinity };
  for (let t = wienPeakNm(blocks.edgeNm[blocks.count]!) / COOLEST; t < HOTTEST_K; t *= 1.1) {
    let m = 0;
    let s1 = 0;
    let s2 = 0;
    for (let b = 0; b < blocks.count; b += stride) {
      if (!(weight[b]! > 0)) continue;
      const d = y[b]! + lnExpm1(C2_NM_K / (centreNm[b]! * t));
      m++;
      s1 += d;
      s2 += d * d;
    }
    const rms = Math.sqrt(Math.max(0, s2 - (s1 * s1) / m) / m);
    if (rms < best.rms) best = { temperatureK: t, rms };
  }
  return best;
}

/** A continuum this near 1, as root mean square of ln flux, may come from a division by a continuum. */
const NEAR_ONE = 0.03;

/** Whether the continuum is 1 all along, and no Planck curve follows it better than the constant does: it was divided by a continuum. */
export function looksNormalised({ values: { value, weight } }: Start, planck: PlanckStart): boolean {
  let m = 0;
  let squares = 0;
  for (let b = 0; b < value.length; b++) {
    if (!(weight[b]! > 0)) continue;
    m++;
    squares += value[b]! * value[b]!;
  }
  const rms = Math.sqrt(squares / m);
  return rms < NEAR_ONE && rms < 1.3 * planck.rms;
}
