import { defaultList } from '../../../test/support/demo-slices.js';
import { evenCoverage, featureAtNm, featureOf, inOrder } from '../../../test/support/features.js';
import { chance } from '../../../test/support/noisy-spectrum.js';
import { growthWidth, nebularIntensity, photosphericIndex } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import { identify, type IdentifyInput } from './identify.js';
import type { Coverage, FeatureView } from './views.js';

// Features are made from lines of the list: where a velocity puts them, as strong as the physics of their setting makes them.

const list = defaultList();
const identified = (features: readonly FeatureView[], coverage: Coverage, more: Partial<IdentifyInput> = {}) =>
  identify({
    features: inOrder(features),
    coverage,
    list,
    frame: 'barycentric',
    temperature: null,
    velocityRangeKmPerS: 300,
    logContinuum: () => 0,
    ...more,
  });
type Result = ReturnType<typeof identified>;
const systems = ({ systems: all }: Result, family: string) =>
  all.map(({ system }) => system).filter((s) => s.family === family && s.id !== 'bands');
const named = (species: string, nm: number) => list.lines.find((l) => l.species === species && Math.abs(l.wavelengthNm - nm) < 0.02)!;
/** Velocities of the systems of a family. */
const velocities = (result: Result, family: string) => systems(result, family).map(({ velocity }) => velocity);
/** Ids of first readings, by feature. */
const readings = ({ rankings }: Result) => rankings.map(({ ranked: [best] }) => best?.contender.expected.line.id);

/** What a cloud of typical columns makes of resonance lines, each with its own scatter. */
function cloud(kmPerS: number, columns: readonly (readonly [string, number, number])[], fwhmV: number): FeatureView[] {
  const { normal } = chance(Math.round(kmPerS * 10) + 1);
  return columns.map(([species, nm, logN]) => {
    const line = named(species, nm);
    const width = growthWidth(10 ** logN, line.oscillatorStrength!, line.wavelengthNm, 2, line.einsteinA ?? 1e8);
    return featureOf(line, kmPerS + 0.1 * normal(), width * 10 ** (0.03 * normal()), fwhmV);
  });
}
const OPTICAL = [
  ['Na I', 589.158, 12.4],
  ['Na I', 589.756, 12.4],
  ['Ca II', 393.478, 12.2],
  ['Ca II', 396.959, 12.2],
  ['CH', 430.152, 12.9],
  ['CH+', 423.374, 12.7],
  ['Ca I', 422.792, 9.9],
] as const;
const WIDE = evenCoverage(385, 600, 60_000, 150);
const ELEMENT_V = 5.5;

describe('clouds', () => {
  const lines = cloud(-23.4, OPTICAL, ELEMENT_V);
  const result = identified(lines, WIDE);

  it('are found at their velocity, and all their lines are named', () => {
    const [found, ...others] = systems(result, 'interstellar');
    expect(Math.abs(found!.velocity + 23.4)).toBeLessThan(0.2);
    expect(found!.velocitySigma).toBeLessThan(0.3);
    expect(others).toEqual([]);
    const expected = inOrder(lines).map(
      (f) =>
        OPTICAL.map(([s, nm]) => named(s, nm)).find((l) => Math.abs(l.wavelengthNm * (1 - 23.4 / 299_792.458) - f.wavelength) < 0.01)!.id,
    );
    expect(readings(result)).toEqual(expected);
    result.rankings.forEach(({ ranked: [best] }) => expect(best!.probability).toBeGreaterThan(0.8));
  });

  it('of two velocities are two', () => {
    const both = identified([...lines, ...cloud(31.7, OPTICAL, ELEMENT_V)], WIDE);
    const [receding, approaching] = velocities(both, 'interstellar').sort((x, y) => y - x);
    expect(velocities(both, 'interstellar')).toHaveLength(2);
    expect(Math.abs(approaching! + 23.4)).toBeLessThan(0.3);
    expect(Math.abs(receding! - 31.7)).toBeLessThan(0.3);
  });

  it('are not made of a single line, nor of dips at random', () => {
    expect(velocities(identified(lines.slice(0, 1), WIDE), 'interstellar')).toEqual([]);
    const { uniform } = chance(12);
    for (let trial = 0; trial < 3; trial++) {
      const random = Array.from({ length: 25 }, () =>
        featureAtNm(387 + 210 * uniform(), 10 ** (-3 + 1.3 * uniform()), ELEMENT_V * (1 + uniform())),
      );
      expect(velocities(identified(random, WIDE), 'interstellar')).toEqual([]);
    }
  });

  it('are not made of peaks, nor of features that are cosmic rays', () => {
    expect(
      systems(
        identified(
          lines.map((f) => ({ ...f, kind: 'peak' as const })),
          WIDE,
        ),
        'interstellar',
      ),
    ).toEqual([]);
    expect(
      systems(
        identified(
          lines.map((f) => ({ ...f, flags: ['cosmic' as const] })),
          WIDE,
        ),
        'interstellar',
      ),
    ).toEqual([]);
  });

  it('beyond the range of velocities looked for are not found', () =>
    expect(velocities(identified(cloud(95, OPTICAL, ELEMENT_V), WIDE, { velocityRangeKmPerS: 60 }), 'interstellar')).toEqual([]));
});

