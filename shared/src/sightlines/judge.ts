import type { Verdict } from './comparison.js';

/** A width with its whole error, nm. */
export interface Width {
  readonly width: number;
  readonly error: number;
}

export interface Judgement {
  readonly verdict: Exclude<Verdict, 'telluric'>;
  readonly probability: number;
  /** posterior of the gas being seen in both, in A alone, in B alone, in neither */
  readonly posterior: { readonly shared: number; readonly a: number; readonly b: number; readonly neither: number };
}

/** Strengths of one line on two sightlines through one cloud differ by so much, dex; and now and then by far more. */
const RATIO_SIGMA = 0.35;
const RATIO_WILD = 0.1;
const RATIO_STEPS = 24;
const STRENGTH_STEPS = 40;
/** Chance that something nobody thought of takes light at a place. */
const STRAY = 0.02;
/** Chance that a species of a shared cloud is missing on one side, and that a line looked at shows nowhere. */
const MISSING = 0.04;
const NOWHERE = 0.1;
export const SEEN_AT = 3; // sigma
const SURE_SHARED = 0.6;
const SURE_ALONE = 0.7;

const gauss = (x: number, sigma: number): number => Math.exp(-0.5 * (x / sigma) ** 2) / (sigma * Math.sqrt(2 * Math.PI));

/** Likelihood of a width where the line is not, a stray absorber allowed for. */
const absent = ({ width, error }: Width): number =>
  (1 - STRAY) * gauss(width, error) + (width > 0 ? STRAY / (Math.max(width, error) * Math.log(100)) : STRAY * gauss(width, error));

const RATIOS = ratioGrid();
function ratioGrid(): { ratio: number; weight: number }[] {
  const core = Array.from({ length: RATIO_STEPS }, (_, i) => {
    const z = -2.5 + (5 * (i + 0.5)) / RATIO_STEPS;
    return { ratio: 10 ** (RATIO_SIGMA * z), weight: (1 - RATIO_WILD) * Math.exp(-0.5 * z * z) };
  });
  const total = core.reduce((s, r) => s + r.weight, 0) / (1 - RATIO_WILD);
  const wild = [-2, -1.6, -1.2, -0.8, 0.8, 1.2, 1.6, 2].map((dex) => ({ ratio: 10 ** dex, weight: RATIO_WILD / 8 }));
  return [...core.map((r) => ({ ...r, weight: r.weight / total })), ...wild];
}

/** Likelihoods of the two widths of one line under the four cases, over strengths spread evenly in their logarithm. */
export function likelihoods(a: Width, b: Width) {
  const low = Math.log(0.3 * Math.min(a.error, b.error));
  const high = Math.log(10 * Math.max(Math.abs(a.width), Math.abs(b.width), a.error, b.error));
  let both = 0;
  let inA = 0;
  let inB = 0;
  for (let i = 0; i < STRENGTH_STEPS; i++) {
    const w = Math.exp(low + ((high - low) * (i + 0.5)) / STRENGTH_STEPS);
    // the middle of both strengths is w, so that neither side is the measure of the other
    let sum = 0;
    for (const { ratio, weight } of RATIOS) {
      const root = Math.sqrt(ratio);
      sum += weight * wide(a, w / root, i, low, high) * wide(b, w * root, i, low, high);
    }
    both += sum;
    inA += wide(a, w, i, low, high);
    inB += wide(b, w, i, low, high);
  }
  const share = 1 / STRENGTH_STEPS;
  return { shared: both * share, a: inA * share * absent(b), b: inB * share * absent(a), neither: absent(a) * absent(b) };
}

/** Likelihood of a width given the strength, no narrower than the steps of the grid so that none falls between them. */
function wide({ width, error }: Width, strength: number, _i: number, low: number, high: number): number {
  return gauss(width - strength, Math.max(error, (0.5 * strength * (high - low)) / STRENGTH_STEPS));
}

/** @param shared chance that the cloud is crossed by both sightlines, before this line is looked at */
export function judge(a: Width, b: Width, shared: number): Judgement {
  const l = likelihoods(a, b);
  const prior = {
    shared: (1 - NOWHERE) * shared * (1 - 2 * MISSING),
    a: (1 - NOWHERE) * (shared * MISSING + (1 - shared) / 2),
    b: (1 - NOWHERE) * (shared * MISSING + (1 - shared) / 2),
    neither: NOWHERE,
  };
  const raw = { shared: l.shared * prior.shared, a: l.a * prior.a, b: l.b * prior.b, neither: l.neither * prior.neither };
  const total = Math.max(1e-300, raw.shared + raw.a + raw.b + raw.neither);
  const posterior = { shared: raw.shared / total, a: raw.a / total, b: raw.b / total, neither: raw.neither / total };
  const seen = { a: a.width > SEEN_AT * a.error, b: b.width > SEEN_AT * b.error };
  const could = (mine: Width, other: Width) => mine.width > Math.max(0, other.width) + 2 * other.error;
  if (seen.a && seen.b && posterior.shared >= SURE_SHARED) return { verdict: 'shared', probability: posterior.shared, posterior };
  if (seen.a && posterior.a >= SURE_ALONE && could(a, b)) return { verdict: 'only-a', probability: posterior.a, posterior };
  if (seen.b && posterior.b >= SURE_ALONE && could(b, a)) return { verdict: 'only-b', probability: posterior.b, posterior };
  return { verdict: 'cannot-tell', probability: Math.max(posterior.shared, posterior.a, posterior.b), posterior };
}

const VELOCITY_SPAN = 60; // km/s over which clouds of unrelated sightlines scatter
const CALIBRATION = 0.25; // km/s between two instruments
const MOST_PER_LINE = 6;

/** ln of how much likelier two velocities are for one cloud than for two that happen to be near each other. */
export function velocityLogOdds(difference: number, sigma: number): number {
  return Math.log(gauss(difference, Math.hypot(sigma, CALIBRATION)) * VELOCITY_SPAN);
}

/** ln of how much likelier the widths of one line are when the cloud is on both sightlines than on one of them alone; bounded for each line. */
export function lineLogOdds(a: Width, b: Width): number {
  const l = likelihoods(a, b);
  const ratio = Math.log(Math.max(l.shared, 1e-300)) - Math.log(Math.max(l.a, l.b, 1e-300));
  return Math.max(-MOST_PER_LINE, Math.min(MOST_PER_LINE, ratio));
}
export const chanceOf = (logOdds: number): number => 1 / (1 + Math.exp(-logOdds));
