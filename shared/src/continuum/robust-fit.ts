import { MAD_TO_SIGMA, medianInPlace } from '../numeric/select.js';
import type { Blocks, BlockValues } from './blocks.js';
import {
  evaluateRows,
  normalSums,
  solveSmooth,
  type Precision,
  type ResponsePrior,
  type SmoothFit,
  type SmoothModel,
} from './smooth-model.js';
import type { Pull } from './start.js';

const responses = (amplitudes: readonly number[], orders: readonly number[]): ResponsePrior[] =>
  amplitudes.flatMap((amplitude) => orders.map((order) => ({ amplitude, order })));

/** What may vary about the base, and the smooth deviations to choose from; the first of them is where the rounds start. */
export interface Freedom {
  readonly temperature: boolean;
  readonly extinction: boolean;
  readonly response: readonly ResponsePrior[];
}
/** Deviations of a calibrated flux from a Planck curve: per mille to some per cent. */
const CALIBRATED: readonly ResponsePrior[] = [{ amplitude: 0.03, order: 4 }, ...responses([0.002, 0.006, 0.02, 0.06], [2.5, 4, 7, 12])];
/** A response turns once in some per cent of wavelength, not more often: over a short range it has few orders. */
const LN_PER_ORDER = 0.03;
const FEWEST_ORDERS = 1.5;
export function calibratedOver({ edgeNm, count }: Blocks): readonly ResponsePrior[] {
  const most = Math.max(FEWEST_ORDERS, Math.log(edgeNm[count]! / edgeNm[0]!) / LN_PER_ORDER);
  return CALIBRATED.map(({ amplitude, order }) => ({ amplitude, order: Math.min(order, most) }));
}
/** Shapes of a flux that was never calibrated, or was divided by some other continuum. */
export const ANY_SHAPE: readonly ResponsePrior[] = [{ amplitude: 0.5, order: 4 }, ...responses([0.005, 0.05, 0.5, 2], [2.5, 4, 7, 12, 20])];

/**
 * Fit by re-weighting: blocks far off, most of all on the side to which features pull, lose their say; the final weights are written back.
 * @param beliefs what is believed of the coefficients: the first is used for re-weighting, in the end the one that makes the block values
 *   most probable
 */
export function robustFit(
  model: SmoothModel,
  values: BlockValues,
  beliefs: readonly Precision[],
  pull: Pull,
  rounds: number,
): SmoothFit | null {
  const stated = values.weight.slice();
  const fitted = new Float64Array(stated.length);
  const [first] = beliefs as [Precision, ...Precision[]];
  let sums = normalSums(model, values, first.length);
  let fit = solveSmooth(sums, first);
  for (let round = 0; round < rounds && fit; round++) {
    evaluateRows(fitted, model.centre, model.columns, fit.coefficients);
    reweigh(values, fitted, stated, pull);
    sums = normalSums(model, values, first.length);
    fit = solveSmooth(sums, first);
  }
  for (const belief of beliefs.slice(1)) {
    const other = solveSmooth(sums, belief);
    if (other && !(fit && other.lnEvidence <= fit.lnEvidence)) fit = other;
  }
  return fit;
}

/** Tukey's biweight (Beaton & Tukey 1974, Technometrics 16, 147), with a longer reach on the side to which features do not pull. */
function reweigh({ value, weight }: BlockValues, fitted: Float64Array, stated: Float64Array, pull: Pull) {
  const extra = extraVariance(value, fitted, stated);
  for (let b = 0; b < stated.length; b++) {
    if (!(stated[b]! > 0)) continue;
    const variance = 1 / stated[b]! + extra;
    const d = (value[b]! - fitted[b]!) / Math.sqrt(variance);
    const reach = pull === 'neither' ? 5 : d < 0 === (pull === 'dips') ? 4 : 6;
    const u = (d / reach) ** 2;
    weight[b] = u < 1 ? (1 - u) ** 2 / variance : 0;
  }
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