describe('a star', () => {
  const COVERAGE = evenCoverage(500, 530, 40_000, 150);
  const within = list.lines.filter(
    (l) => l.wavelengthNm > 500.5 && l.wavelengthNm < 529.5 && l.settings.includes('stellar') && l.type === 'allowed',
  );

  /** The lines of a photosphere that show, as strong as LTE makes them through a simple curve of growth; close ones left out. */
  function photosphere(temperatureK: number, kmPerS: number, count: number): { features: FeatureView[]; lines: Line[] } {
    const { normal } = chance(temperatureK);
    const index = photosphericIndex(within, temperatureK, 13);
    const order = [...within.keys()].filter((k) => Number.isFinite(index[k]!)).sort((a, b) => index[b]! - index[a]!);
    const chosen = order
      .slice(0, count)
      .filter((k, i) => order.slice(0, i).every((o) => Math.abs(within[o]!.wavelengthNm - within[k]!.wavelengthNm) > 0.06));
    const top = index[order[0]!]!;
    const lines = chosen.map((k) => within[k]!).sort((a, b) => a.wavelengthNm - b.wavelengthNm);
    const features = lines.map((line) => {
      const x = index[within.indexOf(line)]! - top + 1.2;
      const width = 0.012 * 10 ** (x - 0.7 * Math.log10(1 + 10 ** x) - 0.5 + 0.1 * normal());
      return featureOf(line, kmPerS + 0.2 * normal(), width, 14);
    });
    return { features, lines };
  }

  it('is found by its lines, and they are named', () => {
    const { features, lines } = photosphere(5800, 41.2, 60);
    const result = identified(features, COVERAGE, { temperature: { temperatureK: 5800, sigmaK: 100 } });
    const [found] = systems(result, 'stellar');
    expect(Math.abs(found!.velocity - 41.2)).toBeLessThan(0.5);
    expect(velocities(result, 'interstellar')).toEqual([]);
    const right = readings(result).filter((id, i) => id === lines[i]!.id).length;
    expect(right / lines.length).toBeGreaterThan(0.9);
  });

  it('is found without a temperature, and at any velocity looked for', () => {
    for (const v of [-180, 120]) {
      const [found] = systems(identified(photosphere(5200, v, 60).features, COVERAGE), 'stellar');
      expect(Math.abs(found!.velocity - v)).toBeLessThan(0.5);
    }
  });

  it('is not made of a handful of dips, nor of dips at random', () => {
    expect(velocities(identified(photosphere(5800, 10, 60).features.slice(0, 3), COVERAGE), 'stellar')).toEqual([]);
    for (const count of [15, 40, 120]) {
      const { uniform } = chance(count);
      const random = Array.from({ length: count }, () => featureAtNm(500.5 + 29 * uniform(), 10 ** (-3.2 + 1.3 * uniform()), 14));
      expect(velocities(identified(random, COVERAGE), 'stellar')).toEqual([]);
    }
  });
});

