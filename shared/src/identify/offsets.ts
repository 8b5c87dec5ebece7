import { featureAt, velocityOf, type Coverage, type FeatureView } from './views.js';
import type { Expected, SpeciesModel, SystemModel } from './model.js';
import type { Population } from './at-large.js';
import { C_KM_PER_S } from '../units/index.js';

/** Offsets tried for a species, dex: wide enough for any abundance or ionisation that the strength model misses. */
const STEP = 0.08;
const HALF = 32;
export const OFFSETS: Float64Array = Float64Array.from({ length: 2 * HALF + 1 }, (_, i) => (i - HALF) * STEP);

/** What is known of the features before a system is weighed: chance rates and what other systems explain. */
export interface Background {
  /** features of that kind per km/s near a wavelength */
  rate(kind: 'dip' | 'peak', wavelength: number): number;
  /** chance, 0 to 1, that other systems make this feature */
  explained(featureIndex: number, without: SystemModel): number;
  /** what a first ranking taught of the features at large; the defaults of `population.ts` when absent */
  readonly population?: Population;
}

/** ln odds that missing emission lines of one species can weigh at most: they share their cause, the star's absorption that fills them in. */
const MOST_AGAINST = 12;
const LOG_W_SPREAD = 0.55; // dex, spread of log W among features at large
const LOG_FWHM_SPREAD = 0.5; // natural log, spread of widths among features at large
const WIDTH_SCATTER = 0.22; // natural log, scatter of widths about a system's own

/** One line's say about its species' offset. */
export interface LineTerm {
  readonly expected: Expected;
  /** feature that it may be, or null */
  readonly feature: FeatureView | null;
  readonly outcome: 'seen' | 'merged' | 'missing' | 'below_limit' | 'not_covered';
  /** ln of the likelihood ratio at every offset of OFFSETS; null when it says nothing */
  readonly term: Float64Array | null;
  /** measured log10 W, or the 1-sigma limit's, nm */
  readonly logMeasured: number;
  readonly sigmaLog: number;
}

const normalPdf = (x: number): number => Math.exp(-0.5 * x * x) / Math.sqrt(2 * Math.PI);

/** Normal distribution function, absolute error under 2e-4 (logistic form of Bowling et al. 2009, from memory): enough for soft limits. */
export function normalCdf(x: number): number {
  return 1 / (1 + Math.exp(-x * (1.5976 + 0.07056 * x * x)));
}

/** ln (0.02 + 0.98 Phi(x)): a line that should show but does not, with room for a wrong promise; tabulated for x from -6 to 6. */
const UNSEEN_STEPS = 1024;
const UNSEEN: Float64Array = Float64Array.from({ length: UNSEEN_STEPS + 1 }, (_, k) =>
  Math.log(0.02 + 0.98 * normalCdf(-6 + (12 * k) / UNSEEN_STEPS)),
);

function unseenTerm(at: number, softness: number): Float64Array {
  const term = new Float64Array(OFFSETS.length);
  for (let i = 0; i < term.length; i++) {
    const x = at - OFFSETS[i]! / softness;
    term[i] = UNSEEN[Math.max(0, Math.min(UNSEEN_STEPS, Math.round(((x + 6) * UNSEEN_STEPS) / 12)))]!;
  }
  return term;
}

/** ln likelihood ratios of one line at all offsets: the line is there against a chance feature or none. */
export function lineTerm(
  e: Expected,
  system: SystemModel,
  features: readonly FeatureView[],
  coverage: Coverage,
  background: Background,
): LineTerm {
  const fwhmNm = (e.wavelength * Math.max(e.fwhmV, coverage.elementV)) / C_KM_PER_S;
  const feature = nearest(e, system.kind, features);
  const sigmaW = coverage.sigmaW(e.wavelength, fwhmNm);
  if (Number.isNaN(sigmaW)) return { expected: e, feature: null, outcome: 'not_covered', term: null, logMeasured: NaN, sigmaLog: NaN };
  const logLimit = Math.log10(coverage.threshold * sigmaW);
  if (!feature) {
    const softness = Math.hypot(0.12, e.scatter);
    const outcome = e.logW > logLimit && !e.merges ? 'missing' : 'below_limit';
    const silent = logLimit - e.logW - OFFSETS[OFFSETS.length - 1]! > 4 * softness; // invisible at any offset
    const term = silent || e.merges ? null : unseenTerm((logLimit - e.logW) / softness, softness);
    return { expected: e, feature: null, outcome, term, logMeasured: Math.log10(sigmaW), sigmaLog: NaN };
  }
  const dv = velocityOf(feature.wavelength, e.wavelength);
  const sigmaPos = positionSigma(e, feature);
  const rate = background.rate(system.kind, e.wavelength);
  const other = background.explained(feature.index, system);
  const place = (normalPdf(dv / sigmaPos) / sigmaPos / rate) * widthRatio(e, feature, coverage);
  const sigmaLog = Math.hypot(e.scatter, feature.sigmaLogW, 0.03);
  const free = 1 - 0.97 * other;
  const excess = feature.logW - e.logW;
  const term = new Float64Array(OFFSETS.length);
  const scale = (free * place * LOG_W_SPREAD) / sigmaLog;
  for (let i = 0; i < term.length; i++) {
    const z = (excess - OFFSETS[i]!) / sigmaLog;
    const hidden = normalCdf(z - 0.2 / sigmaLog);
    term[i] = Math.log(0.01 + (z * z < 80 ? scale * Math.exp(-0.5 * z * z) : 0) + 0.9 * hidden);
  }
  const merged = feature.logW - e.logW > 0.7;
  return { expected: e, feature, outcome: merged ? 'merged' : 'seen', term, logMeasured: feature.logW, sigmaLog: feature.sigmaLogW };
}

