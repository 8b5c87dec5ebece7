import type { Continuum } from '../identify/analysis.js';
import { planckSlope } from './planck.js';
import type { Quality } from './quality.js';
import { extinctionCurve } from './extinction.js';
import { BALMER_LIMIT_NM, LN_PER_MAG } from './smooth-model.js';
import type { TemperatureBelief } from './temperature.js';

export type Verdict = Pick<Continuum, 'temperatureK' | 'temperatureSigmaK' | 'constrained' | 'statement' | 'lowerBoundK' | 'upperBoundK'>;

export interface FittedRange {
  readonly fromNm: number;
  readonly toNm: number;
  /** visual extinction given by a person, mag; null when it was left open */
  readonly givenAv: number | null;
}

/** A temperature whose error is larger than this is not called constrained. */
const LARGEST_SIGMA = 0.08;
/** Bounds beyond these say nothing and are not told, K. */
const LOWEST_BOUND_K = 1000;
const HIGHEST_BOUND_K = 80_000;
/** Extinction laws differ among sightlines by about this part of the extinction. */
const LAW_SPREAD = 0.08;
/** Below this molecular bands shape an optical spectrum, K. */
const MOLECULES_BELOW_K = 4000;
/** More blocks than this without continuum: bands or lines everywhere. */
const MOST_EMPTY = 0.5;

/** Turns what is believed of the temperature into numbers, bounds and sentences. */
export function verdictOn(belief: TemperatureBelief, quality: Quality, range: FittedRange): Verdict {
  const temperatureK = Math.exp(belief.lnT);
  const lnSigma = Math.hypot(belief.lnSigma, belief.lnSystematic, lawSigma(belief, range));
  const reasons = reasonsAgainst(lnSigma, belief, quality, range);
  const constrained = reasons.length === 0;
  const sigmaK = temperatureK * lnSigma;
  const low = Math.exp(belief.lnLow);
  const high = Math.exp(belief.lnHigh);
  const lowerBoundK = constrained || low < LOWEST_BOUND_K ? null : low;
  const upperBoundK = constrained || high > HIGHEST_BOUND_K ? null : high;
  const cautions = cautionsFor(temperatureK, range);
  const first = constrained
    ? [`The colour temperature is ${kelvin(temperatureK, sigmaK)} ± ${kelvin(sigmaK, sigmaK)} K. ${dustSentence(belief, range)}`]
    : [...reasons, boundSentence(lowerBoundK, upperBoundK, sigmaK)];
  return {
    temperatureK,
    temperatureSigmaK: sigmaK,
    constrained,
    statement: [...first, ...cautions].filter((s) => s).join(' '),
    lowerBoundK,
    upperBoundK,
  };
}

/** Error of ln T from not knowing the extinction law: what a change of the law tilts, a change of temperature must tilt back. */
function lawSigma({ lnT, av }: TemperatureBelief, { fromNm, toNm, givenAv }: FittedRange): number {
  const total = av + (givenAv ?? 0);
  const t = Math.exp(lnT);
  const bend = Math.abs(planckSlope(fromNm, t) - planckSlope(toNm, t));
  const tilt = LN_PER_MAG * Math.abs(extinctionCurve(fromNm) - extinctionCurve(toNm));
  return bend > 0 ? Math.min(2, (LAW_SPREAD * total * tilt) / bend) : 0;
}

function reasonsAgainst(lnSigma: number, belief: TemperatureBelief, quality: Quality, range: FittedRange): string[] {
  if (quality.emissionDominates) {
    return ['Emission lines dominate: light between them need not come from a star alone, and its colour is not taken for a temperature.'];
  }
  if (quality.emptyBlocks > MOST_EMPTY) return ['Lines and bands leave too little continuum to tell a temperature.'];
  if (lnSigma <= LARGEST_SIGMA) return [];
  const span = `${range.fromNm.toFixed(1)} to ${range.toNm.toFixed(1)} nm`;
  const hot = Math.exp(belief.lnT) * range.fromNm > 6e6; // c2 / (lambda T) below 2.4: the bend of the Planck curve is nearly gone
  const reasons = [`The temperature is not constrained by the continuum from ${span}.`];
  if (range.givenAv === null && belief.unreddenedK < 0.93 * Math.exp(belief.lnT)) {
    reasons.push(
      `Reddening by dust and a lower temperature look alike: without dust it would be ${kelvin(belief.unreddenedK, 0.02 * belief.unreddenedK)} K.`,
    );
  } else if (hot) reasons.push('Curves of hotter bodies have nearly the same shape here (Rayleigh-Jeans tail).');
  else reasons.push('The range is too short, or the calibration too uneven, for the shape to tell.');
  return reasons;
}

function boundSentence(low: number | null, high: number | null, sigmaK: number): string {
  const fine = Math.max(50, 0.2 * sigmaK);
  if (low !== null && high !== null) return `With 95 % confidence it lies between ${kelvin(low, fine)} and ${kelvin(high, fine)} K.`;
  if (low !== null) return `With 97.5 % confidence it is above ${kelvin(low, fine)} K.`;
  return high === null ? '' : `With 97.5 % confidence it is below ${kelvin(high, fine)} K.`;
}

function dustSentence({ av }: TemperatureBelief, { givenAv }: FittedRange): string {
  if (givenAv !== null) return `It holds for the given visual extinction of ${givenAv.toFixed(2)} mag.`;
  if (av < 0.05) return 'No reddening was needed; dust unseen would make the true temperature higher.';
  return `It allows for dust: a visual extinction near ${av.toFixed(2)} mag fits best.`;
}

function cautionsFor(temperatureK: number, { fromNm, toNm }: FittedRange): string[] {
  const cautions: string[] = [];
  if (fromNm < BALMER_LIMIT_NM && toNm > BALMER_LIMIT_NM) {
    cautions.push('The range covers the Balmer jump, which was fitted as a step and may bias the temperature.');
  }
  if (temperatureK < MOLECULES_BELOW_K && fromNm < 1000) {
    cautions.push('At this temperature molecular bands shape the continuum and may bias the temperature.');
  }
  return cautions;
}

/** The same temperature where the file says that its flux was never calibrated: told as the shape of a curve, trusted for nothing. */
export function asShapeOnly(verdict: Verdict): Verdict {
  const { temperatureK } = verdict;
  if (temperatureK === null) return verdict;
  const said =
    'The file states its flux as uncalibrated: the temperature describes the shape of the curve only and is not that of the source.';
  return { ...verdict, constrained: false, statement: said, lowerBoundK: null, upperBoundK: null };
}

/** A temperature rounded to two digits of its error. */
function kelvin(value: number, sigma: number): string {
  const step = 10 ** Math.max(0, Math.floor(Math.log10(Math.max(1, sigma))) - 1);
  return (Math.round(value / step) * step).toFixed(0);
}
