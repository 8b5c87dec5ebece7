import fc from 'fast-check';
import { evenCoverage, featureOf, inOrder } from '../../../test/support/features.js';
import { lineOf } from '../../../test/support/lines.js';
import type { Expected, SpeciesModel, SystemModel } from './model.js';
import {
  logSumExp,
  normalCdf,
  offsetMoments,
  OFFSETS,
  positionSigma,
  speciesState,
  systemEvidence,
  widthRatio,
  type Background,
} from './offsets.js';
import type { FeatureView } from './views.js';

const COVERAGE = evenCoverage(580, 600, 50_000, 100);
const NOTHING_ELSE: Background = { rate: () => 0.005, explained: () => 0 };
const LINES = [585, 589, 593].map((wavelengthNm) => lineOf({ species: 'Na I', wavelengthNm, settings: ['interstellar'] }));
const expected = (index: number, logW: number): Expected => ({
  line: LINES[index]!,
  wavelength: LINES[index]!.wavelengthNm,
  logW,
  scatter: 0.1,
  sigmaV: 0.2,
  fwhmV: 7,
});
const species = (logW: readonly number[]): SpeciesModel => ({
  species: 'Na I',
  lines: logW.map((w, i) => expected(i, w)),
  priorMean: 0,
  priorSigma: 0.4,
  presence: 0.9,
});
const SYSTEM: SystemModel = {
  id: 'cloud1',
  family: 'interstellar',
  kind: 'dip',
  velocity: 0,
  velocitySigma: 0.1,
  significance: 9,
  fwhmV: 6,
  species: [],
};
const state = (logW: readonly number[], features: readonly FeatureView[], background = NOTHING_ELSE) =>
  speciesState(species(logW), SYSTEM, inOrder(features), COVERAGE, background);
const seen = (index: number, logW: number, v = 0, more: Partial<FeatureView> = {}) => featureOf(LINES[index]!, v, 10 ** logW, 7, more);

describe('a line of a system', () => {
  const outcomes = (logW: readonly number[], features: readonly FeatureView[]) => state(logW, features).terms.map(({ outcome }) => outcome);

  it('is seen where a feature of its kind lies, missing where it should show, below the limit where it could not', () => {
    expect(outcomes([-2, -2, -5], [seen(0, -2)])).toEqual(['seen', 'missing', 'below_limit']);
  });

  it('is merged where the feature is five times too strong, and not covered outside the data', () => {
    expect(outcomes([-3, -2, -2], [seen(0, -2)])[0]).toBe('merged');
    const outside = { ...expected(0, -2), wavelength: 700 };
    const { terms } = speciesState({ ...species([]), lines: [outside] }, SYSTEM, [], COVERAGE, NOTHING_ELSE);
    expect(terms[0]).toMatchObject({ outcome: 'not_covered', term: null });
  });

  it('is no peak when it is a dip', () => expect(outcomes([-2], [seen(0, -2, 0, { kind: 'peak' })])).toEqual(['missing']));
});

