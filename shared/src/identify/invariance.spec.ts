import { defaultList } from '../../../test/support/demo-slices.js';
import { evenCoverage, featureOf, inOrder } from '../../../test/support/features.js';
import { chance } from '../../../test/support/noisy-spectrum.js';
import { nebularIntensity } from '../atoms/index.js';
import { identify, type IdentifyInput } from './identify.js';
import { dopplerFactor, type Coverage, type FeatureView } from './views.js';

// What must not change a name: the observer's motion, the scale of the flux, the order of work. Clouds and a nebula of listed lines.

const list = defaultList();
const COVERAGE = evenCoverage(385, 680, 40_000, 120);
const { normal } = chance(5);
const named = (species: string, nm: number) => list.lines.find((l) => l.species === species && Math.abs(l.wavelengthNm - nm) < 0.02)!;
const CLOUD = (
  [
    ['Na I', 589.158, 0.012],
    ['Na I', 589.756, 0.0085],
    ['Ca II', 393.478, 0.011],
    ['Ca II', 396.959, 0.0063],
    ['CH', 430.152, 0.0019],
    ['CH+', 423.374, 0.0015],
  ] as const
).map(([species, nm, widthNm]) => featureOf(named(species, nm), 12.3 + 0.1 * normal(), widthNm, 8));
const nebular = list.lines.filter((l) => l.settings.includes('nebular') && l.wavelengthNm > 387 && l.wavelengthNm < 677);
const intensity = nebularIntensity(nebular);
const NEBULA = nebular
  .map((line, k) => ({ line, logI: intensity[k]! }))
  .filter(({ logI }) => logI > 0.5)
  .map(({ line, logI }) => featureOf(line, -40.2 + 0.2 * normal(), 0.005 * 10 ** logI, 20, { kind: 'peak' }));
const FEATURES = inOrder([...CLOUD, ...NEBULA]);

const run = (features: readonly FeatureView[], coverage: Coverage, more: Partial<IdentifyInput> = {}) =>
  identify({
    features,
    coverage,
    list,
    frame: 'barycentric',
    temperature: null,
    velocityRangeKmPerS: 300,
    logContinuum: () => 0,
    ...more,
  });
type Result = ReturnType<typeof run>;
const names = ({ rankings }: Result) =>
  rankings.map(({ ranked: [best] }) => best && `${best.contender.expected.line.id} in ${best.contender.system.id}`);
const speeds = ({ systems }: Result) => systems.filter((s) => s.system.id !== 'bands').map((s) => s.system.velocity);
const plain = run(FEATURES, COVERAGE);

/** All wavelengths as an observer sees them who moves so that everything recedes faster by a velocity. */
function receding(kmPerS: number): { features: FeatureView[]; coverage: Coverage } {
  const factor = dopplerFactor(kmPerS);
  const coverage: Coverage = {
    ...COVERAGE,
    fromNm: COVERAGE.fromNm * factor,
    toNm: COVERAGE.toNm * factor,
    sigmaW: (nm, fwhm) => COVERAGE.sigmaW(nm / factor, fwhm / factor) * factor,
  };
  const features = FEATURES.map((f) => ({
    ...f,
    wavelength: f.wavelength * factor,
    fwhmNm: f.fwhmNm * factor,
    logW: f.logW + Math.log10(factor),
  }));
  return { features, coverage };
}

describe('names of features', () => {
  it('are there to begin with', () => {
    expect(names(plain).filter(Boolean).length).toBeGreaterThan(0.9 * FEATURES.length);
    expect(speeds(plain)).toHaveLength(2);
  });

  it.each([-85, 33, 140])('do not change when all recedes by %s km/s more; velocities follow', (kmPerS) => {
    const { features, coverage } = receding(kmPerS);
    const moved = run(features, coverage);
    const same = names(moved).filter((name, i) => name === names(plain)[i]).length;
    expect(same / FEATURES.length).toBeGreaterThan(0.98); // a grid of velocities falls otherwise: a close call may turn
    speeds(moved).forEach((v, i) => expect(Math.abs(v - speeds(plain)[i]! - kmPerS)).toBeLessThan(0.3));
  });

  it('do not change with the scale of the flux', () => {
    const scaled = run(FEATURES, COVERAGE, { logContinuum: () => -13.2 });
    expect(names(scaled)).toEqual(names(plain));
  });

  it('do not change with the number of samples that say how good the data are', () => {
    const finer = evenCoverage(385, 680, 80_000, 120 / Math.SQRT2); // twice as many samples, each with half the weight
    expect(names(run(FEATURES, { ...finer, elementV: COVERAGE.elementV }))).toEqual(names(plain));
  });

  it('and all numbers are the same bytes in every run', () =>
    expect(JSON.stringify(run(FEATURES, COVERAGE).rankings.map((r) => [r.unidentified, ...r.ranked.map((x) => x.probability)]))).toBe(
      JSON.stringify(plain.rankings.map((r) => [r.unidentified, ...r.ranked.map((x) => x.probability)])),
    ));
});
