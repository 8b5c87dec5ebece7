/** Looking at a function of one variable: where it is highest, how wide the peak is, and what part of a probability lies where. */

/** Highest point of `f` between `from` and `to`: the best of a coarse grid, then parabolas. */
export function highestPoint(f: (u: number) => number, from: number, to: number, step = 0.12): number {
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
    const next = Math.max(from, Math.min(to, at + move));
    const p = f(next);
    if (p > best) {
      best = p;
      at = next;
    }
  }
  return at;
}

/** Standard deviation of a peak of a log probability, from its bend there; Infinity where it does not bend down. */
export function widthAt(f: (u: number) => number, peak: number): number {
  const h = 0.01;
  const bend = (2 * f(peak) - f(peak - h) - f(peak + h)) / (h * h);
  return bend > 0 ? 1 / Math.sqrt(bend) : Infinity;
}

/** A probability on evenly spaced points; it sums to 1. */
export interface Grid {
  readonly u: Float64Array;
  readonly probability: Float64Array;
}

/** The grid ends where the log probability has dropped by this much below the peak. */
const DEPTH = 9;
const MOST_POINTS = 160;

/** exp(f) about a peak in steps of about `step`, out to where hardly anything is left or the range `low` to `high` ends. */
export function gridAround(f: (u: number) => number, peak: number, step: number, low: number, high: number): Grid {
  const top = f(peak);
  const reach = (sign: number, end: number) => {
    let d = 4 * step;
    while (d < end && f(peak + sign * d) > top - DEPTH) d *= 1.7;
    return Math.min(d, end);
  };
  const left = reach(-1, peak - low);
  const right = reach(1, high - peak);
  const n = Math.max(2, Math.min(MOST_POINTS, Math.ceil((left + right) / step) + 1));
  const u = new Float64Array(n).map((_, i) => peak - left + ((left + right) * i) / (n - 1));
  const lnP = u.map(f);
  const best = lnP.reduce((a, b) => Math.max(a, b), -Infinity);
  const probability = lnP.map((p) => Math.exp(p - best));
  const sum = probability.reduce((a, b) => a + b, 0);
  return { u, probability: probability.map((p) => p / sum) };
}

export function meanOf({ u, probability }: Grid): { mean: number; sigma: number } {
  let mean = 0;
  let variance = 0;
  for (let i = 0; i < u.length; i++) mean += probability[i]! * u[i]!;
  for (let i = 0; i < u.length; i++) variance += probability[i]! * (u[i]! - mean) ** 2;
  return { mean, sigma: Math.sqrt(variance) };
}

/** Point below which lies the part `p`; each point's probability is taken to be spread evenly over the step about it. */
export function quantileOf({ u, probability }: Grid, p: number): number {
  let below = 0;
  let i = 0;
  while (i < u.length - 1 && below + probability[i]! < p) below += probability[i++]!;
  const step = u.length > 1 ? u[1]! - u[0]! : 0;
  return u[i]! + step * ((p - below) / (probability[i]! || 1) - 0.5);
}
