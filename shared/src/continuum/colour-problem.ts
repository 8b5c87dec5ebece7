import { choleskyInPlace, choleskySolve } from '../numeric/linear.js';
import type { BlockValues, Blocks } from './blocks.js';
import { C2_NM_K, lnExpm1 } from './planck.js';
import { AV, JUMP, RESPONSE, SCALE, type SmoothModel } from './smooth-model.js';

/** Trial visual extinctions with the probability of each cell around them; a single cell at 0 when the extinction is given. */
export interface ExtinctionBelief {
  readonly av: Float64Array;
  readonly width: Float64Array;
  readonly mass: Float64Array;
}
export const NO_EXTINCTION: ExtinctionBelief = { av: Float64Array.of(0), width: Float64Array.of(0), mass: Float64Array.of(1) };

/** Block values of the continuum, and the ripple among them if there is one. */
export interface FittedBlocks {
  readonly values: BlockValues;
  readonly ripple: Float64Array | null;
}

/** Smooth calibration errors of a reduced spectrum are of the order of a per cent; how large they are here, the fit must find. */
const TYPICAL_RESPONSE = 0.01;
const RESPONSE_SPREAD = 0.8;
const AMPLITUDES = [0.003, 0.006, 0.012, 0.024, 0.048];
/** Orders up to about these take part in full, the next ones soon not at all: responses are much like polynomials of low order. */
const SMOOTHNESS = [3.5, 5, 8];
const STEEPNESS = 6;
const ORDERS = 10;
/** Half a unit of ln flux: how large a Balmer jump may be. */
const JUMP_PRECISION = 4;
/** Neighbouring blocks are taken together into about this many rows: the curves here bend so little that only their mean position matters. */
const ROWS = 64;
/** Responses and extinctions less probable than the best by more than this, in ln, are not averaged in. */
const NEGLIGIBLE = 12;

/** One belief about the response, with the solved system that removes it. */
export interface Nuisance {
  readonly lnPrior: number;
  readonly factor: Float64Array;
  readonly extinction: Float64Array;
  /** quadratic form of the extinction column with itself: the inverse variance of A_V at a known temperature */
  readonly q2: number;
}

/** Block values as rows of a linear problem whose only other unknown is ln T. */
export interface ColourProblem {
  readonly centreNm: Float64Array;
  readonly value: Float64Array;
  readonly weight: Float64Array;
  readonly columns: number;
  /** scale, jump and response columns, row by row */
  readonly rows: Float64Array;
  readonly extinctionColumn: Float64Array;
  /** all beliefs about the response, or the middling one alone for quick looks */
  readonly nuisances: readonly Nuisance[];
  readonly middling: readonly Nuisance[];
}

/** @param known ln of all that is known beside the Planck curve: given extinction, flux per frequency instead of wavelength */
export function makeProblem(
  blocks: Blocks,
  model: SmoothModel,
  { values, ripple }: FittedBlocks,
  known: (nm: number) => number,
): ColourProblem {
  const pick = [SCALE, ...(model.hasJump ? [JUMP] : []), ...Array.from({ length: ORDERS }, (_, k) => RESPONSE + k)];
  const m = pick.length;
  const perRow = Math.max(1, Math.floor(blocks.count / ROWS));
  const groups = Math.ceil(blocks.count / perRow);
  const excess = rippleVariance(ripple);
  const weightOf = (b: number) => (values.weight[b]! > 0 ? 1 / (1 / values.weight[b]! + excess) : 0);
  const centreNm = new Float64Array(groups);
  const value = new Float64Array(groups);
  const weight = new Float64Array(groups);
  const extinctionColumn = new Float64Array(groups);
  const rows = new Float64Array(groups * m);
  let used = 0;
  for (let from = 0; from < blocks.count; from += perRow) {
    const to = Math.min(blocks.count, from + perRow);
    let sum = 0;
    for (let b = from; b < to; b++) sum += weightOf(b);
    if (!(sum > 0)) continue;
    weight[used] = sum;
    for (let b = from; b < to; b++) {
      const share = weightOf(b) / sum;
      if (share === 0) continue;
      const nm = blocks.centreNm[b]!;
      const at = b * model.columns;
      centreNm[used] = centreNm[used]! + share * nm;
      value[used] = value[used]! + share * (values.value[b]! + model.baseCentre[b]! - known(nm));
      extinctionColumn[used] = extinctionColumn[used]! + share * model.centre[at + AV]!;
      for (let j = 0; j < m; j++) rows[used * m + j] = rows[used * m + j]! + share * model.centre[at + pick[j]!]!;
    }
    used++;
  }
  const cut = (a: Float64Array) => a.subarray(0, used);
  return withNuisances({
    centreNm: cut(centreNm),
    value: cut(value),
    weight: cut(weight),
    columns: m,
    rows,
    extinctionColumn: cut(extinctionColumn),
  });
}

