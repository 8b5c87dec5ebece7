import { chebyshevInto } from '../numeric/chebyshev.js';
import { choleskyInPlace, choleskySolve } from '../numeric/linear.js';
import { scaledPosition, type BlockValues, type Blocks } from './blocks.js';
import { extinctionCurve } from './extinction.js';
import { planckSlope } from './planck.js';

/** ln of a factor per magnitude. */
export const LN_PER_MAG = 0.4 * Math.LN10;
/** Wavelength of the Balmer limit in vacuum, nm; the confluent last lines hide it up to about 372 nm. */
export const BALMER_LIMIT_NM = 364.7;
const JUMP_MIDDLE_NM = 367.5;
const JUMP_WIDTH_NM = 2.5;

/** Columns of the linear model of ln flux: scale, ln temperature, visual extinction, Balmer jump, then Chebyshev orders 1, 2, ... */
export const SCALE = 0;
export const LN_T = 1;
export const AV = 2;
export const JUMP = 3;
export const RESPONSE = 4;

/**
 * ln flux = base + sum of coefficients times columns: everything a smooth continuum may do, linear about its base, which is the ln of a
 * Planck curve with the given extinction, or 0 where nothing is said of temperatures. Rows are block middles or block edges.
 */
export interface SmoothModel {
  readonly columns: number;
  readonly hasJump: boolean;
  readonly baseCentre: Float64Array;
  readonly baseEdge: Float64Array;
  readonly centre: Float64Array;
  readonly edge: Float64Array;
  readonly orders: number;
  /** Chebyshev polynomials 0 to 2 * orders in the block middles, row by row */
  readonly series: Float64Array;
}

/** `slopeTemperatureK`: where the column of ln T, if it is to be used, takes the slope of the Planck curve. */
export function makeSmoothModel(blocks: Blocks, base: (nm: number) => number, slopeTemperatureK: number, orders: number): SmoothModel {
  const columns = RESPONSE + orders;
  const series = new Float64Array(blocks.count * (2 * orders + 1));
  for (let b = 0; b < blocks.count; b++) {
    chebyshevInto(series, scaledPosition(b + 0.5, blocks.count), 2 * orders, b * (2 * orders + 1));
  }
  const rows = (nm: Float64Array, shift: number) => {
    const out = new Float64Array(nm.length * columns);
    const polynomials = new Float64Array(orders + 1);
    for (let b = 0; b < nm.length; b++) {
      const at = b * columns;
      out[at + SCALE] = 1;
      out[at + LN_T] = planckSlope(nm[b]!, slopeTemperatureK);
      out[at + AV] = -LN_PER_MAG * extinctionCurve(nm[b]!);
      out[at + JUMP] = -1 / (1 + Math.exp((nm[b]! - JUMP_MIDDLE_NM) / JUMP_WIDTH_NM));
      chebyshevInto(polynomials, scaledPosition(b + shift, blocks.count), orders);
      for (let k = 1; k <= orders; k++) out[at + RESPONSE + k - 1] = polynomials[k]!;
    }
    return out;
  };
  return {
    columns,
    hasJump: blocks.edgeNm[0]! < BALMER_LIMIT_NM - 2 && blocks.edgeNm[blocks.count]! > 390,
    baseCentre: blocks.centreNm.map(base),
    baseEdge: blocks.edgeNm.map(base),
    centre: rows(blocks.centreNm, 0.5),
    edge: rows(blocks.edgeNm, 0),
    orders,
    series,
  };
}

/** What is believed of the coefficients beforehand: independent normal deviates about 0 with these inverse variances. */
export type Precision = Float64Array;
const HELD = 1e12;

/** How much a response may deviate: coefficients of order k are about `amplitude / (1 + (k / order)^4)`. */
export interface ResponsePrior {
  readonly amplitude: number;
  readonly order: number;
}

export function precisionOf(
  model: SmoothModel,
  response: ResponsePrior,
  free: { temperature: boolean; extinction: boolean },
  columns = model.columns,
): Precision {
  const precision = new Float64Array(columns);
  precision[LN_T] = free.temperature ? 1 : HELD;
  precision[AV] = free.extinction ? 1 : HELD;
  precision[JUMP] = model.hasJump ? 4 : HELD;
  for (let k = 1; RESPONSE + k - 1 < columns; k++) {
    const sd = response.amplitude / (1 + (k / response.order) ** 4);
    precision[RESPONSE + k - 1] = 1 / (sd * sd);
  }
  return precision;
}

