import { evenCoverage, featureAtNm, featureOf, inOrder } from '../../../test/support/features.js';
import { lineOf } from '../../../test/support/lines.js';
import type { Line } from '../linelist/index.js';
import type { Expected, SystemModel } from './model.js';
import { speciesState, type Background } from './offsets.js';
import { contendersOf, rankFeature, type SystemState } from './rank.js';
import type { FeatureView } from './views.js';

const COVERAGE = evenCoverage(580, 600, 50_000, 100);
const BACKGROUND: Background = { rate: () => 0.003, explained: () => 0 };
const line = (species: string, wavelengthNm: number) => lineOf({ species, wavelengthNm });
const expectedOf = (l: Line, widthNm: number, more: Partial<Expected> = {}): Expected => ({
  line: l,
  wavelength: l.wavelengthNm,
  logW: Math.log10(widthNm),
  scatter: 0.1,
  sigmaV: 0.2,
  fwhmV: 8,
  ...more,
});

/** A system with its species, weighed on the features. */
function systemOf(
  features: readonly FeatureView[],
  expected: readonly Expected[],
  more: Partial<SystemModel> = {},
  presence = 0.95,
): SystemState {
  const bySpecies = [...new Set(expected.map((e) => e.line.species))].map((name) => ({
    species: name,
    lines: expected.filter((e) => e.line.species === name).sort((a, b) => a.wavelength - b.wavelength),
    priorMean: 0,
    priorSigma: 0.35,
    presence,
  }));
  const system: SystemModel = {
    id: 'star',
    family: 'stellar',
    kind: 'dip',
    velocity: 0,
    velocitySigma: 0.1,
    significance: 9,
    fwhmV: 8,
    species: bySpecies,
    ...more,
  };
  return { system, states: bySpecies.map((s) => speciesState(s, system, features, COVERAGE, BACKGROUND)) };
}
function ranked(features: readonly FeatureView[], systems: readonly SystemState[], index = 0, background = BACKGROUND) {
  return rankFeature(features[index]!, contendersOf(features[index]!, systems, features), COVERAGE, background);
}
const A = line('Fe I', 590);
const strong = (nm: number, widthNm: number, more: Partial<FeatureView> = {}) => featureAtNm(nm, widthNm, 8, more);

describe('ranking', () => {
  it('is sure of a line of the right place and strength that has no rival', () => {
    const features = [strong(590, 0.005)];
    const {
      ranked: [best, ...rest],
      unidentified,
    } = ranked(features, [systemOf(features, [expectedOf(A, 0.005)])]);
    expect(best!.contender.expected.line).toBe(A);
    expect(best!.probability).toBeGreaterThan(0.9);
    expect(best!.share).toBeCloseTo(1, 3);
    expect(best!.probability + unidentified).toBeCloseTo(1, 9); // no blend: the two are all there is
    expect(rest).toEqual([]);
  });

  it('believes a line less the further off it is in place, and the less its strength suits', () => {
    const p = (features: FeatureView[]) => ranked(features, [systemOf(features, [expectedOf(A, 0.005)])]).ranked[0]?.probability ?? 0;
    const far = [0, 1, 2].map((kmPerS) => p([featureOf(A, kmPerS, 0.005, 8)]));
    expect(far[0]).toBeGreaterThan(far[1]!);
    expect(far[1]).toBeGreaterThan(far[2]!);
    expect(p([strong(590, 0.0001)])).toBeLessThan(far[0]!);
    expect(p([strong(590, 0.1)])).toBeLessThan(0.5);
  });

  it('knows nothing where no line of a system is near: unidentified', () => {
    const features = [strong(585, 0.005)];
    expect(ranked(features, [systemOf(features, [expectedOf(A, 0.005)])])).toMatchObject({ ranked: [], unidentified: 1 });
    expect(ranked(features, [])).toMatchObject({ ranked: [], unidentified: 1 });
  });

  it('puts the stronger of two lines at one place first, and gives each its share', () => {
    const features = [strong(590, 0.0058)];
    const B = line('Ti I', 590.002);
    const { ranked: list } = ranked(features, [systemOf(features, [expectedOf(A, 0.005), expectedOf(B, 0.0008)])]);
    expect(list[0]!.contender.expected.line).toBe(A);
    expect(list[0]!.share).toBeGreaterThan(0.7);
    expect(list.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 1);
  });

  it('lets both of two equal lines be main contributors: their chances add to more than one', () => {
    const features = [strong(590.001, 0.008)];
    const B = line('Ti I', 590.002);
    const { ranked: list } = ranked(features, [systemOf(features, [expectedOf(A, 0.004), expectedOf(B, 0.004)])]);
    expect(list).toHaveLength(2);
    expect(list[0]!.probability + list[1]!.probability).toBeGreaterThan(1.2);
  });

  it('does not give a dip to a system of peaks', () => {
    const features = [strong(590, 0.005)];
    expect(ranked(features, [systemOf(features, [expectedOf(A, 0.005)], { kind: 'peak', family: 'nebular' })]).ranked).toEqual([]);
  });

  it('believes a species more when its other lines are seen, less when they are missing', () => {
    const others = [584, 587, 595].map((nm) => line('Fe I', nm));
    const expected = [A, ...others].map((l) => expectedOf(l, 0.003));
    const p = (seen: readonly Line[]) => {
      const features = inOrder([strong(590, 0.003), ...seen.map((l) => strong(l.wavelengthNm, 0.003))]);
      const index = features.findIndex(({ wavelength }) => wavelength === 590);
      return (
        ranked(features, [systemOf(features, expected, {}, 0.5)], index, { ...BACKGROUND, rate: () => 0.02 }).ranked[0]?.probability ?? 0
      );
    };
    expect(p(others)).toBeGreaterThan(0.9);
    expect(p([])).toBeLessThan(0.5 * p(others));
  });

  it('calls a feature unidentified more readily where features are dense', () => {
    const features = [featureOf(A, 1.2, 0.005, 8)];
    const systems = [systemOf(features, [expectedOf(A, 0.005)])];
    const u = (rate: number) => ranked(features, systems, 0, { ...BACKGROUND, rate: () => rate }).unidentified;
    expect(u(0.02)).toBeGreaterThan(u(0.002));
  });

  it('shares the light of a line between features that stand on it', () => {
    const features = inOrder([strong(589.995, 0.003), strong(590.005, 0.003)]);
    const systems = [systemOf(features, [expectedOf(A, 0.006)])];
    const parts = features.map((f) => contendersOf(f, systems, features)[0]!.part);
    expect(parts[0]! + parts[1]!).toBeCloseTo(1, 2);
    expect(parts[0]).toBeCloseTo(0.5, 1);
  });

  it('is the same every time', () => {
    const features = [strong(590.001, 0.008)];
    const systems = [systemOf(features, [expectedOf(A, 0.004), expectedOf(line('Ti I', 590.002), 0.004)])];
    expect(ranked(features, systems).ranked.map((r) => r.probability)).toEqual(ranked(features, systems).ranked.map((r) => r.probability));
  });
});
