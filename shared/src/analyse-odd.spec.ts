import { defaultList } from '../../test/support/demo-slices.js';
import { chance, noisySpectrum } from '../../test/support/noisy-spectrum.js';
import { numbersOf } from '../../test/support/numbers.js';
import { analyse } from './analyse.js';
import { DEFAULT_SETTINGS } from './identify/index.js';
import type { Spectrum } from './spectrum/index.js';

const list = defaultList();
const run = (spectrum: Spectrum) => analyse(spectrum, list, DEFAULT_SETTINGS);

describe('odd spectra give an honest empty result', () => {
  const base = (n: number, flux: (i: number) => number, more: Partial<Spectrum> = {}): Spectrum => ({
    wavelength: Float64Array.from({ length: n }, (_, i) => 500 + 0.01 * i),
    flux: Float64Array.from({ length: n }, (_, i) => flux(i)),
    sigma: new Float64Array(n).fill(0.01),
    bad: new Uint8Array(n),
    fluxKind: 'per_wavelength',
    resolvingPower: 20_000,
    frame: 'barycentric',
    ...more,
  });
  const noise = (seed: number, level = 1) => {
    const { normal } = chance(seed);
    return () => level + 0.01 * normal();
  };
  const odd: [string, Spectrum][] = [
    ['one sample', base(1, () => 1)],
    ['two samples', base(2, () => 1)],
    ['five samples', base(5, noise(1))],
    ['thirty samples', base(30, noise(2))],
    ['all samples bad', base(800, noise(3), { bad: new Uint8Array(800).fill(1) })],
    ['no finite flux', base(800, () => NaN, { bad: new Uint8Array(800).fill(1) })],
    ['constant flux', base(800, () => 1)],
    ['constant flux without errors', base(800, () => 1, { sigma: null })],
    ['flux zero throughout', base(800, () => 0)],
    ['flux zero without errors', base(800, () => 0, { sigma: null })],
    ['negative flux', base(800, noise(4, -1))],
    ['no lines', base(2000, noise(5))],
    ['no errors that are known', base(800, noise(6), { sigma: new Float64Array(800).fill(NaN) })],
    ['nothing stated at all', base(800, noise(7), { sigma: null, resolvingPower: null, frame: 'unknown', fluxKind: 'unknown' })],
    ['wavelengths beyond the list', base(1500, noise(8), { wavelength: Float64Array.from({ length: 1500 }, (_, i) => 30_000 + i) })],
    ['wavelengths short of the list', base(1500, noise(9), { wavelength: Float64Array.from({ length: 1500 }, (_, i) => 20 + 0.001 * i) })],
  ];

  it.each(odd)('%s', (_, spectrum) => {
    const analysis = run(spectrum);
    expect(analysis.features).toEqual([]);
    expect(analysis.systems).toEqual([]);
    expect(analysis.points).toBe(spectrum.wavelength.length);
    expect(numbersOf(analysis).filter(([, value]) => !Number.isFinite(value))).toEqual([]);
    expect(analysis.continuum.constrained).toBe(false);
  });

  it('lines where the list has none stay without a name', () => {
    const { spectrum } = noisySpectrum({
      fromNm: 30_000,
      toNm: 30_600,
      resolvingPower: 20_000,
      temperatureK: 6000,
      signalToNoise: 100,
      seed: 1,
      lines: [30_100, 30_300].map((nm) => ({ nm, depth: 0.5, fwhmNm: 2.5 })),
    });
    const { features, systems, cautions } = run(spectrum);
    expect(features.map(({ wavelengthNm }) => Math.round(wavelengthNm))).toEqual([30_100, 30_300]);
    expect(features.every(({ candidates, unidentifiedProbability }) => candidates.length === 0 && unidentifiedProbability === 1)).toBe(
      true,
    );
    expect(systems).toEqual([]);
    expect(cautions).toContainEqual(expect.stringContaining('2 of 2 features'));
  });
});
