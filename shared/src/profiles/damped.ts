import { faddeevaInto } from '../numeric/faddeeva.js';

/**
 * Saturated line with damping wings: phi(u) = (1 - exp(-tau H(a, u))) / (1 - exp(-tau H(a, 0))), H the Voigt function, u in Doppler
 * widths. Times a depth it describes hydrogen lines, whose cores level off at the flux of the highest layers, and damped absorbers.
 */
export interface DampedShape {
  readonly tau: number;
  readonly a: number;
}

const held = new Float64Array(2);
const TWO_OVER_SQRT_PI = 2 / Math.sqrt(Math.PI);

/** phi and its derivatives with respect to u, ln tau and a, written to out[0..3]. */
function exactInto(out: Float64Array, shape: DampedShape, u: number, peak: DampedPeak): void {
  const { tau, a } = shape;
  faddeevaInto(held, u, a);
  const h = held[0]!;
  const im = held[1]!;
  const slopeU = -2 * (u * h - a * im);
  const slopeA = 2 * (u * im + a * h) - TWO_OVER_SQRT_PI;
  const left = Math.exp(-tau * h);
  const phi = (1 - left) / peak.norm;
  out[0] = phi;
  out[1] = (tau * slopeU * left) / peak.norm;
  out[2] = (tau * h * left - phi * peak.byLogTau) / peak.norm;
  out[3] = (tau * slopeA * left - phi * peak.byA) / peak.norm;
}

/** What normalises a damped shape: 1 - exp(-tau H(a, 0)) and its derivatives. */
interface DampedPeak {
  readonly norm: number;
  readonly byLogTau: number;
  readonly byA: number;
}

function dampedPeak({ tau, a }: DampedShape): DampedPeak {
  faddeevaInto(held, 0, a);
  const h = held[0]!;
  const left = Math.exp(-tau * h);
  const slopeA = 2 * a * h - TWO_OVER_SQRT_PI;
  return { norm: -Math.expm1(-tau * h), byLogTau: tau * h * left, byA: tau * slopeA * left };
}

const TAIL = 7e-4;

/** Distance beyond which less than TAIL of the peak is left, in Doppler widths; at least the core, at most 80 Doppler widths. */
function reachOf({ tau, a }: DampedShape, norm: number): number {
  const wing = (tau * a) / Math.sqrt(Math.PI) / norm; // phi tends to wing / u^2
  const core = Math.sqrt(Math.max(1, Math.log(Math.max(tau, 1) / TAIL)));
  return Math.min(Math.max(core, Math.sqrt(wing / TAIL)), Math.max(core, 80));
}

const NODES = 384;
const COLUMNS = 4;

/** phi and its three derivatives at nodes that crowd towards the centre, u = reach (k / NODES)^2. */
export interface DampedTable {
  readonly reach: number;
  readonly fwhm: number;
  readonly area: number;
  readonly values: Float64Array;
}

/** FWHM and area from the nodes; what the wings hold beyond the table, phi u^2 being constant there, is added to the area. */
function extentOf(values: Float64Array, reach: number): { fwhm: number; area: number } {
  const node = (k: number): number => reach * (k / NODES) ** 2;
  const last = NODES - 1;
  let half = last;
  let area = 0;
  for (let k = 0; k < last; k++) {
    const [now, next] = [values[k * COLUMNS]!, values[(k + 1) * COLUMNS]!];
    area += 0.5 * (now + next) * (node(k + 1) - node(k));
    if (half === last && next < 0.5) half = k + (now - 0.5) / (now - next);
  }
  return { fwhm: 2 * node(half), area: 2 * (area + values[last * COLUMNS]! * node(last)) };
}

const tables = new WeakMap<DampedShape, DampedTable>();

/** The table of a shape, made when first asked for; shapes are never changed in place. */
export function dampedTable(shape: DampedShape): DampedTable {
  let table = tables.get(shape);
  if (!table) {
    const peak = dampedPeak(shape);
    const reach = reachOf(shape, peak.norm);
    const values = new Float64Array((NODES + 2) * COLUMNS);
    const row = new Float64Array(COLUMNS);
    for (let k = 0; k < NODES; k++) {
      exactInto(row, shape, reach * (k / NODES) ** 2, peak);
      values.set(row, k * COLUMNS);
    }
    table = { reach, values, ...extentOf(values, reach) };
    tables.set(shape, table);
  }
  return table;
}

/** phi and its derivatives with respect to u, ln tau and a, to out[0..3]: linear in the square root of u between nodes, good to 2e-4. */
export function dampedInto(out: Float64Array, table: DampedTable, u: number): void {
  const t = NODES * Math.sqrt(u / table.reach);
  const k = t | 0;
  if (k >= NODES) {
    out.fill(0);
    return;
  }
  const w = t - k;
  const at = k * COLUMNS;
  const { values } = table;
  for (let q = 0; q < COLUMNS; q++) out[q] = values[at + q]! + w * (values[at + COLUMNS + q]! - values[at + q]!);
}

/** phi alone. */
export function dampedValue(table: DampedTable, u: number): number {
  const t = NODES * Math.sqrt(u / table.reach);
  const k = t | 0;
  if (k >= NODES) return 0;
  const a = table.values[k * COLUMNS]!;
  return a + (t - k) * (table.values[(k + 1) * COLUMNS]! - a);
}
