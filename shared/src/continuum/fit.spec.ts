import fc from 'fast-check';
import { chance, crowdOfDips, noisySpectrum, type Reciped, type RecipeLine } from '../../../test/support/noisy-spectrum.js';
import { DEFAULT_SETTINGS } from '../identify/index.js';
import { estimateNoise } from '../noise/index.js';
import { median } from '../numeric/index.js';
import type { Spectrum } from '../spectrum/index.js';
import { fitContinuum } from './fit.js';

const RECIPE = { fromNm: 400, toNm: 690, resolvingPower: 12_000, temperatureK: 6500, signalToNoise: 120, seed: 21 };
const fit = (spectrum: Spectrum, settings = DEFAULT_SETTINGS) => fitContinuum(spectrum, estimateNoise(spectrum), settings);

/** Mean of (level - truth) over sigma in 20 cells, root mean square and largest. */
function bias({ spectrum, continuum }: Reciped, settings = DEFAULT_SETTINGS) {
  const { level } = fit(spectrum, settings);
  const cells = 20;
  const means = Array.from({ length: cells }, (_, c) => {
    let sum = 0;
    const from = Math.floor((c * level.length) / cells);
    const to = Math.floor(((c + 1) * level.length) / cells);
    for (let i = from; i < to; i++) sum += (level[i]! - continuum[i]!) / spectrum.sigma![i]!;
    return sum / (to - from);
  });
  return {
    rms: Math.sqrt(means.reduce((sum, m) => sum + m * m, 0) / cells),
    largest: means.reduce((most, m) => Math.max(most, Math.abs(m)), 0),
  };
}

