import { choleskyInPlace, choleskySolve } from '../numeric/linear.js';
import type { BlockValues, Blocks } from './blocks.js';
import { lnPlanck, wienPeakNm } from './planck.js';
import { AV, JUMP, RESPONSE, SCALE, type SmoothModel } from './smooth-model.js';

/** Trial visual extinctions with the probability of each cell around them; a single cell at 0 when the extinction is given. */
export interface ExtinctionBelief {
  readonly av: Float64Array;
  readonly width: Float64Array;
  readonly mass: Float64Array;
}

/** What the shape of the continuum says of the colour temperature, all else averaged out. */
export interface TemperatureBelief {
  /** mean and standard deviation of ln T */
  readonly lnT: number;
  readonly lnSigma: number;
  /** ln T below which lie 2.5 % and 97.5 % of the probability */
  readonly lnLow: number;
  readonly lnHigh: number;
  /** most probable temperature without any extinction beyond the given one, K */
  readonly unreddenedK: number;
  /** posterior mean of the visual extinction */
  readonly av: number;
}

/** Block values of the continuum, and the ripple among them if there is one. */
interface Fitted {
  readonly values: BlockValues;
  readonly ripple: Float64Array | null;
}

const LN_HIGH = Math.log(200_000);
/** The coolest temperature tried has its peak at this many times the longest wavelength. */
const COOLEST = 8;
const ORDERS = 10;
/** Smooth calibration errors of a reduced spectrum are of the order of a per cent; how large they are here, the fit must find. */
const TYPICAL_RESPONSE = 0.01;
const RESPONSE_SPREAD = 0.8;
const AMPLITUDES = [0.003, 0.006, 0.012, 0.024, 0.048];
const SMOOTHNESS = [2.5, 4, 7];
/** The middle one of these fifteen, for quick looks. */
const MIDDLING = 7;