describe('the evidence for a species', () => {
  it('grows with every line seen at its place and strength', () => {
    const evidence = [1, 2, 3].map((n) => state([-2, -2.1, -2.2], [seen(0, -2), seen(1, -2.1), seen(2, -2.2)].slice(0, n)).logEvidence);
    expect(evidence[1]).toBeGreaterThan(evidence[0]!);
    expect(evidence[2]).toBeGreaterThan(evidence[1]!);
  });

  it('counts a missing strong line against it, one below the limit hardly', () => {
    const found = [seen(0, -2)];
    const alone = state([-2], found).logEvidence;
    expect(state([-2, -1.8], found).logEvidence).toBeLessThan(alone - 1);
    expect(Math.abs(state([-2, -5], found).logEvidence - alone)).toBeLessThan(0.1);
  });

  it('falls with the distance of the feature, with a width that does not suit, and with others that explain it', () => {
    const at = (v: number) => state([-2], [seen(0, -2, v)]).logEvidence;
    expect(at(0)).toBeGreaterThan(at(0.6));
    expect(at(0.6)).toBeGreaterThan(at(1.2));
    expect(state([-2], [seen(0, -2, 0, { fwhmV: 70 })]).logEvidence).toBeLessThan(at(0));
    expect(state([-2], [seen(0, -2)], { ...NOTHING_ELSE, explained: () => 0.95 }).logEvidence).toBeLessThan(at(0));
  });

  it('learns the strength that its lines share', () => {
    const { mean, sigma } = offsetMoments(state([-2, -2.1, -2.2], [seen(0, -1.7), seen(1, -1.8), seen(2, -1.9)]), null);
    expect(mean).toBeCloseTo(0.3, 1);
    expect(sigma).toBeLessThan(0.15);
  });

  it("without one line's own say is what the others tell", () => {
    const s = state([-2, -2], [seen(0, -1.5), seen(1, -2)]);
    expect(offsetMoments(s, s.terms[0]!).mean).toBeCloseTo(0, 1);
    expect(offsetMoments(s, null).mean).toBeGreaterThan(0.1);
    const alone = state([-2], [seen(0, -1.6)]);
    expect(offsetMoments(alone, alone.terms[0]!)).toMatchObject({
      mean: expect.closeTo(0, 2),
      sigma: expect.closeTo(0.4, 2),
      logEvidence: expect.closeTo(0, 9),
    });
  });

  it('of a system adds up its species, of which an absent one costs little', () => {
    const present = state([-2, -2.1], [seen(0, -2), seen(1, -2.1)]);
    const absent = state([-1.5, -1.5, -1.5], []);
    expect(absent.logEvidence).toBeLessThan(-3);
    expect(systemEvidence([present, absent])).toBeGreaterThan(systemEvidence([present]) - Math.log(1 / (1 - 0.9)) - 0.01);
    expect(systemEvidence([present, absent])).toBeLessThan(systemEvidence([present]));
    expect(systemEvidence([])).toBe(0);
  });
});

describe('its parts', () => {
  it('the normal distribution function is good to 2e-4', () => {
    // by quadrature
    let sum = 0.5;
    const h = 1e-3;
    for (let x = 0; x < 5; x += h) {
      expect(Math.abs(normalCdf(x) - sum)).toBeLessThan(2e-4);
      expect(normalCdf(-x)).toBeCloseTo(1 - normalCdf(x), 12);
      sum += (h * Math.exp(-0.5 * (x + h / 2) ** 2)) / Math.sqrt(2 * Math.PI);
    }
  });

  it('the logarithm of a sum of exponentials neither overflows nor underflows', () => {
    expect(logSumExp(Float64Array.of(1000, 1000))).toBeCloseTo(1000 + Math.LN2, 9);
    expect(logSumExp(Float64Array.of(-1000, -1001))).toBeCloseTo(-1000 + Math.log1p(Math.exp(-1)), 9);
    fc.assert(
      fc.property(fc.array(fc.double({ min: -20, max: 20, noNaN: true }), { minLength: 1 }), (x) =>
        expect(logSumExp(Float64Array.from(x))).toBeCloseTo(Math.log(x.reduce((s, v) => s + Math.exp(v), 0)), 9),
      ),
    );
  });

  it('offsets reach two and a half dex to either side of none', () => {
    expect(OFFSETS[0]).toBeCloseTo(-2.56, 9);
    expect(OFFSETS.at(-1)).toBeCloseTo(2.56, 9);
    expect(OFFSETS[OFFSETS.length >> 1]).toBe(0);
  });

  it('a position is no better known than feature and system are', () =>
    expect(positionSigma(expected(0, -2), seen(0, -2))).toBeGreaterThan(Math.hypot(0.2, 0.1)));

  it('a width that suits the system speaks for it, one that does not against', () => {
    expect(widthRatio(expected(0, -2), seen(0, -2), COVERAGE)).toBeGreaterThan(1);
    expect(widthRatio(expected(0, -2), seen(0, -2, 0, { fwhmV: 40 }), COVERAGE)).toBeLessThan(0.5);
  });
});
