import { defaultList } from '../../../test/support/demo-slices.js';
import { evenCoverage, featureOf, inOrder } from '../../../test/support/features.js';
import { identify } from './identify.js';
import { Elsewhere, settlingOf } from './settle.js';
import { speciesOf } from './species.js';

const list = defaultList();
const named = (species: string, nm: number) => list.lines.find((l) => l.species === species && Math.abs(l.wavelengthNm - nm) < 0.02)!;
const COVERAGE = evenCoverage(385, 600, 60_000, 150);

/** A cloud at +20 km/s by sodium, calcium and CH, its lines as strong as clouds commonly have them. */
const CLOUD = [
  [named('Na I', 589.158), 0.012],
  [named('Na I', 589.756), 0.0085],
  [named('Ca II', 393.478), 0.011],
  [named('Ca II', 396.959), 0.0063],
  [named('CH', 430.152), 0.0019],
] as const;

const identified = (lines: typeof CLOUD | ReturnType<typeof without>) => {
  const features = inOrder(lines.map(([line, widthNm]) => featureOf(line, 20, widthNm, 6)));
  const result = identify({
    features,
    coverage: COVERAGE,
    list,
    frame: 'barycentric',
    temperature: null,
    velocityRangeKmPerS: 300,
    logContinuum: () => 0,
  });
  return { features, result, species: speciesOf(result) };
};
const without = (species: string, nm: number) => CLOUD.filter(([line]) => line !== named(species, nm));

describe('a species in a system', () => {
  const { species, features, result } = identified(CLOUD);
  const of = (name: string, all = species) => all.find((s) => s.species === name)!;

  it('is present when its lines are seen, with their count and the features it makes', () => {
    for (const name of ['Na I', 'Ca II']) {
      expect(of(name).probability).toBeGreaterThan(0.95);
      expect(of(name)).toMatchObject({ seen: 2, missing: 0, features: 2, family: 'interstellar' });
    }
    expect(of('Na I').sentence).toMatch(
      /^Na I in the cloud at \+20\.0 km\/s is (very likely )?present \(\d+(\.\d)? %\): 2 of the 2 lines due are seen; they are \d\.\d times (stronger|weaker) than the strength model has them, within a factor \d\.\d\.$/,
    );
  });

  it('is less sure when one of its lines is missing', () => {
    const fewer = identified(without('Na I', 589.756)).species;
    expect(of('Na I', fewer)).toMatchObject({ seen: 1, missing: 1 });
    expect(of('Na I', fewer).probability).toBeLessThan(of('Na I').probability);
  });

  it('that should show and does not is said to be missing, never present', () => {
    const absent = species.filter((s) => s.seen === 0);
    expect(absent.length).toBeGreaterThan(0);
    for (const s of absent) {
      expect(s.probability).toBeLessThan(0.5);
      expect(s.sentence).toMatch(/does not show|may be present/);
    }
  });

  it('never counts more features than there are, and comes likeliest first in its system', () => {
    expect(species.reduce((sum, s) => sum + s.features, 0)).toBeLessThanOrEqual(features.length);
    for (const { system } of result.systems) {
      const order = species.filter((s) => s.systemId === system.id).map((s) => s.probability);
      expect(order).toEqual([...order].sort((a, b) => b - a));
    }
  });
});

describe('what would settle a reading', () => {
  const { features, result } = identified(CLOUD);
  const elsewhere = new Elsewhere(list.lines, COVERAGE);
  const settling = (nm: number, probability: number) => {
    const i = features.findIndex((f) => Math.abs(f.wavelength - nm) < 0.1);
    const best = result.rankings[i]!.ranked[0]!;
    return settlingOf({ ...best, probability }, features[i]!, elsewhere.of(best.contender), COVERAGE);
  };

  it('is an uncovered line of the species, where the system puts it and as strong as it makes it', () => {
    const settle = settling(589.197, 0.7)!;
    expect(settle).toMatchObject({ why: 'not_covered', species: 'Na I' });
    expect(settle.observedNm / settle.restNm - 1).toBeCloseTo(20 / 299_792.458, 8);
    expect(settle.restNm < COVERAGE.fromNm || settle.restNm > COVERAGE.toNm).toBe(true);
    expect(settle.expectedNm! > 0 && settle.expectedNm! < 0.012).toBe(true);
    expect(settle.expectedSigmaNm).toBeGreaterThan(0);
  });

  it('is nothing for a certain or a hopeless reading', () =>
    expect([settling(589.197, 0.999), settling(589.197, 0.01)]).toEqual([null, null]));
});
