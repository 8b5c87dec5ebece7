import { absorbedWidth, tabledWidth, thinColumn, type Transition } from './absorber.js';

/** A measured width of one line of a species. */
export interface MeasuredWidth extends Transition {
  readonly widthNm: number;
  readonly sigmaNm: number;
}

/** Lines of one species, which share a column; lines of all species given together share a Doppler parameter. */
export interface SpeciesWidths {
  readonly species: string;
  readonly lines: readonly MeasuredWidth[];
}

export interface ColumnBelief {
  readonly species: string;
  /** log10 cm^-2: mean and 1 sigma over the uncertainty of the widths and of the Doppler parameter */
  readonly logN: number;
  readonly logNSigma: number;
  /** 2.5 % and 97.5 % of the belief */
  readonly low: number;
  readonly high: number;
}

export interface GrowthFit {
  /** km/s; mean of ln b, exponentiated, and its 1 sigma in ln b */
  readonly bKmPerS: number;
  readonly bLogSigma: number;
  readonly columns: readonly ColumnBelief[];
}

/** Doppler parameters of single interstellar components: some 2 km/s, within a factor of two (common practice, e.g. Welty & Hobbs 2001; from memory). */
const PRIOR_B = 2;
const PRIOR_B_LOG = 0.6;
const B_GRID = Float64Array.from({ length: 25 }, (_, i) => 0.4 * 30 ** (i / 24));
const N_STEP = 0.04;
const WIDTH_FLOOR = 0.015; // of the width: f-values, and profiles that no measurement gets perfectly right

/**
 * Curve of growth: columns of several species from the equivalent widths of their lines, with one Doppler parameter for all, weighed over a
 * grid of both (Spitzer 1978, section 3.4). Doublets and multiplets tell the Doppler parameter; without them the prior does, and the errors say so.
 * @param floor relative error below which no width is believed; 0 for exact widths
 */
export function fitGrowth(species: readonly SpeciesWidths[], floor = WIDTH_FLOOR, grid: Float64Array = B_GRID): GrowthFit {
  const tables = species.map((s) => columnTable(s, grid, floor));
  const logB = Float64Array.from(grid, (b, i) => {
    const prior = -0.5 * (Math.log(b / PRIOR_B) / PRIOR_B_LOG) ** 2;
    return tables.reduce((sum, t) => sum + t.logEvidence[i]!, prior);
  });
  const weight = normalised(logB);
  const mean = weight.reduce((s, w, i) => s + w * Math.log(grid[i]!), 0);
  const variance = weight.reduce((s, w, i) => s + w * (Math.log(grid[i]!) - mean) ** 2, 0);
  return {
    bKmPerS: Math.exp(mean),
    bLogSigma: Math.sqrt(variance),
    columns: tables.map((t, k) => believed(species[k]!.species, t, weight)),
  };
}

interface ColumnTable {
  readonly from: number;
  readonly step: number;
  readonly count: number;
  /** of each Doppler parameter: log likelihood summed over columns, and the belief in each column */
  readonly logEvidence: Float64Array;
  readonly belief: Float64Array[];
}

function columnTable({ lines }: SpeciesWidths, grid: Float64Array, floor: number): ColumnTable {
  const seen = lines.filter((l) => l.widthNm > 0);
  const from = Math.max(...seen.map((l) => thinColumn(l, Math.max(l.widthNm - 3 * l.sigmaNm, 0.1 * l.widthNm)))) - 0.3;
  const to = Math.max(...seen.map((l) => thinColumn(l, l.widthNm + 2 * l.sigmaNm))) + 3.5;
  const step = N_STEP;
  const count = Math.max(2, Math.ceil((to - from) / step));
  const logEvidence = new Float64Array(grid.length);
  const belief: Float64Array[] = [];
  for (let i = 0; i < grid.length; i++) {
    const log = new Float64Array(count);
    for (let k = 0; k < count; k++) {
      const column = 10 ** (from + k * step);
      for (const l of lines) {
        const sigma = Math.hypot(l.sigmaNm, floor * l.widthNm);
        log[k]! -= 0.5 * ((tabledWidth(l, column, grid[i]!) - l.widthNm) / sigma) ** 2;
      }
    }
    const top = Math.max(...log);
    logEvidence[i] = top + Math.log(log.reduce((s, l) => s + Math.exp(l - top), 0));
    belief.push(normalised(log));
  }
  return { from, step, count, logEvidence, belief };
}

function believed(species: string, { from, step, count, belief }: ColumnTable, weight: Float64Array): ColumnBelief {
  const sum = new Float64Array(count);
  belief.forEach((b, i) => b.forEach((p, k) => (sum[k]! += weight[i]! * p)));
  const at = (k: number) => from + k * step;
  const mean = sum.reduce((s, p, k) => s + p * at(k), 0);
  const variance = sum.reduce((s, p, k) => s + p * (at(k) - mean) ** 2, 0);
  const quantile = (q: number) => {
    let total = 0;
    for (let k = 0; k < count; k++) if ((total += sum[k]!) >= q) return at(k);
    return at(count - 1);
  };
  return {
    species,
    logN: mean,
    logNSigma: Math.hypot(Math.sqrt(variance), step / Math.sqrt(12)),
    low: quantile(0.025),
    high: quantile(0.975),
  };
}

function normalised(log: Float64Array): Float64Array {
  const top = Math.max(...log);
  const out = log.map((l) => Math.exp(l - top));
  const total = out.reduce((s, p) => s + p, 0);
  return out.map((p) => p / total);
}

export interface DoubletSolution {
  readonly logN: number;
  readonly bKmPerS: number;
}

/**
 * Column and Doppler parameter from the two widths of a doublet, exactly: the doublet ratio method (Stromgren 1948, ApJ 108, 242; Spitzer 1978).
 * @returns none where the ratio is outside what the curve of growth can give; two where damping wings allow a second, larger column
 */
export function solveDoublet(strong: MeasuredWidth, weak: MeasuredWidth): DoubletSolution[] {
  const columnFor = (b: number, width = absorbedWidth) => root((logN) => width(strong, 10 ** logN, b) - strong.widthNm, 5, 21);
  const mismatch = (logB: number, width = absorbedWidth) =>
    width(weak, 10 ** columnFor(Math.exp(logB), width), Math.exp(logB)) - weak.widthNm;
  const steps = 60;
  const [from, to] = [Math.log(0.05), Math.log(100)];
  const at = (k: number) => from + ((to - from) * k) / steps;
  const out: DoubletSolution[] = [];
  let before = mismatch(from, tabledWidth);
  for (let k = 1; k <= steps; k++) {
    const now = mismatch(at(k), tabledWidth);
    if (before * now < 0) {
      const b = Math.exp(root((x) => (now > before ? mismatch(x) : -mismatch(x)), at(k - 1.5), at(k + 0.5)));
      out.push({ logN: columnFor(b), bKmPerS: b });
    }
    before = now;
  }
  return out.reverse();
}

/** Where a function that rises with x passes zero, to 1e-5; an end when it does not. */
function root(f: (x: number) => number, low: number, high: number): number {
  let [a, z] = [low, high];
  while (z - a > 1e-5) {
    const mid = 0.5 * (a + z);
    if (f(mid) > 0) z = mid;
    else a = mid;
  }
  return 0.5 * (a + z);
}
