import type { NoiseModel } from '../noise/index.js';
import { truncatedNormal } from '../numeric/normal.js';
import type { Spectrum } from '../spectrum/index.js';
import { makeBlockValues, type BlockValues, type Blocks } from './blocks.js';
import { makeWorkspace, measureAgainst, rejectBoxes, type Rejection, type Workspace } from './line-free.js';
import { likeliestResponse, robustFit, type Freedom } from './robust-fit.js';
import { evaluateRows, precisionOf, RESPONSE, type ResponsePrior, type SmoothFit, type SmoothModel } from './smooth-model.js';
import type { Pull } from './start.js';
import { binned, type Binned } from './binned.js';

/** The smooth continuum after the last round, with what it rests on. */
export interface Refined {
  readonly space: Workspace;
  readonly edgeLevel: Float64Array;
  /** ln flux minus the model's base per block, from the line-free samples, with inverse variances that include their own scatter */
  readonly values: BlockValues;
  readonly fit: SmoothFit;
}

/** Relative departures that count as a line in wide boxes, round by round: coarse while the level is coarse. */
const COARSE_FLOORS = [0.03, 0.012, 0.005];
const FINE_FLOORS = [0.002, 0.001];
/** In the coarse rounds the response has fewer orders, and long spectra are binned to about this many samples. */
const COARSE_COLUMNS = RESPONSE + 7;
const COARSE_SAMPLES = 16_000;
const MOST_BINNED = 6;
const BOX_SIGMAS = 3.2;

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
  start: BlockValues,
  pull: Pull,
  free: Freedom,
): Refined | null {
  const inflation = Math.max(
    1,
    noise.correlation.reduce((sum, c, lag) => sum + (lag ? 2 * c : c), 0),
  );
  const clip = clipFor(pull);
  const offset = new Float64Array(blocks.count);
  const edgeLevel = new Float64Array(blocks.count + 1);
  let response: ResponsePrior = free.response[0]!;
  let values: BlockValues = { value: start.value.map((v, b) => v - model.baseCentre[b]!), weight: start.weight.slice() };
  let fit = robustFit(model, values, precisionOf(model, response, free, COARSE_COLUMNS), pull, 6);
  if (!fit) return null;
  const round = (view: Binned, space: Workspace, floor: number, boxInflation: number) => {
    setEdges(edgeLevel, offset, model, fit!);
    measureAgainst(edgeLevel, view, space);
    rejectBoxes(space, rejectionFor(pull, floor, boxInflation));
    values = lineFreeMeans(space, view.blocks, clip, offset);
  };
  const factor = Math.min(MOST_BINNED, Math.floor(spectrum.flux.length / COARSE_SAMPLES));
  const full = binned(spectrum, noise.sigma, blocks, 1, 1);
  const space = makeWorkspace(full);
  const coarse = factor > 1 ? binned(spectrum, noise.sigma, blocks, factor, inflation) : full;
  const coarseSpace = factor > 1 ? makeWorkspace(coarse) : space;
  for (const floor of COARSE_FLOORS) {
    round(coarse, coarseSpace, floor, factor > 1 ? 1 : inflation);
    fit = robustFit(model, values, precisionOf(model, response, free, COARSE_COLUMNS), pull, 2) ?? fit;
  }
  for (const floor of FINE_FLOORS) {
    round(full, space, floor, inflation);
    response = likeliestResponse(model, values, response, free);
    fit = robustFit(model, values, precisionOf(model, response, free), pull, 2) ?? fit;
  }
  setEdges(edgeLevel, offset, model, fit);
  measureAgainst(edgeLevel, full, space);
  return { space, edgeLevel, values, fit };
}

/** Level at the block edges, and offset of its ln from the base in the block middles. */
function setEdges(edgeLevel: Float64Array, offset: Float64Array, model: SmoothModel, { coefficients }: SmoothFit) {
  evaluateRows(offset, model.centre, model.columns, coefficients);
  evaluateRows(edgeLevel, model.edge, model.columns, coefficients);
  for (let b = 0; b < edgeLevel.length; b++) edgeLevel[b] = Math.exp(model.baseEdge[b]! + edgeLevel[b]!);
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
