import { lowerBound, lowerBoundNear, type Columns } from './pyramid.js';

/** Where data land on the canvas, device pixels; `low` to `high` is the value axis. */
export interface Frame {
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly height: number;
  readonly fromNm: number;
  readonly toNm: number;
  readonly low: number;
  readonly high: number;
}

/** The part of Path2D that is used, so that paths can be checked without a canvas. */
export type Pen = Pick<Path2D, 'moveTo' | 'lineTo' | 'closePath'>;

export const xOf = (f: Frame, nm: number) => f.left + ((nm - f.fromNm) / (f.toNm - f.fromNm)) * f.width;
export const yOf = (f: Frame, value: number) => f.top + f.height - ((value - f.low) / (f.high - f.low)) * f.height;

/** A step wider than this many of its neighbour is a hole between detectors or orders, not a pixel. */
const HOLE = 3;

/** Edges of pixel `i`: half-way to its neighbours; at the edge of a hole as far as on the other side. */
export function pixelEdges(wavelength: Float64Array, i: number, out: Float64Array): void {
  const n = wavelength.length;
  const before = i > 0 ? wavelength[i]! - wavelength[i - 1]! : Infinity;
  const after = i < n - 1 ? wavelength[i + 1]! - wavelength[i]! : Infinity;
  const least = Math.min(before, after);
  const half = Number.isFinite(least) ? least / 2 : 0;
  out[0] = wavelength[i]! - (before <= HOLE * least ? before / 2 : half);
  out[1] = wavelength[i]! + (after <= HOLE * least ? after / 2 : half);
}

/** Samples whose pixels reach into the frame, [first, end). */
export function samplesInView(wavelength: Float64Array, f: Frame): [number, number] {
  const first = Math.max(0, lowerBound(wavelength, f.fromNm) - 1);
  const end = Math.min(wavelength.length, lowerBound(wavelength, f.toNm) + 1);
  return [first, Math.max(first, end)];
}

/** More than this many samples a device pixel and steps turn into columns of extremes. */
const DENSE = 1.2;
export function isDense(wavelength: Float64Array, f: Frame): boolean {
  const [first, end] = samplesInView(wavelength, f);
  return end - first > DENSE * f.width;
}

export interface Trace {
  readonly wavelength: Float64Array;
  readonly values: Float32Array;
  readonly bad: Uint8Array;
}

/** One horizontal step a pixel; bad samples and holes lift the pen. */
export function stepPath(pen: Pen, f: Frame, { wavelength, values, bad }: Trace): void {
  const [first, end] = samplesInView(wavelength, f);
  const edges = new Float64Array(2);
  let lastEdge = NaN;
  for (let i = first; i < end; i++) {
    if (bad[i] || Number.isNaN(values[i]!)) {
      lastEdge = NaN;
      continue;
    }
    pixelEdges(wavelength, i, edges);
    const y = yOf(f, values[i]!);
    const x = xOf(f, edges[0]!);
    if (Math.abs(edges[0]! - lastEdge) < 1e-9 * lastEdge) pen.lineTo(x, y);
    else pen.moveTo(x, y);
    pen.lineTo(xOf(f, edges[1]!), y);
    lastEdge = edges[1]!;
  }
}

/** Down and up through the extremes of each column, so that no sample is skipped; two empty columns lift the pen. */
export function extremesPath(pen: Pen, f: Frame, { low, high }: Columns): void {
  let lifted = 2;
  let downFirst = true;
  for (let c = 0; c < low.length; c++) {
    if (Number.isNaN(low[c]!)) {
      lifted++;
      continue;
    }
    const x = f.left + ((c + 0.5) / low.length) * f.width;
    const [a, b] = downFirst ? [high[c]!, low[c]!] : [low[c]!, high[c]!];
    if (lifted > 1) pen.moveTo(x, yOf(f, a));
    else pen.lineTo(x, yOf(f, a));
    pen.lineTo(x, yOf(f, b));
    downFirst = !downFirst;
    lifted = 0;
  }
}

/**
 * Each column from its highest to its lowest sample as a bar of one pixel, reaching to its neighbour where a steep curve would leave a
 * gap. Bars on whole pixels are drawn several times faster than a thin line through the same points.
 */