type BareProblem = Omit<ColourProblem, 'nuisances' | 'middling'>;

/** The same problem without the rows from `from` to `to`, for quick looks only. */
export function withoutRows(problem: ColourProblem, from: number, to: number): ColourProblem {
  const weight = problem.weight.slice();
  weight.fill(0, from, to);
  const bare = { ...problem, weight };
  const middling = [makeNuisance(bare, normalMatrix(bare), AMPLITUDES[2]!, SMOOTHNESS[1]!)];
  return { ...bare, nuisances: middling, middling };
}

function withNuisances(bare: BareProblem): ColourProblem {
  const matrix = normalMatrix(bare);
  const nuisances = AMPLITUDES.flatMap((amplitude) => SMOOTHNESS.map((order) => makeNuisance(bare, matrix, amplitude, order)));
  return { ...bare, nuisances, middling: [nuisances[2 * SMOOTHNESS.length + 1]!] };
}

/** Extra variance of a block for a ripple that is not averaged over: its mean square, times the number of blocks in half a wave. */
function rippleVariance(ripple: Float64Array | null): number {
  if (!ripple) return 0;
  let squares = 0;
  let halfWaves = 1;
  for (let b = 0; b < ripple.length; b++) {
    squares += ripple[b]! * ripple[b]!;
    if (b > 0 && ripple[b]! * ripple[b - 1]! < 0) halfWaves++;
  }
  return squares / halfWaves;
}

function normalMatrix({ columns: m, rows, weight }: BareProblem): Float64Array {
  const matrix = new Float64Array(m * m);
  for (let r = 0, at = 0; r < weight.length; r++, at += m) {
    for (let j = 0; j < m; j++) {
      const wj = weight[r]! * rows[at + j]!;
      for (let k = 0; k <= j; k++) matrix[j * m + k] = matrix[j * m + k]! + wj * rows[at + k]!;
    }
  }
  return matrix;
}

function makeNuisance(problem: BareProblem, matrix: Float64Array, amplitude: number, order: number): Nuisance {
  const { columns: m, weight, extinctionColumn } = problem;
  const first = m - ORDERS;
  const factor = matrix.slice();
  let lnPrior = -0.5 * (Math.log(amplitude / TYPICAL_RESPONSE) / RESPONSE_SPREAD) ** 2;
  if (first > 1) factor[m + 1] = factor[m + 1]! + JUMP_PRECISION;
  for (let k = 1; k <= ORDERS; k++) {
    const sd = amplitude / (1 + (k / order) ** STEEPNESS);
    const j = first + k - 1;
    factor[j * m + j] = factor[j * m + j]! + 1 / (sd * sd);
    lnPrior -= Math.log(sd);
  }
  choleskyInPlace(factor, m);
  for (let j = 0; j < m; j++) lnPrior -= Math.log(factor[j * m + j]!);
  const right = new Float64Array(m);
  project(problem, extinctionColumn, right);
  const extinction = right.slice();
  choleskySolve(factor, m, extinction);
  let q2 = 0;
  for (let r = 0; r < weight.length; r++) q2 += weight[r]! * extinctionColumn[r]! ** 2;
  for (let j = 0; j < m; j++) q2 -= right[j]! * extinction[j]!;
  return { lnPrior, factor, extinction, q2 };
}

