import { faddeevaInto } from '../numeric/faddeeva.js';
import { quadraturesOf, smearReach, type Smear } from './smear.js';

/**
 * Saturated line with damping wings: phi(u) = F(u) / F(0), F = 1 - exp(-tau H(a, u)), H the Voigt function, u in Doppler widths; F is
 * smeared by the instrument or by the star's rotation where these matter. Times a depth it describes hydrogen lines, whose cores level
 * off at the flux of the highest layers, and saturated or damped absorbers.
 */
export interface DampedShape {
  readonly tau: number;
  readonly a: number;
  readonly smear?: Smear;
}

/** Columns of a table: phi and its derivatives by u, ln tau, ln a, and by ln of the Doppler width with what smears held in wavelength. */
export const DAMPED_COLUMNS = 5;
const NODES = 384;
const TAIL = 7e-4;
const LONGEST = 2000; // Doppler widths

/** phi and its derivatives at nodes that crowd towards the centre, u = reach (k / NODES)^2. */
export interface DampedTable {
  readonly reach: number;
  readonly fwhm: number;
  readonly area: number;
  /** derivatives of ln FWHM and of ln area, both in wavelength, by ln of the Doppler width, ln tau and ln a */
  readonly byShape: { readonly fwhm: readonly number[]; readonly area: readonly number[] };
  readonly values: Float64Array;
}

const held = new Float64Array(2);

/** Distance beyond which less than TAIL of the peak is left, in Doppler widths; at least the core. */
function reachOf({ tau, a, smear }: DampedShape): number {
  faddeevaInto(held, 0, a);
  const wing = (tau * a) / Math.sqrt(Math.PI) / -Math.expm1(-tau * held[0]!); // phi tends to wing / u^2
  const core = Math.sqrt(Math.max(1, Math.log(Math.max(tau, 1) / TAIL)));
  return Math.min(Math.max(core, Math.sqrt(wing / TAIL)), Math.max(core, LONGEST)) + (smear ? smearReach(smear) : 0);
}

const TWO_OVER_SQRT_PI = 2 / Math.sqrt(Math.PI);

/** Fills a table's columns with F and its derivatives, not normalised, before anything smears it. */
function formInto(values: Float64Array, { tau, a }: DampedShape, reach: number): void {
  for (let k = 0, at = 0; k < NODES; k++, at += DAMPED_COLUMNS) {
    const u = reach * (k / NODES) ** 2;
    faddeevaInto(held, u, a);
    const h = held[0]!;
    const im = held[1]!;
    const slope = tau * Math.exp(-tau * h); // dF / dH
    values[at] = -Math.expm1(-tau * h);
    values[at + 1] = -2 * (u * h - a * im) * slope;
    values[at + 2] = h * slope;
    values[at + 3] = a * (2 * (u * im + a * h) - TWO_OVER_SQRT_PI) * slope;
    values[at + 4] = -u * values[at + 1]!;
  }
}

/** Beyond so many reaches of the smear a line is smooth on its scale. */
const FAR = 4;

const formed = new Float64Array((NODES + 2) * DAMPED_COLUMNS);
const picked = new Float64Array(DAMPED_COLUMNS);

/** `values` smeared, in place: what lies within the smear's reach of each node, weighted. The inner loop is where fits of such lines live. */
function smearInto(values: Float64Array, smear: Smear, reach: number): void {
  formed.set(values);
  const { near, far } = quadraturesOf(smear);
  const farFrom = FAR * smearReach(smear);
  for (let k = 0, row = 0; k < NODES; k++, row += DAMPED_COLUMNS) {
    const u = reach * (k / NODES) ** 2;
    const { at, weight } = u > farFrom ? far : near;
    let [f, byU, byTau, byA, byScale] = [0, 0, 0, 0, 0];
    for (let j = 0; j < at.length; j++) {
      const t = u - at[j]! * smear.width;
      const place = NODES * Math.sqrt(Math.abs(t) / reach);
      const node = place | 0;
      if (node >= NODES) continue;
      const above = weight[j]! * (place - node);
      const below = weight[j]! - above;
      const p = node * DAMPED_COLUMNS;
      const q = p + DAMPED_COLUMNS;
      f += below * formed[p]! + above * formed[q]!;
      const slope = below * formed[p + 1]! + above * formed[q + 1]!;
      byU += t < 0 ? -slope : slope;
      byTau += below * formed[p + 2]! + above * formed[q + 2]!;
      byA += below * formed[p + 3]! + above * formed[q + 3]!;
      byScale += below * formed[p + 4]! + above * formed[q + 4]!;
    }
    values[row] = f;
    values[row + 1] = byU;
    values[row + 2] = byTau;
    values[row + 3] = byA;
    values[row + 4] = byScale;
  }
}

