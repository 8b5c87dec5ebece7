import { defaultList } from '../../../test/support/demo-slices.js';
import { evenCoverage, featureOf, inOrder } from '../../../test/support/features.js';
import { chance } from '../../../test/support/noisy-spectrum.js';
import { nebularIntensity, photosphericIndex } from '../atoms/index.js';
import { findAir } from './air.js';
import { identify } from './identify.js';
import { dopplerFactor, velocityOf, type Coverage, type FeatureView } from './views.js';

// Systems beyond the usual ones: galaxies at a redshift, a second star, and the air where time and place put it.

const list = defaultList();
const run = (features: readonly FeatureView[], coverage: Coverage, velocityRangeKmPerS = 300) =>
  identify({
    features: inOrder(features),
    coverage,
    list,
    frame: 'heliocentric',
    temperature: null,
    velocityRangeKmPerS,
    logContinuum: () => 0,
  });
const velocities = (result: ReturnType<typeof run>, family: string) =>
  result.systems.filter(({ system: s }) => s.family === family && s.id !== 'bands').map(({ system }) => system.velocity);

describe('a galaxy', () => {
  const COVERAGE = evenCoverage(380, 900, 2000, 40);
  const BRIGHT = [372.7, 486.27, 496.03, 500.82, 654.99, 656.46, 658.53, 671.83, 673.27];
  const nebular = list.lines.filter((l) => l.settings.includes('nebular'));
  const intensity = nebularIntensity(nebular);
  const emission = (z: number) => {
    const { normal } = chance(Math.round(1000 * z));
    const kmPerS = velocityOf(1 + z, 1);
    return BRIGHT.map((nm) => {
      const near = [...nebular.keys()].filter((k) => Math.abs(nebular[k]!.wavelengthNm - nm) < 0.3);
      const k = near.sort((a, b) => intensity[b]! - intensity[a]!)[0]!;
      const at = kmPerS + 6 * normal();
      return featureOf(nebular[k]!, at, 0.02 * 10 ** (intensity[k]! + 0.1 * normal()), 180, { kind: 'peak', sigmaV: 8 });
    });
  };

  it.each([0.021, 0.0926, 0.31])('at z = %s is found by the pattern of its peaks', (z) => {
    const inside = emission(z).filter((f) => f.wavelength < 895 && f.wavelength > 385);
    const [v, ...others] = velocities(run(inside, COVERAGE), 'nebular');
    expect(Math.abs(dopplerFactor(v!) - 1 - z)).toBeLessThan(2e-4);
    expect(others).toEqual([]);
  });

  it('is not looked for by who narrows the range', () => expect(velocities(run(emission(0.0926), COVERAGE, 100), 'nebular')).toEqual([]));

  it('is not made of peaks at random', () => {
    for (let seed = 1; seed <= 4; seed++) {
      const { uniform } = chance(seed);
      const random = Array.from({ length: 14 }, () => {
        const line = { ...list.lines[0]!, wavelengthNm: 385 + 510 * uniform() };
        return featureOf(line, 0, 10 ** (-1.5 + uniform()), 180, { kind: 'peak', sigmaV: 8 });
      });
      expect(velocities(run(random, COVERAGE), 'nebular')).toEqual([]);
    }
  });
});

describe('a second star', () => {
  const COVERAGE = evenCoverage(500, 530, 40_000, 150);
  const within = list.lines.filter(
    (l) => l.wavelengthNm > 500.5 && l.wavelengthNm < 529.5 && l.settings.includes('stellar') && l.type === 'allowed',
  );
  const index = photosphericIndex(within, 5600, 13);
  const order = [...within.keys()].filter((k) => Number.isFinite(index[k]!)).sort((a, b) => index[b]! - index[a]!);
  const star = (kmPerS: number, strength: number): FeatureView[] => {
    const { normal } = chance(Math.round(kmPerS) + 500);
    return order.slice(0, 70).map((k) => {
      const x = index[k]! - index[order[0]!]! + 1.2;
      const widthNm = strength * 10 ** (x - 0.7 * Math.log10(1 + 10 ** x) - 0.5 + 0.08 * normal());
      return featureOf(within[k]!, kmPerS + 0.2 * normal(), widthNm, 11);
    });
  };

  it('is found beside the first, each at its velocity', () => {
    const found = velocities(run([...star(12, 0.012), ...star(-71, 0.006)], COVERAGE), 'stellar').sort((a, b) => a - b);
    expect(found).toHaveLength(2);
    expect(Math.abs(found[0]! + 71)).toBeLessThan(0.6);
    expect(Math.abs(found[1]! - 12)).toBeLessThan(0.6);
  });

  it('is not made of the first one alone', () => expect(velocities(run(star(12, 0.012), COVERAGE), 'stellar')).toHaveLength(1));
});

it("the Earth's air is found where its velocity is known, and elsewhere when it is not there", () => {
  const coverage = evenCoverage(686, 692, 60_000, 200);
  const oxygen = list.lines.filter((l) => l.type === 'telluric' && l.wavelengthNm > 686.2 && l.wavelengthNm < 691.8);
  const features = inOrder(oxygen.map((l) => featureOf(l, -14.2, 0.008 * (l.relativeIntensity ?? 0.3) ** 0.6, 5)));
  const scene = { features, coverage, background: { rate: () => 0.004, explained: () => 0 } };
  for (const known of [-14.2, 9, null])
    expect(Math.abs(findAir(oxygen, 'dip', scene, 'barycentric', known)!.velocity + 14.2)).toBeLessThan(0.4);
});
