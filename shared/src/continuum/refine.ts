import type { NoiseModel } from '../noise/index.js';
import { truncatedNormal } from '../numeric/normal.js';
import { MAD_TO_SIGMA, medianInPlace } from '../numeric/select.js';
import type { Spectrum } from '../spectrum/index.js';
import { interpolateLevel, makeBlockValues, type BlockValues, type Blocks } from './blocks.js';
import { makeWorkspace, rejectBoxes, type Rejection, type Workspace } from './line-free.js';
import {
  evaluateRows,
  normalSums,
  precisionOf,
  RESPONSE,
  solveSmooth,
  type ResponsePrior,
  type SmoothFit,
  type SmoothModel,
} from './smooth-model.js';
import type { Pull } from './start.js';

/** The smooth continuum after the last round, with what it rests on. */
export interface Refined {
  readonly space: Workspace;
  readonly edgeLevel: Float64Array;
  /** ln flux minus the model's base per block, from the line-free samples, with inverse variances that include their own scatter */
  readonly values: BlockValues;
  readonly fit: SmoothFit;
  readonly response: ResponsePrior;
}

/** Relative departures that count as a line in wide boxes, round by round: coarse while the level is coarse. */
const FLOORS = [0.03, 0.012, 0.005, 0.002, 0.001];
/** From this floor on the response may take its full number of orders. */
const FINE_BELOW = 0.005;
const COARSE_COLUMNS = RESPONSE + 7;
const BOX_SIGMAS = 3.2;
const responses = (amplitudes: readonly number[], orders: readonly number[]): ResponsePrior[] =>
  amplitudes.flatMap((amplitude) => orders.map((order) => ({ amplitude, order })));

/** What may vary about the base, and the smooth deviations to choose from; the first of them is where the rounds start. */
export interface Freedom {
  readonly temperature: boolean;
  readonly extinction: boolean;
  readonly response: readonly ResponsePrior[];
}
/** Deviations of a calibrated flux from a Planck curve: per mille to some per cent. */
export const CALIBRATED: readonly ResponsePrior[] = [
  { amplitude: 0.03, order: 4 },
  ...responses([0.002, 0.006, 0.02, 0.06], [2.5, 4, 7, 12]),
];
/** Shapes of a flux that was never calibrated, or was divided by some other continuum. */
export const ANY_SHAPE: readonly ResponsePrior[] = [{ amplitude: 0.5, order: 4 }, ...responses([0.005, 0.05, 0.5, 2], [2.5, 4, 7, 12, 20])];

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

/** Rounds of: level, rejection of what departs from it, smooth fit to what is left. */
export function refine(
  spectrum: Spectrum,
  noise: NoiseModel,
  blocks: Blocks,
  model: SmoothModel,
  start: BlockValues,
  pull: Pull,
  free: Freedom,
): Refined | null {
  const space = makeWorkspace(noise.sigma, spectrum.bad);
  const offset = new Float64Array(blocks.count);
  const edgeLevel = new Float64Array(blocks.count + 1);
  const inflation = noise.correlation.reduce((sum, c, lag) => sum + (lag ? 2 * c : c), 0);
  const clip = clipFor(pull);
  let response = free.response[0]!;
  let values: BlockValues = { value: start.value.map((v, b) => v - model.baseCentre[b]!), weight: start.weight.slice() };
  let fit = robustFit(model, values, precisionOf(model, response, free, COARSE_COLUMNS), pull, 6);
  if (!fit) return null;
  for (const floor of FLOORS) {
    setLevel(space, spectrum, blocks, model, fit.coefficients, offset, edgeLevel);
    rejectBoxes(space, rejectionFor(pull, floor, Math.max(1, inflation)));
    values = lineFreeMeans(space, blocks, clip, offset);
    const fine = floor < FINE_BELOW;
    if (fine) response = likeliestResponse(model, values, response, free);
    fit = robustFit(model, values, precisionOf(model, response, free, fine ? model.columns : COARSE_COLUMNS), pull, 2) ?? fit;
  }
  setLevel(space, spectrum, blocks, model, fit.coefficients, offset, edgeLevel);
  return { space, edgeLevel, values, fit, response };
}

function setLevel(
  space: Workspace,
  { wavelength, flux }: Spectrum,
  blocks: Blocks,
  model: SmoothModel,
  coefficients: Float64Array,
  offset: Float64Array,
  edgeLevel: Float64Array,
) {
  const { level, residual, inverseSigma } = space;
  evaluateRows(offset, model.centre, model.columns, coefficients);
  evaluateRows(edgeLevel, model.edge, model.columns, coefficients);
  for (let b = 0; b <= blocks.count; b++) edgeLevel[b] = Math.exp(model.baseEdge[b]! + edgeLevel[b]!);
  interpolateLevel(level, wavelength, blocks, edgeLevel);
  for (let i = 0; i < flux.length; i++) residual[i] = inverseSigma[i] === 0 ? 0 : (flux[i]! - level[i]!) * inverseSigma[i]!;
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

/** Fit by re-weighting: blocks far off, most of all on the side to which features pull, lose their say. Writes the final weights back. */
function robustFit(model: SmoothModel, values: BlockValues, precision: Float64Array, pull: Pull, rounds: number): SmoothFit | null {
  const stated = values.weight.slice();
  const fitted = new Float64Array(stated.length);
  let fit = solveSmooth(normalSums(model, values, precision.length), precision);
  for (let round = 0; round < rounds && fit; round++) {
    evaluateRows(fitted, model.centre, model.columns, fit.coefficients);
    const extra = extraVariance(values.value, fitted, stated);
    for (let b = 0; b < stated.length; b++) {
      if (!(stated[b]! > 0)) continue;
      const variance = 1 / stated[b]! + extra;
      const d = (values.value[b]! - fitted[b]!) / Math.sqrt(variance);
      const reach = pull === 'neither' ? 5 : d < 0 === (pull === 'dips') ? 4 : 6;
      const u = (d / reach) ** 2;
      values.weight[b] = u < 1 ? (1 - u) ** 2 / variance : 0;
    }
    fit = solveSmooth(normalSums(model, values, precision.length), precision);
  }
  return fit;
}

/** Variance that the blocks scatter beyond what their noise explains, from the median of squares. */
function extraVariance(value: Float64Array, fitted: Float64Array, weight: Float64Array): number {
  const squares = new Float64Array(value.length);
  const variances = new Float64Array(value.length);
  let m = 0;
  for (let b = 0; b < value.length; b++) {
    if (!(weight[b]! > 0)) continue;
    squares[m] = Math.abs(value[b]! - fitted[b]!);
    variances[m++] = 1 / weight[b]!;
  }
  if (!m) return 0;
  return Math.max(0, (MAD_TO_SIGMA * medianInPlace(squares, m)) ** 2 - medianInPlace(variances, m));
}

/** The size and smoothness of the response that make the block values most probable. */
function likeliestResponse(model: SmoothModel, values: BlockValues, before: ResponsePrior, free: Freedom): ResponsePrior {
  const trial = { value: values.value, weight: values.weight.slice() };
  if (!robustFit(model, trial, precisionOf(model, before, free), 'neither', 1)) return before;
  const sums = normalSums(model, trial);
  let best = -Infinity;
  let chosen = before;
  for (const response of free.response) {
    const fit = solveSmooth(sums, precisionOf(model, response, free));
    if (!fit || fit.lnEvidence <= best) continue;
    best = fit.lnEvidence;
    chosen = response;
  }
  return chosen;
}