function project({ rows, weight, columns: m }: BareProblem, y: Float64Array, right: Float64Array) {
  right.fill(0);
  for (let r = 0, at = 0; r < y.length; r++, at += m) {
    const wy = weight[r]! * y[r]!;
    for (let j = 0; j < m; j++) right[j] = right[j]! + wy * rows[at + j]!;
  }
}

/** Trial extinctions as one nuisance sees them: each cell of width w widens the error of A_V by w / sqrt(12). */
interface Cells {
  readonly av: Float64Array;
  readonly inverseSpread: Float64Array;
  readonly lnMass: Float64Array;
}

function cellsFor({ av, width, mass }: ExtinctionBelief, { q2 }: Nuisance): Cells {
  const inverseSpread = width.map((w) => 1 / (1 / q2 + (w * w) / 12));
  return { av, inverseSpread, lnMass: mass.map((m, j) => Math.log(m) + 0.5 * Math.log(inverseSpread[j]! / q2)) };
}

/** ln probability of ln T, up to a constant, averaged over the nuisances and the extinction; allocates nothing when called. */
export function lnProbabilityOf(problem: ColourProblem, nuisances: readonly Nuisance[], belief: ExtinctionBelief): (lnT: number) => number {
  const { weight, centreNm, extinctionColumn, columns: m } = problem;
  // ln B_lambda = constant - 5 ln lambda - ln(exp(x) - 1); the constant goes into the scale
  const value = problem.value.map((v, r) => v + 5 * Math.log(centreNm[r]!));
  const perKelvin = centreNm.map((nm) => C2_NM_K / nm);
  const cells = nuisances.map((nuisance) => cellsFor(belief, nuisance));
  const z = new Float64Array(value.length);
  const right = new Float64Array(m);
  const solved = new Float64Array(m);
  return (lnT) => {
    const inverse = Math.exp(-lnT);
    let zz = 0;
    let zk = 0;
    for (let r = 0; r < z.length; r++) {
      const d = value[r]! + lnExpm1(perKelvin[r]! * inverse);
      z[r] = d;
      const wd = weight[r]! * d;
      zz += wd * d;
      zk += wd * extinctionColumn[r]!;
    }
    project(problem, z, right);
    let best = -Infinity;
    let sum = 0;
    for (let h = 0; h < nuisances.length; h++) {
      const { lnPrior, factor, extinction, q2 } = nuisances[h]!;
      solved.set(right);
      choleskySolve(factor, m, solved);
      let q0 = zz;
      let q1 = zk;
      for (let j = 0; j < m; j++) {
        q0 -= right[j]! * solved[j]!;
        q1 -= right[j]! * extinction[j]!;
      }
      const lnBest = lnPrior - 0.5 * (q0 - (q1 * q1) / q2);
      if (lnBest < best - NEGLIGIBLE) continue;
      const lnP = lnBest + overExtinction(cells[h]!, q1 / q2);
      if (lnP > best) {
        sum = sum * Math.exp(best - lnP) + 1;
        best = lnP;
      } else sum += Math.exp(lnP - best);
    }
    return best + Math.log(sum);
  };
}

/** ln of the sum over cells of mass times exp(-(A - centre)^2 / 2 spread): `centre` is the extinction that suits this temperature best. */
function overExtinction({ av, inverseSpread, lnMass }: Cells, centre: number): number {
  let best = -Infinity;
  let sum = 0;
  for (let j = 0; j < av.length; j++) {
    const d = av[j]! - centre;
    const lnTerm = lnMass[j]! - 0.5 * d * d * inverseSpread[j]!;
    if (lnTerm < best - NEGLIGIBLE) continue;
    if (lnTerm > best) {
      sum = sum * Math.exp(best - lnTerm) + 1;
      best = lnTerm;
    } else sum += Math.exp(lnTerm - best);
  }
  return best + Math.log(sum);
}