/** km/s: centroid, system and laboratory errors, and what a blend pulls in broad features. */
export function positionSigma(e: Expected, f: FeatureView): number {
  return Math.hypot(e.sigmaV, f.sigmaV, 0.02 * f.fwhmV, 0.15);
}

/** How much better the feature's width suits the system than features at large. */
export function widthRatio(e: Pick<Expected, 'fwhmV' | 'widthSpread'>, f: FeatureView, coverage: Coverage): number {
  const expected = Math.max(e.fwhmV, coverage.elementV);
  const spread = Math.hypot(e.widthSpread ?? WIDTH_SCATTER, 1.2 / Math.max(f.significance, 2));
  const z = Math.log(f.fwhmV / expected) / spread;
  const zFlat = Math.log(f.fwhmV / (1.6 * coverage.elementV)) / (2 * LOG_FWHM_SPREAD);
  const own = 0.96 * (normalPdf(z) / spread) + 0.04 * (normalPdf(zFlat) / (2 * LOG_FWHM_SPREAD));
  return own / (normalPdf(zFlat) / (2 * LOG_FWHM_SPREAD) + 0.05);
}

/** The feature that may be the line: of its kind, nearest in units of its own width. */
function nearest(e: Expected, kind: 'dip' | 'peak', features: readonly FeatureView[]): FeatureView | null {
  let best: FeatureView | null = null;
  let bestDistance = 1;
  const widest = 3 * Math.max(e.fwhmV, 60) + 400;
  const span = (e.wavelength * widest) / C_KM_PER_S;
  for (let i = featureAt(features, e.wavelength - span); i < features.length && features[i]!.wavelength < e.wavelength + span; i++) {
    const f = features[i]!;
    if (f.kind !== kind) continue;
    const dv = Math.abs(velocityOf(f.wavelength, e.wavelength));
    const distance = dv / Math.max(3.5 * positionSigma(e, f), 0.5 * f.fwhmV);
    if (distance < bestDistance) [best, bestDistance] = [f, distance];
  }
  return best;
}

/** What the data say about one species of a system. */
export interface SpeciesState {
  readonly model: SpeciesModel;
  readonly terms: LineTerm[];
  /** unnormalised ln posterior of the offset at OFFSETS, prior included */
  readonly logPosterior: Float64Array;
  /** ln evidence ratio: species present against absent */
  readonly logEvidence: number;
}

export function speciesState(
  model: SpeciesModel,
  system: SystemModel,
  features: readonly FeatureView[],
  coverage: Coverage,
  background: Background,
): SpeciesState {
  const terms = model.lines.map((e) => lineTerm(e, system, features, coverage, background));
  const logPosterior = Float64Array.from(OFFSETS, (d) => -0.5 * ((d - model.priorMean) / model.priorSigma) ** 2);
  const norm = logSumExp(logPosterior);
  const absence = new Float64Array(OFFSETS.length);
  for (const t of terms) {
    if (!t.term) continue;
    const sum = t.feature ? logPosterior : absence;
    for (let i = 0; i < sum.length; i++) sum[i]! += t.term[i]!;
  }
  const most = system.kind === 'peak' ? MOST_AGAINST : Infinity;
  for (let i = 0; i < absence.length; i++) logPosterior[i]! += most === Infinity ? absence[i]! : most * Math.expm1(absence[i]! / most);
  return { model, terms, logPosterior, logEvidence: logSumExp(logPosterior) - norm };
}

export function logSumExp(x: Float64Array): number {
  let top = -Infinity;
  for (const v of x) if (v > top) top = v;
  let sum = 0;
  for (const v of x) sum += Math.exp(v - top);
  return top + Math.log(sum);
}

/** Mean and 1 sigma of an offset after its ln posterior, one line's own term taken out when given. */
export function offsetMoments(state: SpeciesState, without: LineTerm | null): { mean: number; sigma: number; logEvidence: number } {
  const p = Float64Array.from(state.logPosterior);
  if (without?.term) for (let i = 0; i < p.length; i++) p[i]! -= without.term[i]!;
  const log = logSumExp(p);
  let mean = 0;
  let square = 0;
  for (let i = 0; i < p.length; i++) {
    const w = Math.exp(p[i]! - log);
    mean += w * OFFSETS[i]!;
    square += w * OFFSETS[i]! ** 2;
  }
  const { priorMean, priorSigma } = state.model;
  const norm = logSumExp(Float64Array.from(OFFSETS, (d) => -0.5 * ((d - priorMean) / priorSigma) ** 2));
  return { mean, sigma: Math.sqrt(Math.max(square - mean * mean, STEP * STEP * 0.08)), logEvidence: log - norm };
}

/** ln evidence of a system: every species may be absent, so an unlikely one costs little and gains nothing. */
export function systemEvidence(states: readonly SpeciesState[]): number {
  let sum = 0;
  for (const s of states) {
    const p = s.model.presence;
    sum += Math.log(1 - p + p * Math.exp(Math.min(s.logEvidence, 600)));
  }
  return sum;
}
