import { evenCoverage, featureOf, inOrder } from '../../../test/support/features.js';
import { lineOf } from '../../../test/support/lines.js';
import { argue, companionsOf, logit, sumUp, withError } from './evidence.js';
import type { Expected, SystemModel } from './model.js';
import { speciesState, type Background } from './offsets.js';
import { contendersOf, rankFeature } from './rank.js';
import { Elsewhere, settlingOf } from './settle.js';

const COVERAGE = evenCoverage(580, 600, 50_000, 100);
const BACKGROUND: Background = { rate: () => 0.005, explained: () => 0 };
const D2 = lineOf({ species: 'Na I', settings: ['interstellar'], wavelengthNm: 589.158, oscillatorStrength: 0.64 });
const D1 = lineOf({ species: 'Na I', settings: ['interstellar'], wavelengthNm: 589.756, oscillatorStrength: 0.32 });
const WEAK = lineOf({ species: 'Na I', settings: ['interstellar'], wavelengthNm: 595, oscillatorStrength: 1e-6 });
const ULTRAVIOLET = [
  lineOf({ species: 'Na I', settings: ['interstellar'], wavelengthNm: 330.3, oscillatorStrength: 0.009 }),
  lineOf({ species: 'Na I', settings: ['interstellar'], wavelengthNm: 330.4, oscillatorStrength: 0.0045 }),
  lineOf({ species: 'Na I', settings: ['interstellar'], wavelengthNm: 285.3, oscillatorStrength: 0.001 }),
];
const expected = (line: typeof D2, widthNm: number): Expected => ({
  line,
  wavelength: line.wavelengthNm,
  logW: Math.log10(widthNm),
  scatter: 0.1,
  sigmaV: 0.2,
  fwhmV: 8,
});

/** The sodium doublet, of which the second line shows or not. */
function argued(second: boolean, kmPerS = 0) {
  const features = inOrder([featureOf(D2, kmPerS, 0.01, 8), ...(second ? [featureOf(D1, 0, 0.008, 8)] : [])]);
  const model = {
    species: 'Na I',
    lines: [expected(D2, 0.01), expected(D1, 0.008), expected(WEAK, 1e-6)],
    priorMean: 0,
    priorSigma: 0.4,
    presence: 0.9,
  };
  const system: SystemModel = {
    id: 'cloud1',
    family: 'interstellar',
    kind: 'dip',
    velocity: -12.34,
    velocitySigma: 0.1,
    significance: 9,
    fwhmV: 8,
    species: [model],
    strengthOf: (lines) => Float64Array.from(lines, (l) => Math.log10(0.01 * l.oscillatorStrength!)),
  };
  const state = { system, states: [speciesState(model, system, features, COVERAGE, BACKGROUND)] };
  const f = features[0]!;
  const ranking = rankFeature(f, contendersOf(f, [state], features), COVERAGE, BACKGROUND);
  const best = ranking.ranked[0]!;
  const parts = argue(best, f, ranking.contenders, ranking.unidentified, COVERAGE);
  const beyond = new Elsewhere([...ULTRAVIOLET, D2, D1], COVERAGE).of(best.contender);
  return {
    parts,
    best,
    companions: companionsOf(best.contender, f, beyond),
    settling: (probability: number) => settlingOf({ ...best, probability }, f, beyond, COVERAGE),
    part: (name: string) => parts.find((p) => p.part === name)!,
  };
}

describe('the argument', () => {
  it('adds up to the odds', () => {
    for (const { parts, best } of [argued(true), argued(false), argued(true, 0.8)])
      expect(parts.reduce((sum, { logOdds }) => sum + logOdds, 0)).toBeCloseTo(logit(best.probability), 9);
  });

  it('speaks for a companion that is seen and against one that is missing', () => {
    expect(argued(true).part('companions').logOdds).toBeGreaterThan(argued(false).part('companions').logOdds + 1);
    expect(argued(true).part('companions').sentence).toContain('1 of 1 due Na I lines are seen');
    expect(argued(false).part('companions').sentence).toContain('missing: 589.76 nm');
  });

  it('speaks less for a place further off, in words too', () => {
    expect(argued(true).part('position').logOdds).toBeGreaterThan(argued(true, 0.8).part('position').logOdds);
    expect(argued(true, 0.8).part('position').sentence).toMatch(/^\+0\.8\d? ± 0\.\d+ km\/s from where the cloud at −12\.3 km\/s puts it$/);
  });

  it('gives strengths in mÅ, measured and expected', () =>
    expect(argued(true).part('strength').sentence).toMatch(/^100\.\d ± 4\.6 mÅ measured, \d+(\.\d)? mÅ expected within a factor \d\.\d/));

  it('is summed up in a sentence that names what speaks for it, and what would settle an open case', () => {
    const { best, parts, settling } = argued(false);
    const sentence = sumUp(best.contender, parts, settling(0.6));
    expect(sentence).toContain('Na I in the cloud');
    expect(sentence).toMatch(
      /Na I 330\.30 nm, not covered, would settle it: expected at 330\.29 nm \(vacuum\) with \d+(\.\d+)? mÅ, within a factor \d\.\d\.$/,
    );
    expect(settling(0.99)).toBeNull();
    expect(settling(0.01)).toBeNull();
  });
});

describe('companions', () => {
  it('are seen with what was measured, missing with the limit, below the limit, or not covered', () => {
    const seen = argued(true).companions;
    expect(seen.map(({ restNm, outcome }) => [restNm, outcome])).toEqual([
      [589.756, 'seen'],
      [595, 'below_limit'],
      [330.3, 'not_covered'],
      [330.4, 'not_covered'],
    ]);
    expect(seen[0]!.measuredNm).toBeCloseTo(0.008, 9);
    expect(seen[0]!.expectedNm).toBeGreaterThan(0.004);
    const [missing] = argued(false).companions;
    expect(missing).toMatchObject({ restNm: 589.756, outcome: 'missing', measuredNm: null });
    expect(missing!.measuredSigmaNm).toBeGreaterThan(0);
  });

  it('outside the data are the two that it would pay most to observe, with the strength expected there', () => {
    const beyond = argued(true).companions.filter((c) => c.outcome === 'not_covered');
    expect(beyond.map(({ restNm }) => restNm)).toEqual([330.3, 330.4]);
    expect(beyond[0]!.expectedNm / beyond[1]!.expectedNm).toBeCloseTo(2, 1);
  });
});

describe('numbers in words', () => {
  it('carry two digits of their error', () => {
    expect(withError(4226.7284, 0.0213)).toBe('4226.728 ± 0.021');
    expect(withError(-12.345, 1.23)).toBe('−12.3 ± 1.2');
    expect(withError(1234, 56)).toBe('1234 ± 56');
    expect(withError(0.00012347, 0.0000021)).toBe('0.0001235 ± 0.0000021');
    expect(withError(12.345678, NaN)).toBe('12.35');
  });

  it('of certainty stay finite', () => {
    expect([logit(0), logit(1)].map(Number.isFinite)).toEqual([true, true]);
    expect(logit(0.5)).toBe(0);
    expect(logit(0.9)).toBeCloseTo(Math.log(9), 12);
  });
});