describe('a nebula', () => {
  const COVERAGE = evenCoverage(470, 680, 20_000, 40);
  const lines = list.lines.filter((l) => l.settings.includes('nebular') && l.wavelengthNm > 471 && l.wavelengthNm < 679);
  const intensity = nebularIntensity(lines);
  const bright = lines.filter((_, k) => intensity[k]! > 0.3);
  const emission = (kmPerS: number) => {
    const { normal } = chance(Math.round(kmPerS) + 99);
    return bright.map((l) =>
      featureOf(l, kmPerS + 0.2 * normal(), 0.005 * 10 ** (intensity[lines.indexOf(l)]! + 0.05 * normal()), 20, { kind: 'peak' }),
    );
  };

  it('is found at its velocity, and its bright lines are named', () => {
    const result = identified(emission(64.3), COVERAGE);
    const [found, ...others] = systems(result, 'nebular');
    expect(Math.abs(found!.velocity - 64.3)).toBeLessThan(0.5);
    expect(others).toEqual([]);
    const right = readings(result).filter((id, i) => id === bright[i]!.id).length;
    expect(right / bright.length).toBeGreaterThan(0.85);
  });

  it('is not made of dips', () =>
    expect(
      systems(
        identified(
          emission(64.3).map((f) => ({ ...f, kind: 'dip' as const })),
          COVERAGE,
        ),
        'nebular',
      ),
    ).toEqual([]));
});

describe('the air', () => {
  const COVERAGE = evenCoverage(686, 692, 60_000, 200);
  const oxygen = list.lines.filter(
    (l) =>
      l.type === 'telluric' && l.species === 'O2' && l.wavelengthNm > 686.2 && l.wavelengthNm < 691.8 && (l.relativeIntensity ?? 0) > 0.1,
  );
  const band = (kmPerS: number) => oxygen.map((l) => featureOf(l, kmPerS, 0.006 * l.relativeIntensity! ** 0.6, 6));

  it('is found where its lines stand off by what the frame took off, as far as the Earth moves', () => {
    expect(oxygen.length).toBeGreaterThan(10);
    const [found] = systems(identified(band(17.3), COVERAGE), 'telluric');
    expect(Math.abs(found!.velocity - 17.3)).toBeLessThan(0.5);
    expect(
      systems(identified(band(17.3), COVERAGE, { frame: 'topocentric' }), 'telluric').filter(
        ({ velocity }) => Math.abs(velocity - 17.3) < 5,
      ),
    ).toEqual([]);
    const [still] = systems(identified(band(0), COVERAGE, { frame: 'topocentric' }), 'telluric');
    expect(Math.abs(still!.velocity)).toBeLessThan(0.5);
  });
});

describe('identification', () => {
  it('of nothing finds nothing, but keeps diffuse bands in mind', () => {
    const { systems: found, rankings } = identified([], WIDE);
    expect([found.map(({ system }) => system.id), rankings]).toEqual([['bands'], []]);
  });

  it('gives one ranking a feature, in their order', () => {
    const features = [...cloud(-23.4, OPTICAL, ELEMENT_V), featureAtNm(550, 0.005, 30)];
    const { rankings } = identified(features, WIDE);
    expect(rankings).toHaveLength(features.length);
    const odd = inOrder(features).findIndex(({ wavelength }) => wavelength === 550);
    expect(rankings[odd]!.unidentified).toBeGreaterThan(0.5);
  });

  it('is the same every time', () => {
    const features = cloud(8, OPTICAL, ELEMENT_V);
    const once = identified(features, WIDE).rankings.map(({ ranked }) => ranked.map(({ probability }) => probability));
    expect(identified(features, WIDE).rankings.map(({ ranked }) => ranked.map(({ probability }) => probability))).toEqual(once);
  });
});