export function columnBars(f: Frame, { low, high }: Columns, bar: (x: number, top: number, height: number) => void): void {
  let above = NaN; // lower end of the column before
  let below = NaN; // its upper end
  for (let c = 0; c < low.length; c++) {
    if (Number.isNaN(low[c]!)) {
      above = below = NaN;
      continue;
    }
    let top = Math.round(yOf(f, high[c]!));
    let bottom = Math.max(top + 1, Math.round(yOf(f, low[c]!)));
    const [ownTop, ownBottom] = [top, bottom];
    if (top > above) top = above;
    if (bottom < below) bottom = below;
    bar(f.left + c, top, bottom - top);
    [above, below] = [ownBottom, ownTop];
  }
}

/** A smooth curve through `values` at the samples in view, thinned to about two points a pixel. */
export function smoothPath(pen: Pen, f: Frame, wavelength: Float64Array, values: Float32Array, fromNm = f.fromNm, toNm = f.toNm): void {
  const [first, end] = samplesInView(wavelength, { ...f, fromNm: Math.max(fromNm, f.fromNm), toNm: Math.min(toNm, f.toNm) });
  const [all0, all1] = samplesInView(wavelength, f);
  const stride = Math.max(1, Math.floor((all1 - all0) / (2 * f.width)));
  for (let i = first; i < end; i += stride) {
    const [x, y] = [xOf(f, wavelength[i]!), yOf(f, values[i]!)];
    if (i === first) pen.moveTo(x, y);
    else pen.lineTo(x, y);
  }
}

/** Adds one closed band between two edges given as x, y pairs in reading order. */
function band(pen: Pen, upper: number[], lower: number[]): void {
  if (upper.length < 4) return;
  pen.moveTo(upper[0]!, upper[1]!);
  for (let k = 2; k < upper.length; k += 2) pen.lineTo(upper[k]!, upper[k + 1]!);
  for (let k = lower.length - 2; k >= 0; k -= 2) pen.lineTo(lower[k]!, lower[k + 1]!);
  pen.closePath();
}

/** What the light between level and curve is: taken away (below the continuum) or given (above it). */
export type LightSide = 'taken' | 'given';

/** The area between continuum and curve, pixel by pixel. */
export function lightPath(pen: Pen, f: Frame, { wavelength, values, bad }: Trace, level: Float32Array, side: LightSide): void {
  const [first, end] = samplesInView(wavelength, f);
  const edges = new Float64Array(2);
  let [upper, lower]: [number[], number[]] = [[], []];
  for (let i = first; i < end; i++) {
    if (bad[i] || Number.isNaN(values[i]!)) {
      band(pen, upper, lower);
      [upper, lower] = [[], []];
      continue;
    }
    pixelEdges(wavelength, i, edges);
    const yLevel = yOf(f, level[i]!);
    const yCurve = yOf(f, values[i]!);
    const y = side === 'taken' ? Math.max(yLevel, yCurve) : Math.min(yLevel, yCurve);
    const [x0, x1] = [xOf(f, edges[0]!), xOf(f, edges[1]!)];
    upper.push(x0, yLevel, x1, yLevel);
    lower.push(x0, y, x1, y);
  }
  band(pen, upper, lower);
}

/** As `lightPath` from columns of extremes; `levelAt` gives the continuum in each column. */
export function lightColumnsPath(pen: Pen, f: Frame, { low, high }: Columns, levelAt: ArrayLike<number>, side: LightSide): void {
  let [upper, lower]: [number[], number[]] = [[], []];
  for (let c = 0; c < low.length; c++) {
    if (Number.isNaN(low[c]!)) {
      band(pen, upper, lower);
      [upper, lower] = [[], []];
      continue;
    }
    const x = f.left + ((c + 0.5) / low.length) * f.width;
    const yLevel = yOf(f, levelAt[c]!);
    const y = side === 'taken' ? Math.max(yLevel, yOf(f, low[c]!)) : Math.min(yLevel, yOf(f, high[c]!));
    upper.push(x, yLevel);
    lower.push(x, y);
  }
  band(pen, upper, lower);
}

/** `values` at the middle of each of `n` columns. */
export function atColumns(wavelength: Float64Array, values: Float32Array, f: Pick<Frame, 'fromNm' | 'toNm'>, n: number): Float32Array {
  const out = new Float32Array(n);
  let i = 0;
  for (let c = 0; c < n; c++) {
    const nm = f.fromNm + ((c + 0.5) / n) * (f.toNm - f.fromNm);
    i = Math.min(wavelength.length - 1, c === 0 ? lowerBound(wavelength, nm) : lowerBoundNear(wavelength, nm, i, wavelength.length));
    out[c] = values[i]!;
  }
  return out;
}