/** One belief about the response, with the solved system that removes it. */
interface Nuisance {
  readonly lnPrior: number;
  readonly factor: Float64Array;
  readonly extinction: Float64Array;
  /** quadratic form of the extinction column with itself: the inverse variance of A_V at a known temperature */
  readonly q2: number;
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

/**
 * Probability of the colour temperature from the block values of the continuum. The scale, smooth calibration errors of a size that the
 * data themselves tell, and the extinction are averaged out, so that the width of the result holds all of them.
 * @param known ln of all that is known beside the Planck curve: given extinction, flux per frequency instead of wavelength
 */
export function judgeTemperature(
  blocks: Blocks,
  model: SmoothModel,
  fitted: Fitted,
  extinction: ExtinctionBelief,
  known: (nm: number) => number,
): TemperatureBelief {
  const problem = makeProblem(blocks, model, fitted, known);
  const lnLow = Math.log(wienPeakNm(blocks.edgeNm[blocks.count]!) / COOLEST);
  const middling = [problem.nuisances[MIDDLING]!];
  const probability = (belief: ExtinctionBelief, nuisances: readonly Nuisance[]) => {
    const cells = nuisances.map((nuisance) => cellsFor(belief, nuisance));
    return (u: number) => lnProbability(problem, nuisances, cells, u);
  };
  const dustless = probability(NO_EXTINCTION, middling);
  const unreddened = highestPoint(dustless, lnLow, LN_HIGH);
  // dust only ever hides a hotter body
  const peak = extinction.av.length > 1 ? highestPoint(probability(extinction, middling), unreddened - 0.1, unreddened + 3) : unreddened;
  const grid = gridAround(probability(extinction, problem.nuisances), peak, widthAt(dustless, unreddened), lnLow);
  const av = meanExtinction(extinction, (one) => probability(one, middling), grid);
  return { ...summarise(grid), unreddenedK: Math.exp(unreddened), av };
}

const NO_EXTINCTION: ExtinctionBelief = { av: Float64Array.of(0), width: Float64Array.of(0), mass: Float64Array.of(1) };
/** Neighbouring blocks are taken together into about this many rows: the curves here bend so little that only their mean position matters. */
const ROWS = 64;

interface Problem {
  readonly centreNm: Float64Array;
  readonly value: Float64Array;
  readonly weight: Float64Array;
  readonly columns: number;
  /** scale, jump and response columns, row by row */
  readonly rows: Float64Array;
  readonly extinctionColumn: Float64Array;
  readonly nuisances: Nuisance[];
  readonly z: Float64Array;
  readonly right: Float64Array;
  readonly solved: Float64Array;
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

function makeProblem(blocks: Blocks, model: SmoothModel, { values, ripple }: Fitted, known: (nm: number) => number): Problem {
  const pick = [SCALE, ...(model.hasJump ? [JUMP] : []), ...Array.from({ length: ORDERS }, (_, k) => RESPONSE + k)];
  const m = pick.length;
  const perRow = Math.max(1, Math.floor(blocks.count / ROWS));
  const groups = Math.ceil(blocks.count / perRow);
  const excess = rippleVariance(ripple);
  const weightOf = (b: number) => (values.weight[b]! > 0 ? 1 / (1 / values.weight[b]! + excess) : 0);
  const centreNm = new Float64Array(groups);
  const value = new Float64Array(groups);
  const weight = new Float64Array(groups);
  const rows = new Float64Array(groups * m);
  const extinctionColumn = new Float64Array(groups);
  let used = 0;
  for (let g = 0; g < groups; g++) {
    const from = g * perRow;
    const to = Math.min(blocks.count, from + perRow);
    let sum = 0;
    for (let b = from; b < to; b++) sum += weightOf(b);
    if (!(sum > 0)) continue;
    weight[used] = sum;
    for (let b = from; b < to; b++) {
      const share = weightOf(b) / sum;
      if (share === 0) continue;
      const nm = blocks.centreNm[b]!;
      centreNm[used] = centreNm[used]! + share * nm;
      value[used] = value[used]! + share * (values.value[b]! + model.baseCentre[b]! - known(nm));
      extinctionColumn[used] = extinctionColumn[used]! + share * model.centre[b * model.columns + AV]!;
      for (let j = 0; j < m; j++) rows[used * m + j] = rows[used * m + j]! + share * model.centre[b * model.columns + pick[j]!]!;
    }
    used++;
  }
  const problem: Problem = {
    centreNm: centreNm.subarray(0, used),
    value: value.subarray(0, used),
    weight: weight.subarray(0, used),
    columns: m,
    rows,
    extinctionColumn: extinctionColumn.subarray(0, used),
    nuisances: [],
    z: new Float64Array(used),
    right: new Float64Array(m),
    solved: new Float64Array(m),
  };
  const matrix = new Float64Array(m * m);
  for (let r = 0; r < used; r++) {
    for (let j = 0; j < m; j++) {
      const wj = weight[r]! * rows[r * m + j]!;
      for (let k = 0; k <= j; k++) matrix[j * m + k] = matrix[j * m + k]! + wj * rows[r * m + k]!;
    }
  }
  const first = m - ORDERS;
  for (const amplitude of AMPLITUDES) {
    for (const order of SMOOTHNESS) problem.nuisances.push(makeNuisance(problem, matrix, first, amplitude, order));
  }
  return problem;
}

function makeNuisance(problem: Problem, matrix: Float64Array, first: number, amplitude: number, order: number): Nuisance {
  const { columns: m, weight, extinctionColumn } = problem;
  const factor = matrix.slice();
  let lnPrior = -0.5 * (Math.log(amplitude / TYPICAL_RESPONSE) / RESPONSE_SPREAD) ** 2;
  if (first > 1) factor[m + 1] = factor[m + 1]! + 4; // the Balmer jump: half a unit of ln flux
  for (let k = 1; k <= ORDERS; k++) {
    const sd = amplitude / (1 + (k / order) ** 4);
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

function project({ rows, weight, columns: m }: Problem, y: Float64Array, right: Float64Array) {
  right.fill(0);
  for (let r = 0, at = 0; r < y.length; r++, at += m) {
    const wy = weight[r]! * y[r]!;
    for (let j = 0; j < m; j++) right[j] = right[j]! + wy * rows[at + j]!;
  }
}

/** Responses less probable than the best by more than this, in ln, are not averaged in. */
const NEGLIGIBLE = 12;

/** ln probability of ln T = `u`, up to a constant, averaged over the nuisances and their cells of extinction. */
function lnProbability(problem: Problem, nuisances: readonly Nuisance[], cells: readonly Cells[], u: number): number {
  const { z, right, solved, weight, value, centreNm, extinctionColumn, columns: m } = problem;
  const temperature = Math.exp(u);
  let zz = 0;
  let zk = 0;
  for (let r = 0; r < z.length; r++) {
    const d = value[r]! - lnPlanck(centreNm[r]!, temperature);
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

/** Highest point of a function of ln T: the best of a coarse grid, then parabolas. */
function highestPoint(f: (u: number) => number, from: number, to: number): number {
  const step = 0.12;
  let at = from;
  let best = -Infinity;
  for (let u = from; u <= to; u += step) {
    const p = f(u);
    if (p > best) {
      best = p;
      at = u;
    }
  }
  for (let h = step / 2; h > 2e-4; h /= 4) {
    const left = f(at - h);
    const right = f(at + h);
    const bend = left + right - 2 * best;
    const move = bend < 0 ? Math.max(-2 * h, Math.min(2 * h, (0.5 * h * (left - right)) / bend)) : left > right ? -h : h;
    const p = f(at + move);
    if (p > best) {
      best = p;
      at += move;
    }
  }
  return at;
}

interface Grid {
  readonly u: Float64Array;
  readonly probability: Float64Array;
}

/** Points of the final grid stand this part of a standard deviation apart, as it is for a known extinction, and between these in ln T. */
const STEP_SIGMAS = 0.8;
const FINEST_STEP = 0.003;
const COARSEST_STEP = 0.05;
const MOST_POINTS = 160;
/** The grid ends where ln probability has dropped by this much. */
const DEPTH = 9;

/** Evenly spaced points about the peak, out to where the probability has dropped to nothing or the range ends. */
function gridAround(f: (u: number) => number, peak: number, width: number, lnLow: number): Grid {
  const top = f(peak);
  const step = Math.max(FINEST_STEP, Math.min(COARSEST_STEP, STEP_SIGMAS * width));
  const reach = (sign: number) => {
    let d = 4 * step;
    while (f(peak + sign * d) > top - DEPTH && peak + sign * d > lnLow && peak + sign * d < LN_HIGH) d *= 1.7;
    return d;
  };
  const left = reach(-1);
  const right = reach(1);
  const n = Math.min(MOST_POINTS, Math.ceil((left + right) / step) + 1);
  const u = new Float64Array(n).map((_, i) => peak - left + ((left + right) * i) / (n - 1));
  const lnP = u.map(f);
  const best = lnP.reduce((a, b) => Math.max(a, b), -Infinity);
  const probability = lnP.map((p) => Math.exp(p - best));
  const sum = probability.reduce((a, b) => a + b, 0);
  return { u, probability: probability.map((p) => p / sum) };
}

/** Standard deviation of ln T about a peak, from the bend of the log probability there. */
function widthAt(f: (u: number) => number, peak: number): number {
  const h = 0.01;
  const bend = (2 * f(peak) - f(peak - h) - f(peak + h)) / (h * h);
  return bend > 0 ? 1 / Math.sqrt(bend) : Infinity;
}

function summarise({ u, probability }: Grid) {
  let lnT = 0;
  for (let i = 0; i < u.length; i++) lnT += probability[i]! * u[i]!;
  let variance = 0;
  for (let i = 0; i < u.length; i++) variance += probability[i]! * (u[i]! - lnT) ** 2;
  return { lnT, lnSigma: Math.sqrt(variance), lnLow: quantileOf(u, probability, 0.025), lnHigh: quantileOf(u, probability, 0.975) };
}

/** Each point's probability is taken to be spread evenly over the step about it. */
function quantileOf(u: Float64Array, probability: Float64Array, p: number): number {
  let below = 0;
  let i = 0;
  while (i < u.length - 1 && below + probability[i]! < p) below += probability[i++]!;
  const step = u.length > 1 ? u[1]! - u[0]! : 0;
  return u[i]! + step * ((p - below) / (probability[i]! || 1) - 0.5);
}

/** Mean visual extinction at the most probable temperature. */
function meanExtinction(belief: ExtinctionBelief, probability: (one: ExtinctionBelief) => (u: number) => number, grid: Grid): number {
  const peak = grid.u[grid.probability.reduce((best, p, i, all) => (p > all[best]! ? i : best), 0)]!;
  const cell = (a: Float64Array, j: number) => a.subarray(j, j + 1);
  const lnP = belief.av.map((_, j) =>
    probability({ av: cell(belief.av, j), width: cell(belief.width, j), mass: cell(belief.mass, j) })(peak),
  );
  const best = lnP.reduce((a, b) => Math.max(a, b), -Infinity);
  let top = 0;
  let all = 0;
  lnP.forEach((l, j) => {
    const p = Math.exp(l - best);
    top += p * belief.av[j]!;
    all += p;
  });
  return top / all;
}
