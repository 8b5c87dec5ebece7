import fc from 'fast-check';
import { chance, crowdOfDips, noisySpectrum } from '../../../test/support/noisy-spectrum.js';
import { median } from '../numeric/index.js';
import type { Spectrum } from '../spectrum/index.js';
import { derSnr } from './der-snr.js';
import { estimateNoise } from './estimate.js';

const RECIPE = { fromNm: 480, toNm: 560, resolvingPower: 30_000, temperatureK: 6000, signalToNoise: 120, seed: 11 };
const crowd = crowdOfDips(3, 350, 480, 560, 30_000);
const withSigma = (spectrum: Spectrum, factor: number): Spectrum => ({ ...spectrum, sigma: spectrum.sigma!.map((s) => s * factor) });
/** Running mean of `width` samples, as resampling onto a finer grid makes it, with the sigma that goes with it. */
function smoothed(spectrum: Spectrum, width: number): Spectrum {
  const half = width >> 1;
  const flux = spectrum.flux.map((f, i) => {
    if (i < half || i >= spectrum.flux.length - half) return f;
    let sum = 0;
    for (let k = -half; k <= half; k++) sum += spectrum.flux[i + k]!;
    return sum / width;
  });
  return { ...spectrum, flux, sigma: spectrum.sigma!.map((s) => s / Math.sqrt(width)) };
}

describe('stated sigma', () => {
  const { spectrum } = noisySpectrum({ ...RECIPE, lines: crowd });

  it('is left alone, to the last bit, where the scatter agrees', () => {
    const model = estimateNoise(spectrum);
    expect(model.how).toBe('stated');
    expect(model.rescale).toBe(1);
    expect(Array.from(model.sigma)).toEqual(Array.from(spectrum.sigma!));
    expect(model.correlation).toEqual([1]);
  });

  it.each([0.4, 0.6, 1.7, 3])('is rescaled when it is %d times the noise', (factor) => {
    const model = estimateNoise(withSigma(spectrum, factor));
    expect(model.how).toBe('stated_rescaled');
    // lines leave the scatter uncertain by some per cent
    expect(Math.abs(Math.log(model.rescale * factor))).toBeLessThan(0.12);
    expect(median(model.sigma) / median(spectrum.sigma!)).toBeCloseTo(model.rescale * factor, 6);
  });

  it.each([500, 1500, 3000])('is not doubted because of %d lines in 80 nm', (count) => {
    const crowded = noisySpectrum({ ...RECIPE, lines: crowdOfDips(7, count, 480, 560, 30_000) }).spectrum;
    expect(estimateNoise(crowded).how).toBe('stated');
    expect(estimateNoise(crowded).correlation).toEqual([1]);
  });

  it('is not doubted because of lines narrower than two samples', () => {
    const undersampled = noisySpectrum({ ...RECIPE, samplesPerElement: 1, lines: crowd }).spectrum;
    expect(estimateNoise(undersampled).how).toBe('stated');
  });

  it('is not doubted because of cosmic rays', () => {
    const { uniform } = chance(5);
    const flux = spectrum.flux.slice();
    for (let k = 0; k < 200; k++) flux[Math.floor(uniform() * flux.length)]! *= 1 + 4 * uniform();
    expect(estimateNoise({ ...spectrum, flux }).how).toBe('stated');
  });

  it('keeps its place where noise was smoothed, and the ties between samples are told', () => {
    const model = estimateNoise(smoothed(spectrum, 3));
    expect(model.how).toBe('stated');
    // a mean of three: 2/3 and 1/3; lines left over make them a little stronger
    expect(Math.abs(model.correlation[1]! - 2 / 3)).toBeLessThan(0.12);
    expect(Math.abs(model.correlation[2]! - 1 / 3)).toBeLessThan(0.12);
  });

  it('fills in samples without a usable sigma from their neighbours', () => {
    const sigma = spectrum.sigma!.slice();
    const bad = new Uint8Array(sigma.length);
    sigma[0] = NaN;
    sigma[100] = 0;
    sigma[101] = Infinity;
    bad[200] = 1;
    sigma[200] = 1e9;
    const model = estimateNoise({ ...spectrum, sigma, bad });
    expect([0, 100, 101, 200].map((i) => model.sigma[i])).toEqual([1, 99, 99, 199].map((i) => sigma[i]));
  });
});

