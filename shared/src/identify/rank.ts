import { C_KM_PER_S } from '../units/index.js';
import { normalDraws } from './draws.js';
import type { Expected, SystemModel } from './model.js';
import { AT_LARGE } from './at-large.js';
import { offsetMoments, widthRatio, type Background, type LineTerm, type SpeciesState } from './offsets.js';
import { featureAt, velocityOf, type Coverage, type FeatureView } from './views.js';

/** A system with what the data say of its species. */
export interface SystemState {
  readonly system: SystemModel;
  readonly states: readonly SpeciesState[];
}

/** A line of a system that may take part in a feature, with the strength the rest of the data leave it. */
export interface Contender {
  readonly expected: Expected;
  readonly system: SystemModel;
  readonly state: SpeciesState;
  readonly term: LineTerm;
  /** log10 of |W| in nm, mean and 1 sigma, this feature's own say left out */
  readonly logW: number;
  readonly sigmaLog: number;
  /** chance that the species shows in the system, this feature's own say left out */
  readonly presence: number;
  /** share of the line's light that would fall to this feature, 0 to 1 */
  readonly part: number;
}

export interface Ranked {
  readonly contender: Contender;
  /** chance that it makes at least 30 % of the feature */
  readonly probability: number;
  /** expected share of the feature's equivalent width */
  readonly share: number;
}

export interface FeatureRanking {
  readonly ranked: readonly Ranked[];
  /** every line that was weighed, listed or not */
  readonly contenders: readonly Contender[];
  readonly unidentified: number;
}

const DRAWS = 400;
const MAIN_SHARE = 0.3;
const CROWD_SHARE = 0.7; // of the strongest, where no line makes MAIN_SHARE
const MODEL_ERROR = 0.14; // natural log: profile misfit and blending at the 14 % level
const BLEND_PULL = 0.35; // of the spread of blended lines: how far a single profile's centroid strays from theirs
const NEGLIGIBLE = 1.5; // dex: a line that is this much too weak even at 2 sigma takes no part
const LEAST = 0.002; // candidates below this chance are not listed
const TAKES_PART = 0.05; // of the feature: a line that cannot be the main one is told all the same, for it changes the width
const MOST = 8;
const LEAST_UNLISTED = 0.25; // of the feature: what a line that no list holds must add to be worth a hypothesis
const UNRESOLVED = 0.7; // of the feature's FWHM: further apart, two lines would be two features
/** Where a line is that the list has at a wrong place: anywhere within this of it, km/s, as likely as that it is not there at all. */
const MISPLACED_WITHIN = 60;

const LN10 = Math.LN10;
/** Chance that a line which the strength model promises is not there: wrong gf, wrong level, a list's slip. */
const PROMISE_BROKEN = 0.07;

/** Student's t density with 30 degrees of freedom: somewhat more than Gaussian errors allow. */
const heavyTail = (z: number): number => 0.3956 * (1 + (z * z) / 30) ** -15.5;
const normalPdf = (z: number): number => Math.exp(-0.5 * z * z) / Math.sqrt(2 * Math.PI);

/** Lines of all systems that reach into a feature. */
export function contendersOf(f: FeatureView, systems: readonly SystemState[], features: readonly FeatureView[]): Contender[] {
  const out: Contender[] = [];
  for (const { system, states } of systems) {
    if (system.kind !== f.kind) continue;
    for (const state of states) {
      const reach = ((0.55 * Math.max(f.fwhmV, 1.2 * system.fwhmV) + 12) * f.wavelength) / C_KM_PER_S;
      for (let k = termAt(state.terms, f.wavelength - reach); k < state.terms.length; k++) {
        const term = state.terms[k]!;
        const e = term.expected;
        if (e.wavelength > f.wavelength + reach) break;
        const own = term.feature === f ? term : null;
        const { mean, sigma, logEvidence } = offsetMoments(state, own);
        const part = partOf(e, e.logW + mean, f, features);
        if (part < 0.02) continue;
        const p = state.model.presence;
        const odds = (p / (1 - p)) * Math.exp(Math.max(-30, Math.min(30, logEvidence)));
        out.push({
          expected: e,
          system,
          state,
          term,
          logW: e.logW + mean,
          sigmaLog: Math.hypot(sigma, e.scatter),
          presence: odds / (1 + odds),
          part,
        });
      }
    }
  }
  return out;
}

function termAt(terms: readonly LineTerm[], wavelength: number): number {
  let low = 0;
  let high = terms.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (terms[mid]!.expected.wavelength < wavelength) low = mid + 1;
    else high = mid;
  }
  return low;
}

/** Share of a line's light that a feature takes when its neighbours compete for it, by distance in units of their widths; a feature far too weak for the line takes little. */
function partOf(e: Expected, logW: number, f: FeatureView, features: readonly FeatureView[]): number {
  const holds = (g: FeatureView): number => Math.min(1, 10 ** (g.logW - logW));
  const pull = (g: FeatureView): number => {
    const width = Math.hypot(0.3 * Math.max(g.fwhmV, 0.7 * e.fwhmV), 2 * e.sigmaV);
    const d = velocityOf(g.wavelength, e.wavelength) / width;
    return Math.exp(-0.5 * d * d) / Math.max(1, g.fwhmV / (1.5 * e.fwhmV), e.fwhmV / (1.5 * g.fwhmV));
  };
  const near = pull(f);
  if (near < 1e-3) return 0;
  const own = near * holds(f);
  let all = 0;
  const span = ((2 * Math.max(e.fwhmV, f.fwhmV) + 20) * f.wavelength) / C_KM_PER_S;
  for (let i = featureAt(features, e.wavelength - span); i < features.length && features[i]!.wavelength < e.wavelength + span; i++) {
    if (features[i]!.kind === f.kind) all += pull(features[i]!) * holds(features[i]!);
  }
  return own / Math.max(all, own);
}

