import { isWavelength } from './checks.js';
import type { RawSpectrum } from './raw.js';
import type { ReadWarning } from './types.js';

/** Runs shorter than this on average are disorder, longer ones are orders of a spectrograph or pieces of a spectrum. */
const SHORTEST_RUN = 8;
const MOST_RUNS = 500;

interface Run {
  readonly from: number;
  readonly to: number;
  readonly descending: boolean;
}

/** Samples in ascending order as indices into the file's columns, and the pieces of the file they come from. */
export interface Ascending {
  readonly index: Uint32Array;
  /** piece of each sample, by its place among `names`; null when all are of one */
  readonly piece: Uint16Array | null;
  readonly names: readonly string[];
}

/**
 * Samples in ascending order of wavelength.
 *
 * A descending axis is reversed. Overlapping orders are cut, each wavelength taken from the order whose centre is nearer in
 * units of the order's half width, so nothing is resampled, the noise stays independent and each order stays a segment of its
 * own; an order can be had with all its samples by choosing it as the place. Anything else is sorted. Samples without a usable
 * wavelength are left out.
 */
export function ascendingOrder(raw: RawSpectrum, bad: Uint8Array, warnings: ReadWarning[]): Ascending {
  const nm = raw.axis.nm;
  const usable = usableIndices(nm);
  const runs = monotonicRuns(nm, usable, raw.orders?.map((order) => order.from) ?? []);
  if (runs.length === 1) return whole(runs[0]!.descending ? usable.reverse() : usable);
  if (usable.length / runs.length < SHORTEST_RUN || runs.length > MOST_RUNS) return whole(sorted(raw, usable, runs, warnings));
  const { index, piece } = joinedOrders(nm, bad, usable, runs, warnings);
  return { index, piece, names: runs.map((run) => nameOf(run, usable, raw)) };
}

const whole = (index: Uint32Array): Ascending => ({ index, piece: null, names: [] });

function nameOf(run: Run, usable: Uint32Array, raw: RawSpectrum): string {
  const first = usable[run.from]!;
  const order = raw.orders?.findLast((one) => one.from <= first);
  return order?.name ?? `${raw.locate(first).words} to ${raw.locate(usable[run.to - 1]!).row}`;
}

function usableIndices(nm: Float64Array): Uint32Array {
  const index = new Uint32Array(nm.length);
  let n = 0;
  for (let i = 0; i < nm.length; i++) if (isWavelength(nm[i]!)) index[n++] = i;
  return index.slice(0, n);
}

/** Runs of one direction; one also ends where the file begins a new order (`starts`, ascending). */
function monotonicRuns(nm: Float64Array, index: Uint32Array, starts: readonly number[]): Run[] {
  const runs: Run[] = [];
  let from = 0;
  let direction = 0;
  let next = starts.findIndex((start) => start > 0);
  for (let k = 1; k < index.length; k++) {
    const step = Math.sign(nm[index[k]!]! - nm[index[k - 1]!]!);
    const isNew = next >= 0 && next < starts.length && index[k]! >= starts[next]!;
    while (next >= 0 && next < starts.length && index[k]! >= starts[next]!) next++;
    if (step === 0 && !isNew) continue;
    if (direction === 0 && !isNew) direction = step;
    else if (isNew || step !== direction) {
      runs.push({ from, to: k, descending: direction < 0 });
      from = k;
      direction = 0;
    }
  }
  runs.push({ from, to: index.length, descending: direction < 0 });
  return runs;
}

function sorted(raw: RawSpectrum, index: Uint32Array, runs: readonly Run[], warnings: ReadWarning[]): Uint32Array {
  const at = raw.locate(index[runs[1]!.from]!);
  warnings.push({
    code: 'not_in_order',
    sentence: `The wavelengths are not in order (first at ${at.words}); the samples were sorted by wavelength. Check that columns and rows are what they should be.`,
    row: at.row,
    column: raw.axisName,
  });
  return sortedBy(raw.axis.nm, index);
}

const sortedBy = (nm: Float64Array, index: Uint32Array): Uint32Array => index.sort((a, b) => nm[a]! - nm[b]! || a - b);

interface Extent {
  readonly low: number;
  readonly high: number;
}

function joinedOrders(nm: Float64Array, bad: Uint8Array, index: Uint32Array, runs: readonly Run[], warnings: ReadWarning[]) {
  const extents = runs.map((run) => goodExtent(nm, bad, index, run));
  const kept = new Uint32Array(index.length);
  const pieceOf = new Uint16Array(nm.length);
  let n = 0;
  runs.forEach((run, r) => {
    const rivals = extents.map((_, other) => other).filter((other) => other !== r && overlap(extents[other]!, extents[r]!));
    for (let k = run.from; k < run.to; k++) {
      const wavelength = nm[index[k]!]!;
      const own = distance(extents[r]!, wavelength);
      const better = rivals.some((other) => {
        const theirs = distance(extents[other]!, wavelength);
        return theirs <= 1 && (theirs < own || (theirs === own && other < r));
      });
      if (better) continue;
      pieceOf[index[k]!] = r;
      kept[n++] = index[k]!;
    }
  });
  const order = sortedBy(nm, kept.slice(0, n));
  warnings.push({
    code: 'orders_joined',
    sentence:
      n < index.length
        ? `The wavelengths run through ${runs.length} pieces (orders) that overlap; where they do each wavelength is taken from the order whose centre is nearer, which leaves ${n} of ${index.length} samples. Flux steps between orders are not removed. An order with all its samples can be chosen where the file has one in each row.`
        : `The wavelengths run through ${runs.length} pieces (orders) without overlap; they were put one after the other. Flux steps between them are not removed.`,
  });
  return { index: order, piece: Uint16Array.from(order, (i) => pieceOf[i]!) };
}

function goodExtent(nm: Float64Array, bad: Uint8Array, index: Uint32Array, run: Run): Extent {
  let low = Infinity;
  let high = -Infinity;
  for (let k = run.from; k < run.to; k++) {
    const i = index[k]!;
    if (bad[i]) continue;
    if (nm[i]! < low) low = nm[i]!;
    if (nm[i]! > high) high = nm[i]!;
  }
  return { low, high };
}

const overlap = (a: Extent, b: Extent): boolean => a.low <= b.high && b.low <= a.high;

/** Distance from the centre in half widths; at most 1 inside. */
function distance(extent: Extent, wavelength: number): number {
  const half = (extent.high - extent.low) / 2;
  const off = Math.abs(wavelength - (extent.high + extent.low) / 2);
  return half > 0 ? off / half : off === 0 ? 0 : Infinity;
}