describe('level', () => {
  // noise alone moves a fit of a dozen parameters to 16 000 samples by sqrt(12 / 16 000) = 0.03 sigma; the goal is a tenth of the noise
  it('lies on a featureless continuum, response errors and all', () => {
    expect(bias(noisySpectrum(RECIPE)).largest).toBeLessThan(0.1);
    expect(bias(noisySpectrum({ ...RECIPE, response: (x) => 1 + 0.02 * (4 * x ** 3 - 3 * x) + 0.01 * x })).largest).toBeLessThan(0.1);
  });

  it('leaves a featureless spectrum featureless: chi square 1, hardly a sample clipped', () => {
    const { summary } = fit(noisySpectrum(RECIPE).spectrum);
    // 16 000 samples: sqrt(2 / 16 000) = 0.011, less the clipped tails
    expect(Math.abs(summary.chi2PerDegree! - 1)).toBeLessThan(0.05);
    expect(summary.clippedFraction).toBeLessThan(0.03);
  });

  it('survives two samples in five within dips', () => {
    const crowded = noisySpectrum({ ...RECIPE, lines: crowdOfDips(5, 900, 400, 690, 12_000) });
    expect(crowded.inLine.reduce((sum, x) => sum + x, 0) / crowded.inLine.length).toBeGreaterThan(0.4);
    expect(bias(crowded).rms).toBeLessThan(0.25);
  });

  it('survives emission lines far above a faint continuum', () => {
    const { uniform } = chance(8);
    const peaks = Array.from({ length: 70 }, (): RecipeLine => ({ nm: 402 + 285 * uniform(), depth: -300 * uniform() ** 4, fwhmNm: 0.06 }));
    expect(bias(noisySpectrum({ ...RECIPE, signalToNoise: 12, lines: peaks })).largest).toBeLessThan(0.1);
  });

  it('does not sink into broad hydrogen lines', () => {
    const wings = [656.46, 486.27, 434.17, 410.29].flatMap((nm) => [
      { nm, depth: 0.4, fwhmNm: 1.5 },
      { nm, depth: 0.3, fwhmNm: 6 },
    ]);
    const star = noisySpectrum({ ...RECIPE, temperatureK: 9500, lines: [...wings, ...crowdOfDips(6, 150, 400, 690, 12_000)] });
    // between the wings the model bridges some ten nm without a sample of continuum: a per cent of the level is 1.2 sigma here
    expect(bias(star).largest).toBeLessThan(0.6);
  });

  it('does not sink into diffuse bands', () => {
    const bands = [443, 488.4, 545.1].map((nm, k) => ({ nm, depth: [0.06, 0.02, 0.015][k]!, fwhmNm: [1.75, 1.1, 1.2][k]! }));
    expect(bias(noisySpectrum({ ...RECIPE, temperatureK: 20_000, av: 1.2, lines: bands })).largest).toBeLessThan(0.1);
  });

  it.each([0.3, 1.2, 2.2])('follows the curve of a star behind A_V = %d mag', (av) => {
    expect(bias(noisySpectrum({ ...RECIPE, temperatureK: 24_000, av })).largest).toBeLessThan(0.12);
  });

  it('follows fringes, and bridges them where lines are', () => {
    const fringes = (x: number) => 1 + 0.02 * Math.sin(8 * Math.PI * x);
    expect(bias(noisySpectrum({ ...RECIPE, response: fringes, lines: crowdOfDips(5, 200, 400, 690, 12_000) })).largest).toBeLessThan(0.3);
  });

  it('is traced where the flux was divided by a continuum, or is in counts', () => {
    const lines = crowdOfDips(5, 250, 400, 690, 12_000);
    const { spectrum, continuum } = noisySpectrum({ ...RECIPE, lines });
    const divided = (fluxKind: Spectrum['fluxKind'], wave: (i: number) => number): Reciped => {
      const factor = continuum.map((c, i) => wave(i) / c);
      return {
        spectrum: {
          ...spectrum,
          fluxKind,
          flux: spectrum.flux.map((f, i) => f * factor[i]!),
          sigma: spectrum.sigma!.map((s, i) => s * factor[i]!),
        },
        continuum: continuum.map((c, i) => c * factor[i]!),
        inLine: new Uint8Array(0),
      };
    };
    const n = continuum.length;
    const cases = [
      divided('normalised', (i) => 1 + 0.01 * Math.sin((7 * i) / n)),
      divided('unknown', () => 1),
      divided('counts', (i) => 3000 * (1 - 0.8 * ((2 * i) / n - 1) ** 2)),
    ];
    for (const one of cases) {
      expect(bias(one).largest).toBeLessThan(0.15);
      const { model, temperatureK, constrained, wienPeakNm } = fit(one.spectrum).summary;
      expect({ model, temperatureK, constrained, wienPeakNm }).toEqual({
        model: 'local',
        temperatureK: null,
        constrained: false,
        wienPeakNm: null,
      });
    }
    expect(fit(cases[0]!.spectrum).summary.statement).toMatch(/normalised/);
    expect(fit(cases[2]!.spectrum).summary.statement).toMatch(/counts/);
  });

  it('is traced when asked to be', () => {
    const asked = { ...DEFAULT_SETTINGS, localContinuum: true };
    const one = noisySpectrum({ ...RECIPE, lines: crowdOfDips(5, 250, 400, 690, 12_000) });
    expect(bias(one, asked).largest).toBeLessThan(0.15);
    expect(fit(one.spectrum, asked).summary).toMatchObject({ model: 'local', temperatureK: null });
  });

  it('tells how well it is placed', () => {
    const one = noisySpectrum(RECIPE);
    const { level, levelSigma } = fit(one.spectrum);
    const off = median(level.map((l, i) => Math.abs(l / one.continuum[i]! - 1)));
    expect(off).toBeLessThan(3 * (levelSigma as number));
    expect(levelSigma as number).toBeLessThan(0.1 / RECIPE.signalToNoise);
  });
});