/**
 * Ranks the readings of a feature: many sets of line strengths are drawn from the predictions with their scatter, blended, weighed by
 * how well they give the feature's equivalent width, centroid and width, and counted. A line that no list holds may make the feature, or
 * what the listed lines leave of it: what is left has to suit the strengths of features at large, and to lie where it would not be resolved.
 */
export function rankFeature(
  f: FeatureView,
  contenders: readonly Contender[],
  coverage: Coverage,
  background: Background,
  draws = DRAWS,
): FeatureRanking {
  const weighty = contenders.filter((c) => c.logW + 2 * c.sigmaLog + Math.log10(c.part) > f.logW - NEGLIGIBLE);
  if (weighty.length === 0) return { ranked: [], contenders, unidentified: 1 };
  return { ...draw(f, weighty, coverage, background, draws), contenders };
}

function draw(
  f: FeatureView,
  contenders: readonly Contender[],
  coverage: Coverage,
  background: Background,
  draws: number,
): Omit<FeatureRanking, 'contenders'> {
  const n = contenders.length;
  const { population = AT_LARGE } = background;
  const lnW = f.logW * LN10;
  const sigmaLn = Math.hypot(f.sigmaLogW * LN10, MODEL_ERROR);
  const settled = population.settled * (f.flags.includes('blend') ? 2.5 : 1) * f.fwhmV; // how well a centroid holds against neighbours and profile misfit
  const offset = contenders.map((c) => velocityOf(c.expected.wavelength, f.wavelength));
  const width = contenders.map((c) => Math.max(widthRatio(c.expected, f, coverage), 1e-4));
  const meanLn = population.logW(f.kind) * LN10;
  const spreadLn = population.logWSpread * LN10;
  const unlistedRate = population.unlistedShare * background.rate(f.kind, f.wavelength);
  const unlistedWidth = population.widthRatio(f);
  const wins = new Float64Array(n);
  const shares = new Float64Array(n);
  const w = new Float64Array(n);
  const lost = new Float64Array(n); // strengths of lines that the list has, but not here
  let total = 0;
  let open = 0;
  const count = (weight: number, whole: number, rest: number): void => {
    total += weight;
    let top = rest;
    for (let k = 0; k < n; k++) top = Math.max(top, w[k]!);
    const main = Math.min(MAIN_SHARE * whole, CROWD_SHARE * top);
    let any = false;
    for (let k = 0; k < n; k++) {
      shares[k]! += (weight * w[k]!) / whole;
      if (w[k]! < main || w[k] === 0) continue;
      wins[k]! += weight;
      any = true;
    }
    if (!any) open += weight;
  };
  for (let j = 0; j < draws; j++) {
    let sum = 0;
    let centroid = 0;
    let top = 0;
    let misplaced = 0;
    for (let k = 0; k < n; k++) {
      const c = contenders[k]!;
      const chance = uniform(j, k);
      const strength = chance < c.presence ? c.part * Math.exp(LN10 * (c.logW + c.sigmaLog * normalDraws(j, k))) : 0;
      const kept = chance < c.presence * (1 - PROMISE_BROKEN);
      w[k] = kept ? strength : 0;
      lost[k] = kept ? 0 : strength;
      sum += w[k]!;
      centroid += w[k]! * offset[k]!;
      if (w[k]! > w[top]!) top = k;
    }
    const whole = Math.exp(lnW);
    if (sum > 0) {
      centroid /= sum;
      let spread = 0;
      for (let k = 0; k < n; k++) spread += w[k]! * (offset[k]! - centroid) ** 2;
      const place = Math.hypot(f.sigmaV, settled, contenders[top]!.expected.sigmaV, 0.2, BLEND_PULL * Math.sqrt(spread / sum));
      const zW = (lnW - Math.log(sum)) / sigmaLn;
      const zV = centroid / place;
      count(((heavyTail(zW) * heavyTail(zV)) / (sigmaLn * place)) * width[top]!, sum, 0);
    }
    const left = whole - sum;
    if (left < LEAST_UNLISTED * whole) continue;
    const lever = whole / left;
    const gap = (centroid * lever) / (UNRESOLVED * f.fwhmV);
    const lnLeft = Math.log(left);
    for (let k = 0; k < n; k++)
      if (lost[k]! > 0) misplaced += normalPdf((lnLeft - Math.log(lost[k]!)) / 0.2) / 0.2 / (4 * MISPLACED_WITHIN);
    const density = (unlistedRate * normalPdf((lnLeft - meanLn) / spreadLn)) / spreadLn + misplaced;
    count(density * lever * lever * Math.exp(-0.5 * gap * gap) * unlistedWidth, whole, left);
  }
  if (!(total > 0)) return { ranked: [], unidentified: 1 };
  const ranked = contenders
    .map((contender, k) => ({ contender, probability: wins[k]! / total, share: shares[k]! / total }))
    .filter((r) => r.probability >= LEAST || r.share >= TAKES_PART)
    .sort(
      (a, b) => b.probability - a.probability || b.share - a.share || a.contender.expected.wavelength - b.contender.expected.wavelength,
    );
  return { ranked: ranked.slice(0, MOST), unidentified: open / total };
}

/** A fixed low-discrepancy number in (0, 1) a draw and contender: the golden ratio's multiples, shifted a contender. */
const uniform = (j: number, k: number): number => ((j + 0.5) * 0.6180339887498949 + (k + 1) * 0.7548776662466927) % 1;
