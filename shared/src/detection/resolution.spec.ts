import { crowdOfDips, noisySpectrum, type Recipe } from '../../../test/support/noisy-spectrum.js';
import { resolvingPowerOf } from './resolution.js';

const RECIPE: Recipe = { fromNm: 500, toNm: 520, resolvingPower: 20_000, temperatureK: 6000, signalToNoise: 150, seed: 3 };

function estimated(more: Partial<Recipe>, stated: number | null = null) {
  const { spectrum, continuum } = noisySpectrum({ ...RECIPE, ...more });
  const data = {
    wavelength: spectrum.wavelength,
    flux: spectrum.flux.map((f, i) => f / continuum[i]!),
    weight: spectrum.sigma!.map((s, i) => (continuum[i]! / s) ** 2),
  };
  return resolvingPowerOf({ ...spectrum, resolvingPower: stated }, data);
}

describe('resolving power', () => {
  it('is what the file states', () => expect(estimated({}, 47_000)).toEqual({ value: 47_000, how: 'stated' }));

  it.each([2.5, 4, 7])('is told by the narrowest lines where nothing is stated, at %d samples an element', (samplesPerElement) => {
    const lines = crowdOfDips(11, 60, 501, 519, 20_000).map((l) => ({
      ...l,
      depth: 0.2 + 0.7 * l.depth,
      fwhmNm: Math.min(l.fwhmNm, 0.05),
    }));
    const { value, how } = estimated({ lines, samplesPerElement });
    expect(how).toBe('estimated');
    // the narrowest tenth of lines are 1 to 1.3 elements wide
    expect(value / 20_000).toBeGreaterThan(0.7);
    expect(value / 20_000).toBeLessThan(1.2);
  });

  it('is what the sampling suggests where no lines tell', () => {
    const { value, how } = estimated({});
    expect(how).toBe('estimated');
    expect(value / 20_000).toBeCloseTo(2.5 / 2.4, 1);
  });

  it('takes a stated value of nothing for none', () => expect(estimated({}, 0).how).toBe('estimated'));
});
