import type { NoiseModel } from '../noise/index.js';
import { truncatedNormal } from '../numeric/normal.js';
import type { Spectrum } from '../spectrum/index.js';
import { makeBlockValues, type BlockValues, type Blocks } from './blocks.js';
import { makeWorkspace, measureAgainst, rejectBoxes, type Rejection, type Workspace } from './line-free.js';
import { ripples } from './evenness.js';
import { smoothRipple } from './ripple.js';
import { robustFit, type Freedom } from './robust-fit.js';
import {
  evaluateRows,
  precisionOf,
  RESPONSE,
  type Precision,
  type ResponsePrior,
  type SmoothFit,
  type SmoothModel,
} from './smooth-model.js';
import type { Pull, Start } from './start.js';
import { binned, type Binned } from './binned.js';

/** The smooth continuum after the last round, with what it rests on. */
export interface Refined {
  readonly space: Workspace;
  readonly edgeLevel: Float64Array;
  /** ln flux minus the model's base per block, from the line-free samples, with inverse variances that include their own scatter */
  readonly values: BlockValues;
  readonly fit: SmoothFit;
  /** what the blocks show beyond the smooth fit, in ln flux; null where the response is smooth */
  readonly ripple: Float64Array | null;
}

/** Relative departures that count as a line in wide boxes, round by round: coarse while the level is coarse. */
const COARSE_FLOORS = [0.03, 0.012, 0.005];
const FINE_FLOORS = [0.002, 0.001];
/** In the coarse rounds the response has fewer orders, and long spectra are binned to about this many samples. */
const COARSE_ORDERS = { calibrated: 7, uncalibrated: 14 };
const COARSE_SAMPLES = 16_000;
const MOST_BINNED = 6;
/** Re-weightings of the very first fit, which starts with whole blocks in lines. */
const FIRST_ROUNDS = 5;
const BOX_SIGMAS = 3.2;
/** Weight of a first guess where it stands in for lost samples, as part of what its noise would give it. */
const HOLD = 0.1;

/** Single samples are clipped closer on the side to which features pull; the mean of what noise leaves is then removed. */
function clipFor(pull: Pull) {
  const [low, high] = pull === 'dips' ? [-2, 3] : pull === 'peaks' ? [-3, 2] : [-2.5, 2.5];
  return { low, high, ...truncatedNormal(low, high) };
}

/** Where features pull to one side, a wide departure to the other is more likely a level gone astray, which must be able to come back. */
function rejectionFor(pull: Pull, floor: number, inflation: number): Rejection {
  const against = { sigmas: 1.6 * BOX_SIGMAS, floor: 4 * floor };
  const down = pull === 'peaks' ? against : { sigmas: BOX_SIGMAS, floor };
  const up = pull === 'dips' ? against : { sigmas: BOX_SIGMAS, floor };
  return { sigmasDown: down.sigmas, floorDown: down.floor, sigmasUp: up.sigmas, floorUp: up.floor, inflation };
}

