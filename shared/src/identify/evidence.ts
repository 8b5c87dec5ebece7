import type { Line } from '../linelist/index.js';
import type { Companion, EvidencePart, Settling } from './analysis.js';
import { offsetMoments, positionSigma, widthRatio, type LineTerm, type SpeciesState } from './offsets.js';
import type { Contender, Ranked } from './rank.js';
import { velocityOf, type Coverage, type FeatureView } from './views.js';

/** A line of a species that the data do not cover; logW is log10 of the expected |W| in nm before the species' offset, or NaN. */
export interface Beyond {
  readonly line: Line;
  readonly logW: number;
}

export const MILLI_ANGSTROM = 1e4; // per nm
const COMPANIONS = 8;
const FLAT_VELOCITY = 1 / 60; // per km/s: a place at random within +-30 km/s
const FLAT_LOG_W = 0.55; // dex, spread of strengths at large

/** Number with a sign people read: a true minus, and plus where asked. */
export const signed = (x: number, digits: number): string => `${x < 0 ? '−' : '+'}${Math.abs(x).toFixed(digits)}`;

/** Value and error with two significant digits of the error. */
export function withError(value: number, sigma: number): string {
  if (!(sigma > 0) || !Number.isFinite(sigma)) return value.toPrecision(4);
  const digits = Math.max(0, Math.min(8, 1 - Math.floor(Math.log10(sigma))));
  return `${value < 0 ? '−' : ''}${Math.abs(value).toFixed(digits)} ± ${sigma.toFixed(digits)}`;
}

const lnNormal = (x: number, mean: number, sigma: number): number => -0.5 * ((x - mean) / sigma) ** 2 - Math.log(sigma);

/**
 * The argument for a reading: five factors on the odds whose logarithms add to ln(p / (1 - p)).
 * Position, strength, companions and width weigh the line against a feature at random; chance holds the rest: prior odds and rivals.
 */
export function argue(r: Ranked, f: FeatureView, rivals: readonly Contender[], unidentified: number, coverage: Coverage): EvidencePart[] {
  const { contender: c } = r;
  const e = c.expected;
  const own = c.term.feature === f ? c.term : null;
  const learned = offsetMoments(c.state, own);
  const { priorMean, priorSigma, presence } = c.state.model;
  const dv = velocityOf(f.wavelength, e.wavelength);
  const sigmaV = positionSigma(e, f);
  const position = lnNormal(dv, 0, sigmaV) - Math.log(Math.sqrt(2 * Math.PI)) - Math.log(FLAT_VELOCITY);
  const spreadPrior = Math.hypot(priorSigma, e.scatter, f.sigmaLogW, 0.06);
  const spreadLearned = Math.hypot(learned.sigma, e.scatter, f.sigmaLogW, 0.06);
  const strength = lnNormal(f.logW, e.logW + priorMean, spreadPrior) + Math.log(FLAT_LOG_W);
  const companions =
    lnNormal(f.logW, e.logW + learned.mean, spreadLearned) -
    lnNormal(f.logW, e.logW + priorMean, spreadPrior) +
    Math.log(c.presence / presence);
  const width = Math.log(widthRatio(e, f, coverage));
  const total = logit(r.probability);
  const chance = total - position - strength - companions - width;
  return [
    {
      part: 'position',
      logOdds: position,
      sentence: `${signed(dv, sigmaV < 0.1 ? 2 : 1)} ± ${sigmaV.toFixed(sigmaV < 0.1 ? 2 : 1)} km/s from where ${placeOf(c)} puts it`,
    },
    { part: 'strength', logOdds: strength, sentence: strengthSentence(c, f) },
    { part: 'companions', logOdds: companions, sentence: companionSentence(c.state, own) },
    {
      part: 'width',
      logOdds: width,
      sentence: `${f.fwhmV.toFixed(1)} km/s wide; lines of this system would be ${Math.max(e.fwhmV, coverage.elementV).toFixed(1)} km/s here`,
    },
    { part: 'chance', logOdds: chance, sentence: chanceSentence(f, rivals, unidentified) },
  ];
}

/** ln(p / (1 - p)), kept finite. */
export function logit(p: number): number {
  const q = Math.min(Math.max(p, 1e-6), 1 - 1e-6);
  return Math.log(q / (1 - q));
}

export const PLACE: Record<string, string> = {
  stellar: 'the star',
  interstellar: 'the cloud',
  nebular: 'the nebula',
  telluric: "the Earth's air",
};
const placeOf = (c: Contender): string => `${PLACE[c.system.family]} at ${signed(c.system.velocity, 1)} km/s`;

function strengthSentence(c: Contender, f: FeatureView): string {
  const measured = 10 ** f.logW * MILLI_ANGSTROM;
  const expected = 10 ** c.logW * MILLI_ANGSTROM;
  const ratio = measured / expected;
  const factor = 10 ** Math.hypot(c.sigmaLog, f.sigmaLogW);
  const verdict =
    ratio > factor ** 2
      ? `, ${ratio.toFixed(1)} times too strong`
      : ratio < factor ** -2
        ? `, ${(1 / ratio).toFixed(1)} times too weak`
        : '';
  return `${withError(measured, measured * f.sigmaLogW * Math.LN10)} mÅ measured, ${round(expected)} mÅ expected within a factor ${factor.toFixed(1)}${verdict}`;
}