/** From F to phi: everything over the value at the centre, whose own derivatives count. */
function normalise(values: Float64Array): void {
  const peak = values.slice(0, DAMPED_COLUMNS);
  const inverse = 1 / peak[0]!;
  for (let k = 0, at = 0; k < NODES; k++, at += DAMPED_COLUMNS) {
    const phi = values[at]! * inverse;
    values[at] = phi;
    values[at + 1]! *= inverse;
    for (let q = 2; q < DAMPED_COLUMNS; q++) values[at + q] = (values[at + q]! - phi * peak[q]!) * inverse;
  }
}

/** FWHM, area and their derivatives from the nodes; what the wings hold beyond the table, phi u^2 being constant there, is added. */
function extentOf(values: Float64Array, reach: number): Pick<DampedTable, 'fwhm' | 'area' | 'byShape'> {
  const last = NODES - 1;
  let half = 0;
  const area = new Float64Array(DAMPED_COLUMNS);
  for (let k = 0; k < last; k++) {
    const step = (reach * (2 * k + 1)) / (NODES * NODES);
    const at = k * DAMPED_COLUMNS;
    for (let q = 0; q < DAMPED_COLUMNS; q++) area[q]! += 0.5 * step * (values[at + q]! + values[at + DAMPED_COLUMNS + q]!);
    if (half === 0 && values[at + DAMPED_COLUMNS]! < 0.5) half = reach * ((k + 0.5) / NODES) ** 2;
  }
  if (half === 0) half = reach;
  // two steps of Newton from the middle of the step that crosses one half
  for (let k = 0; k < 2; k++) {
    pick(picked, values, reach, half);
    if (picked[1]! < 0) half = Math.min(reach, Math.max(0, half + (0.5 - picked[0]!) / picked[1]!));
  }
  pick(picked, values, reach, half);
  const end = reach * (last / NODES) ** 2;
  for (let q = 0; q < DAMPED_COLUMNS; q++) if (q !== 1) area[q]! += values[last * DAMPED_COLUMNS + q]! * end;
  const whole = area[0]!;
  return {
    fwhm: 2 * half,
    area: 2 * whole,
    byShape: {
      fwhm: [4, 2, 3].map((q) => (picked[1]! < 0 ? -picked[q]! / (picked[1]! * half) : 0)),
      area: [4, 2, 3].map((q) => area[q]! / whole),
    },
  };
}

const tables = new WeakMap<DampedShape, DampedTable>();

/** The table of a shape, made when first asked for; shapes are never changed in place. */
export function dampedTable(shape: DampedShape): DampedTable {
  let table = tables.get(shape);
  if (!table) {
    const reach = reachOf(shape);
    const values = new Float64Array((NODES + 2) * DAMPED_COLUMNS);
    formInto(values, shape, reach);
    if (shape.smear) smearInto(values, shape.smear, reach);
    normalise(values);
    table = { reach, values, ...extentOf(values, reach) };
    tables.set(shape, table);
  }
  return table;
}

function pick(out: Float64Array, values: Float64Array, reach: number, u: number): void {
  const t = NODES * Math.sqrt(u / reach);
  const k = t | 0;
  if (k >= NODES) {
    out.fill(0);
    return;
  }
  const w = t - k;
  const at = k * DAMPED_COLUMNS;
  for (let q = 0; q < DAMPED_COLUMNS; q++) out[q] = values[at + q]! + w * (values[at + DAMPED_COLUMNS + q]! - values[at + q]!);
}

/** phi and its derivatives (see {@link DAMPED_COLUMNS}) to `out`: linear in the square root of u between nodes, good to 2e-4. */
export function dampedInto(out: Float64Array, table: DampedTable, u: number): void {
  pick(out, table.values, table.reach, u);
}

/** phi alone. */
export function dampedValue(table: DampedTable, u: number): number {
  const t = NODES * Math.sqrt(u / table.reach);
  const k = t | 0;
  if (k >= NODES) return 0;
  const a = table.values[k * DAMPED_COLUMNS]!;
  return a + (t - k) * (table.values[(k + 1) * DAMPED_COLUMNS]! - a);
}