describe('missing sigma', () => {
  const { spectrum } = noisySpectrum({ ...RECIPE, lines: crowd });

  it('is estimated to some per cent in spite of lines', () => {
    const model = estimateNoise({ ...spectrum, sigma: null });
    expect(model.how).toBe('estimated');
    expect(Math.abs(Math.log(median(model.sigma.map((s, i) => s / spectrum.sigma![i]!))))).toBeLessThan(0.1);
  });

  it('is found again after smoothing, which hides it from neighbouring samples', () => {
    const smooth = smoothed(noisySpectrum(RECIPE).spectrum, 5);
    const truth = median(smooth.sigma!);
    // 2 f(i) - f(i-2) - f(i+2) of a mean of five: 6 - 8 * 3/5 + 2 * 1/5 instead of 6
    expect(derSnr(smooth.flux)!.noise / truth).toBeCloseTo(Math.sqrt(1.6 / 6), 1);
    expect(Math.abs(Math.log(median(estimateNoise({ ...smooth, sigma: null }).sigma) / truth))).toBeLessThan(0.1);
  });

  it('scales with the flux', () => {
    const bare: Spectrum = { ...spectrum, sigma: null };
    const base = estimateNoise(bare).sigma;
    fc.assert(
      fc.property(fc.integer({ min: -60, max: 60 }), (exponent) => {
        // powers of two: exact
        const scaled = estimateNoise({ ...bare, flux: bare.flux.map((f) => f * 2 ** exponent) }).sigma;
        expect(scaled.every((s, i) => s === base[i]! * 2 ** exponent)).toBe(true);
      }),
      { numRuns: 8 },
    );
  });

  it('follows a given level', () => {
    const { spectrum: steep, continuum } = noisySpectrum({ ...RECIPE, temperatureK: 3000 });
    const model = estimateNoise({ ...steep, sigma: null }, continuum);
    const ratio = model.sigma.map((s, i) => s / steep.sigma![i]!);
    expect(Math.abs(Math.log(median(ratio)))).toBeLessThan(0.1);
  });
});

describe('odd spectra', () => {
  const odd = (flux: number[], bad: number[] = flux.map(() => 0)): Spectrum => ({
    wavelength: Float64Array.from(flux, (_, i) => 500 + i),
    flux: Float64Array.from(flux),
    sigma: null,
    bad: Uint8Array.from(bad),
    fluxKind: 'unknown',
    resolvingPower: null,
    frame: 'unknown',
  });

  it.each([
    ['nothing', odd([])],
    ['one sample', odd([3])],
    ['a constant', odd(new Array<number>(300).fill(2))],
    ['zeros', odd(new Array<number>(300).fill(0))],
    ['nothing but bad samples', odd(new Array<number>(300).fill(NaN), new Array<number>(300).fill(1))],
    [
      'every other sample bad',
      odd(
        Array.from({ length: 300 }, (_, i) => (i % 2 ? NaN : 1)),
        Array.from({ length: 300 }, (_, i) => i % 2),
      ),
    ],
  ])('%s: sigma is finite and positive everywhere', (_, spectrum) => {
    const { sigma, correlation } = estimateNoise(spectrum);
    expect(sigma).toHaveLength(spectrum.flux.length);
    expect(sigma.every((s) => s > 0 && s < Infinity)).toBe(true);
    expect(correlation).toEqual([1]);
  });

  it('is the same for the same spectrum, every time', () => {
    const { spectrum } = noisySpectrum({ ...RECIPE, lines: crowd });
    expect(estimateNoise(spectrum)).toEqual(estimateNoise(spectrum));
  });
});