describe('invariance', () => {
  const { spectrum } = noisySpectrum({ ...RECIPE, resolvingPower: 3000, lines: crowdOfDips(5, 60, 400, 690, 3000) });
  const base = fit(spectrum);

  it('does not mind the unit of the flux', () => {
    fc.assert(
      fc.property(fc.integer({ min: -80, max: 80 }), (exponent) => {
        // a power of two scales every number exactly; logarithms still round differently
        const factor = 2 ** exponent;
        const scaled = fit({ ...spectrum, flux: spectrum.flux.map((f) => f * factor), sigma: spectrum.sigma!.map((s) => s * factor) });
        const worst = scaled.level.reduce((most, l, i) => Math.max(most, Math.abs(l / (base.level[i]! * factor) - 1)), 0);
        expect(worst).toBeLessThan(1e-6);
        expect(Math.abs(scaled.summary.temperatureK! / base.summary.temperatureK! - 1)).toBeLessThan(1e-4);
        expect(scaled.summary.constrained).toBe(base.summary.constrained);
      }),
      { numRuns: 6 },
    );
  });

  it('does not mind flux per frequency', () => {
    const perFrequency = (a: Float64Array) => a.map((f, i) => f * (spectrum.wavelength[i]! / 550) ** 2);
    const other = fit({ ...spectrum, fluxKind: 'per_frequency', flux: perFrequency(spectrum.flux), sigma: perFrequency(spectrum.sigma!) });
    expect(Math.abs(other.summary.temperatureK! / base.summary.temperatureK! - 1)).toBeLessThan(0.002);
  });

  it('does not look at bad samples', () => {
    const bad = spectrum.bad.map((_, i) => (i % 9 === 4 ? 1 : 0));
    const fouled = (foul: number) => fit({ ...spectrum, bad, flux: spectrum.flux.map((f, i) => (bad[i] ? foul : f)) });
    const [a, b] = [fouled(NaN), fouled(1e9)];
    expect(a.level).toEqual(b.level);
    expect(a.level.every(Number.isFinite)).toBe(true);
    expect(a.summary).toEqual(b.summary);
  });

  it('says the same every time', () => expect(fit(spectrum)).toEqual(base));
});

describe('odd spectra', () => {
  const odd = (n: number, flux: (i: number) => number, more: Partial<Spectrum> = {}): Spectrum => ({
    wavelength: Float64Array.from({ length: n }, (_, i) => 500 + 0.1 * i),
    flux: Float64Array.from({ length: n }, (_, i) => flux(i)),
    sigma: null,
    bad: new Uint8Array(n),
    fluxKind: 'unknown',
    resolvingPower: null,
    frame: 'unknown',
    ...more,
  });
  const { normal } = chance(4);

  it.each([
    ['nothing', odd(0, () => 1)],
    ['one sample', odd(1, () => 3)],
    ['two samples', odd(2, () => 3)],
    ['twenty samples', odd(20, () => 5 + 0.1 * normal())],
    ['a constant', odd(400, () => 2)],
    ['zeros', odd(400, () => 0)],
    ['noise about zero', odd(3000, () => normal())],
    ['a negative continuum', odd(3000, () => -5 + normal())],
    ['nothing but bad samples', odd(400, () => NaN, { bad: new Uint8Array(400).fill(1) })],
    ['lines on no continuum', odd(3000, (i) => normal() + (i % 300 === 0 ? 1000 : 0))],
    ['one wavelength over and over', odd(400, () => 1 + 0.01 * normal(), { wavelength: new Float64Array(400).fill(500) })],
  ])('%s: a finite positive level and a sentence', (_, spectrum) => {
    const { level, summary, levelSigma } = fit(spectrum);
    expect(level).toHaveLength(spectrum.flux.length);
    expect(level.every((l) => l > 0 && l < Infinity)).toBe(true);
    expect(levelSigma as number).toBeGreaterThan(0);
    expect(summary.statement).toMatch(/\.$/);
    expect(summary.constrained).toBe(false);
    expect(JSON.stringify(summary)).not.toMatch(/NaN|Infinity/);
    // null stands for a number that there is not; NaN would become null in JSON unseen
    for (const value of Object.values(summary)) if (typeof value === 'number') expect(Number.isFinite(value)).toBe(true);
    expect(summary.sampleNm).toHaveLength(summary.sampleFlux.length);
  });
});

describe('flux that the file states as uncalibrated', () => {
  const { spectrum } = noisySpectrum({ ...RECIPE, signalToNoise: 500 });

  it('gives a temperature that describes the shape only, on the same level', () => {
    const [relative, uncalibrated] = (['relative', 'uncalibrated'] as const).map((fluxCalibration) =>
      fit({ ...spectrum, fluxCalibration }),
    );
    expect(relative!.summary.statement).not.toMatch(/uncalibrated/);
    expect(relative!.summary.constrained).toBe(true);
    expect(uncalibrated!.summary).toMatchObject({
      ...{ constrained: false, lowerBoundK: null, upperBoundK: null },
      temperatureK: relative!.summary.temperatureK,
      statement: expect.stringMatching(/states its flux as uncalibrated: .* the shape of the curve only/) as string,
    });
    expect(uncalibrated!.level).toEqual(relative!.level);
  });
});