/** Rounds of: level, rejection of what departs from it, smooth fit to what is left; the first ones on a binned spectrum. */
export function refine(
  spectrum: Spectrum,
  noise: NoiseModel,
  blocks: Blocks,
  model: SmoothModel,
  start: Start,
  free: Freedom,
  trust: Float64Array,
): Refined | null {
  const { pull } = start;
  const inflation = Math.max(
    1,
    noise.correlation.reduce((sum, c, lag) => sum + (lag ? 2 * c : c), 0),
  );
  const clip = clipFor(pull);
  const offset = new Float64Array(blocks.count);
  const edgeLevel = new Float64Array(blocks.count + 1);
  const first: BlockValues = {
    value: start.values.value.map((v, b) => v - model.baseCentre[b]!),
    weight: start.values.weight.map((w, b) => w * trust[b]!),
  };
  const uneven = ripples(blocks, model, start, free);
  let ripple: Float64Array | null = null;
  const belief = (response: ResponsePrior, columns: number) => precisionOf(model, response, free, columns);
  let values: BlockValues = { value: first.value, weight: first.weight.slice() };
  let fit: SmoothFit;

  const fitSmooth = (beliefs: readonly Precision[], rounds: number) => {
    const found = robustFit(model, values, beliefs, pull, rounds);
    if (found) fit = found;
    if (found && uneven) ripple = rippleAbout(model, found, values, first);
    return found !== null;
  };
  const lookAgain = (view: Binned, space: Workspace, floor: number, boxInflation: number) => {
    setEdges(edgeLevel, offset, model, fit, ripple);
    measureAgainst(edgeLevel, view, space);
    rejectBoxes(space, rejectionFor(pull, floor, boxInflation));
    values = lineFreeMeans(space, view.blocks, clip, offset);
    for (let b = 0; b < trust.length; b++) values.weight[b] = values.weight[b]! * trust[b]!;
  };

  const coarseColumns = RESPONSE + (free.temperature ? COARSE_ORDERS.calibrated : COARSE_ORDERS.uncalibrated);
  const coarsely = [belief(free.response[0]!, coarseColumns)];
  const finely = free.response.map((response) => belief(response, model.columns));
  if (!fitSmooth(coarsely, FIRST_ROUNDS)) return null;
  const factor = Math.min(MOST_BINNED, Math.floor(spectrum.flux.length / COARSE_SAMPLES));
  const full = binned(spectrum, noise.sigma, blocks, 1, 1);
  const space = makeWorkspace(full);
  const coarse = factor > 1 ? binned(spectrum, noise.sigma, blocks, factor, inflation) : full;
  const coarseSpace = factor > 1 ? makeWorkspace(coarse) : space;
  for (const floor of COARSE_FLOORS) {
    lookAgain(coarse, coarseSpace, floor, factor > 1 ? 1 : inflation);
    fitSmooth(coarsely, 1);
  }
  for (const floor of FINE_FLOORS) {
    lookAgain(full, space, floor, inflation);
    fitSmooth(finely, 2);
  }
  setEdges(edgeLevel, offset, model, fit!, ripple);
  measureAgainst(edgeLevel, full, space);
  return { space, edgeLevel, values, fit: fit!, ripple };
}

/**
 * The ripple that block values show about the smooth fit. Where a whole block has lost its samples, its first guess keeps a weak hold:
 * a level gone astray there would never be called back.
 */
function rippleAbout(model: SmoothModel, { coefficients }: SmoothFit, { value, weight }: BlockValues, first: BlockValues): Float64Array {
  const about = makeBlockValues(value.length);
  evaluateRows(about.value, model.centre, model.columns, coefficients);
  for (let b = 0; b < value.length; b++) {
    const hold = HOLD * first.weight[b]!;
    const lost = weight[b]! < hold;
    about.value[b] = (lost ? first.value[b]! : value[b]!) - about.value[b]!;
    about.weight[b] = lost ? hold : weight[b]!;
  }
  return smoothRipple(about);
}

/** Level at the block edges, and offset of its ln from the base in the block middles. */
function setEdges(
  edgeLevel: Float64Array,
  offset: Float64Array,
  model: SmoothModel,
  { coefficients }: SmoothFit,
  ripple: Float64Array | null,
) {
  evaluateRows(offset, model.centre, model.columns, coefficients);
  evaluateRows(edgeLevel, model.edge, model.columns, coefficients);
  const last = offset.length - 1;
  for (let b = 0; b <= last + 1; b++) {
    const between = ripple ? 0.5 * (ripple[Math.max(0, b - 1)]! + ripple[Math.min(last, b)]!) : 0;
    edgeLevel[b] = Math.exp(model.baseEdge[b]! + edgeLevel[b]! + between);
  }
  if (ripple) for (let b = 0; b <= last; b++) offset[b] = offset[b]! + ripple[b]!;
}

/** Offset of ln flux from the model's base in each block, from the samples that are neither rejected nor clipped. */
function lineFreeMeans(space: Workspace, blocks: Blocks, clip: ReturnType<typeof clipFor>, offset: Float64Array): BlockValues {
  const { residual, rejected, level, inverseSigma } = space;
  const out = makeBlockValues(blocks.count);
  for (let b = 0; b < blocks.count; b++) {
    let s1 = 0;
    let s2 = 0;
    for (let i = blocks.first[b]!; i < blocks.first[b + 1]!; i++) {
      const z = residual[i]!;
      if (rejected[i] || z < clip.low || z > clip.high) continue;
      const r = level[i]! * inverseSigma[i]!;
      s1 += (z - clip.mean) * r;
      s2 += r * r;
    }
    if (!(s2 > 0)) continue;
    // a shift of the level by d moves the mean of the clipped residuals by d times their variance
    out.weight[b] = clip.variance * s2;
    out.value[b] = offset[b]! + Math.max(-0.5, Math.min(0.5, s1 / out.weight[b]!));
  }
  return out;
}