/** What a weighted fit of the model needs: lower triangle of the normal matrix, right side, weighted sum of squares. */
export interface NormalSums {
  readonly matrix: Float64Array;
  readonly right: Float64Array;
  readonly squares: number;
}

/**
 * Sums over the blocks for the first `m` columns of the model. Products of Chebyshev polynomials are sums of two of them,
 * T_j T_k = (T_(j+k) + T_|j-k|) / 2, so that their part of the matrix needs one sum per order only.
 */
export function normalSums(model: SmoothModel, { value, weight }: BlockValues, m = model.columns): NormalSums {
  const orders = m - RESPONSE;
  const { series, centre, columns } = model;
  const width = 2 * model.orders + 1;
  const moments = new Float64Array(2 * orders + 1);
  const withValue = new Float64Array(orders + 1);
  const special = model.hasJump ? [LN_T, AV, JUMP] : [LN_T, AV];
  const mixed = special.map(() => new Float64Array(orders + 1));
  const matrix = new Float64Array(m * m);
  const right = new Float64Array(m);
  let squares = 0;
  for (let b = 0; b < value.length; b++) {
    const w = weight[b]!;
    if (!(w > 0)) continue;
    const y = value[b]!;
    const at = b * width;
    squares += w * y * y;
    addScaled(moments, series, at, w);
    addScaled(withValue, series, at, w * y);
    for (let s = 0; s < special.length; s++) {
      const column = special[s]!;
      const wc = w * centre[b * columns + column]!;
      addScaled(mixed[s]!, series, at, wc);
      right[column] = right[column]! + wc * y;
      for (let t = 0; t <= s; t++) {
        const other = special[t]!;
        matrix[column * m + other] = matrix[column * m + other]! + wc * centre[b * columns + other]!;
      }
    }
  }
  // order k of the series stands in column 0 (k = 0, the scale) or RESPONSE + k - 1
  const columnOf = (k: number) => (k ? RESPONSE + k - 1 : SCALE);
  for (let k = 0; k <= orders; k++) {
    const row = columnOf(k);
    right[row] = withValue[k]!;
    for (let j = 0; j <= k; j++) matrix[row * m + columnOf(j)] = 0.5 * (moments[k + j]! + moments[k - j]!);
    special.forEach((column, s) => {
      matrix[Math.max(row, column) * m + Math.min(row, column)] = mixed[s]![k]!;
    });
  }
  return { matrix, right, squares };
}

function addScaled(sums: Float64Array, series: Float64Array, at: number, factor: number) {
  for (let k = 0; k < sums.length; k++) sums[k] = sums[k]! + factor * series[at + k]!;
}

export interface SmoothFit {
  readonly coefficients: Float64Array;
  /** Cholesky factor of the inverse covariance */
  readonly factor: Float64Array;
  /** natural log of the probability of the data under the prior, up to a constant that does not depend on the prior */
  readonly lnEvidence: number;
}

/** Most probable coefficients; null when even the prior leaves the system singular. */
export function solveSmooth(sums: NormalSums, precision: Precision): SmoothFit | null {
  const m = precision.length;
  const factor = sums.matrix.slice();
  let lnPrior = 0;
  for (let j = 0; j < m; j++) {
    factor[j * m + j]! += precision[j]!;
    if (precision[j]! > 0) lnPrior += Math.log(precision[j]!);
  }
  if (!choleskyInPlace(factor, m)) return null;
  const coefficients = sums.right.slice();
  choleskySolve(factor, m, coefficients);
  let gain = 0;
  let lnDeterminant = 0;
  for (let j = 0; j < m; j++) {
    gain += coefficients[j]! * sums.right[j]!;
    lnDeterminant += 2 * Math.log(factor[j * m + j]!);
  }
  return { coefficients, factor, lnEvidence: 0.5 * (gain - sums.squares + lnPrior - lnDeterminant) };
}

/** Sum of coefficients times columns for every row of `rows`; columns beyond the coefficients count as 0. */
export function evaluateRows(out: Float64Array, rows: Float64Array, columns: number, coefficients: Float64Array) {
  for (let b = 0, at = 0; b < out.length; b++, at += columns) {
    let sum = 0;
    for (let j = 0; j < coefficients.length; j++) sum += rows[at + j]! * coefficients[j]!;
    out[b] = sum;
  }
  return out;
}
