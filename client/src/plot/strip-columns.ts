type Column = number | null;

/** Half-width, in columns, of the neighbourhood that says what is usual. */
const NEIGHBOURS = 40;

function median(values: number[]): number {
  values.sort((a, b) => a - b);
  const m = values.length >> 1;
  return values.length % 2 ? (values[m] ?? NaN) : ((values[m - 1] ?? NaN) + (values[m] ?? NaN)) / 2;
}

/** Median and scaled median deviation of the columns around each 16th column, held in between. */
function usual(columns: readonly Column[], at: number): { centre: number; spread: number } {
  const near: number[] = [];
  for (let i = Math.max(0, at - NEIGHBOURS); i < Math.min(columns.length, at + NEIGHBOURS + 1); i++) {
    const v = columns[i];
    if (v != null && Number.isFinite(v)) near.push(v);
  }
  if (near.length === 0) return { centre: 1, spread: 0 };
  const centre = median(near);
  return { centre, spread: 1.4826 * median(near.map((v) => Math.abs(v - centre))) };
}

/**
 * One normalised flux per column: the minimum where it lies well below what minima usually are around it, the maximum likewise,
 * otherwise the middle. So noise gives an even strip, and a single narrow dip keeps its full depth.
 * @returns null where the column is masked
 */
export function telling(low: readonly Column[], high: readonly Column[]): Column[] {
  const out: Column[] = new Array<Column>(low.length).fill(null);
  let lows = { centre: 1, spread: 0 };
  let highs = lows;
  for (let i = 0; i < low.length; i++) {
    if (i % 16 === 0) [lows, highs] = [usual(low, i), usual(high, i)];
    const lo = low[i];
    const hi = high[i];
    if (lo == null || hi == null) continue;
    const below = lows.centre - lo;
    const above = hi - highs.centre;
    const isDip = below > Math.max(5 * lows.spread, 0.004);
    const isPeak = above > Math.max(5 * highs.spread, 0.004);
    if (isDip && (!isPeak || below >= above)) out[i] = lo;
    else if (isPeak) out[i] = hi;
    else out[i] = (lo + hi) / 2;
  }
  return out;
}

/** To `n` display columns; where several fall into one, the one farthest from the continuum speaks when it differs visibly. */
export function toDisplay(columns: readonly Column[], n: number, emission: boolean): Column[] {
  const m = columns.length;
  const out: Column[] = new Array<Column>(n).fill(null);
  for (let i = 0; i < n; i++) {
    const from = Math.floor((i / n) * m);
    const to = Math.max(from + 1, Math.floor(((i + 1) / n) * m));
    let farthest: number | null = null;
    let sum = 0;
    let count = 0;
    for (let j = from; j < to; j++) {
      const v = columns[j];
      if (v == null) continue;
      sum += v;
      count++;
      if (farthest == null || Math.abs(v - 1) > Math.abs(farthest - 1)) farthest = v;
    }
    if (farthest != null) out[i] = Math.abs(farthest - 1) > 0.04 || emission ? farthest : sum / count;
  }
  return out;
}

/**
 * Luminance, 0 to 1, at which a normalised flux is shown: a print curve. Absorption spectra: dips darken by f^1.7, peaks use the last
 * seventh. Emission spectra start dark and rise with the logarithm.
 */
export function shownLuminance(normalised: number, emission: boolean): number {
  const f = Math.max(0, normalised);
  if (emission) return f <= 1.6 ? 0.05 + 0.05 * Math.min(1, f) : Math.min(1, 0.1 + (0.9 * Math.log10(f / 1.6)) / 0.95);
  return f <= 1 ? 0.86 * f ** 1.7 : Math.min(1, 0.86 + 0.14 * Math.log10(1 + 9 * (f - 1)));
}