/** Three figures of a width. */
export const round = (x: number): string => (x >= 100 ? x.toFixed(0) : x >= 10 ? x.toFixed(1) : x.toFixed(2));

interface Tally {
  readonly seen: number;
  readonly missing: readonly string[];
  readonly below: number;
}
const tallies = new WeakMap<SpeciesState, Tally>();

function tallyOf(state: SpeciesState): Tally {
  let tally = tallies.get(state);
  if (!tally) {
    const count = (...outcomes: LineTerm['outcome'][]) => state.terms.filter((t) => outcomes.includes(t.outcome));
    tally = {
      seen: count('seen', 'merged').length,
      missing: count('missing').map((t) => t.expected.line.wavelengthNm.toFixed(2)),
      below: count('below_limit').length,
    };
    tallies.set(state, tally);
  }
  return tally;
}

function companionSentence(state: SpeciesState, own: LineTerm | null): string {
  const { seen: all, missing, below } = tallyOf(state);
  const seen = all - (own?.outcome === 'seen' || own?.outcome === 'merged' ? 1 : 0);
  const due = seen + missing.length;
  if (due === 0)
    return below
      ? `no other line of ${state.model.species} should show above the noise`
      : `no other line of ${state.model.species} is covered`;
  const lost = missing.length
    ? `; missing: ${missing.slice(0, 3).join(', ')} nm${missing.length > 3 ? ` and ${missing.length - 3} more` : ''}`
    : '';
  return `${seen} of ${due} due ${state.model.species} lines are seen${lost}`;
}

function chanceSentence(f: FeatureView, rivals: readonly Contender[], unidentified: number): string {
  const near = rivals.filter((c) => Math.abs(velocityOf(f.wavelength, c.expected.wavelength)) < 10).length;
  return `${near} listed ${near === 1 ? 'line' : 'lines'} of the systems found lie within ±10 km/s; not in the list: ${percent(unidentified)}`;
}

const percent = (p: number): string => (p >= 0.995 ? 'almost certain' : `${(100 * p).toFixed(p < 0.1 ? 1 : 0)} %`);

const ranked = new WeakMap<SpeciesState, LineTerm[]>();

/** The strongest lines of a species, sorted once. */
function strongest(state: SpeciesState): LineTerm[] {
  let list = ranked.get(state);
  if (!list) {
    list = [...state.terms]
      .sort((a, b) => b.expected.logW - a.expected.logW || a.expected.wavelength - b.expected.wavelength)
      .slice(0, COMPANIONS + 1);
    ranked.set(state, list);
  }
  return list;
}

/** The other lines of the species that should show, strongest first, then the strongest that the data do not cover. */
export function companionsOf(c: Contender, f: FeatureView, beyond: readonly Beyond[]): Companion[] {
  const own = c.term.feature === f ? c.term : null;
  const { mean, sigma } = offsetMoments(c.state, own);
  const terms = strongest(c.state).filter((t) => t !== c.term);
  const covered = terms.slice(0, COMPANIONS).map((t): Companion => {
    const expectedNm = 10 ** (t.expected.logW + mean);
    const seen = t.outcome === 'seen' || t.outcome === 'merged';
    return {
      species: t.expected.line.species,
      restNm: t.expected.line.wavelengthNm,
      outcome: t.outcome === 'merged' ? 'seen' : t.outcome,
      expectedNm,
      expectedSigmaNm: expectedNm * Math.hypot(sigma, t.expected.scatter) * Math.LN10,
      measuredNm: seen && t.feature ? 10 ** t.feature.logW : null,
      measuredSigmaNm:
        seen && t.feature
          ? 10 ** t.feature.logW * t.feature.sigmaLogW * Math.LN10
          : Number.isFinite(t.logMeasured)
            ? 10 ** t.logMeasured
            : null,
    };
  });
  const out = beyond.map(({ line, logW }): Companion => {
    const expectedNm = Number.isFinite(logW) ? 10 ** (logW + mean) : 0;
    return {
      species: line.species,
      restNm: line.wavelengthNm,
      outcome: 'not_covered',
      expectedNm,
      expectedSigmaNm: expectedNm * Math.hypot(sigma, c.expected.scatter) * Math.LN10,
      measuredNm: null,
      measuredSigmaNm: null,
    };
  });
  return [...covered, ...out];
}

/** One sentence: why the reading ranks where it does, and what would settle it. */
export function sumUp(c: Contender, parts: readonly EvidencePart[], settle: Settling | null): string {
  const words: Record<EvidencePart['part'], string> = {
    position: 'its place',
    strength: 'its strength',
    companions: `the other ${c.expected.line.species} lines`,
    width: 'its width',
    chance: 'rival readings',
  };
  const own = parts.filter((p) => p.part !== 'chance').sort((a, b) => b.logOdds - a.logOdds);
  const best = own[0]!;
  const worst = [...parts].sort((a, b) => a.logOdds - b.logOdds)[0]!;
  const against = worst.logOdds < -0.7 ? `; against it ${words[worst.part]}` : '';
  return `${c.expected.line.species} in ${placeOf(c)}: most for it ${words[best.part]}${against}.${settle ? ` ${settle.sentence}` : ''}`;
}
