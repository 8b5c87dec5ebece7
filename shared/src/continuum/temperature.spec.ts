import { crowdOfDips, noisySpectrum, type Recipe } from '../../../test/support/noisy-spectrum.js';
import { DEFAULT_SETTINGS } from '../identify/index.js';
import { estimateNoise } from '../noise/index.js';
import { median } from '../numeric/index.js';
import { fitContinuum } from './fit.js';
import { wienPeakNm } from './planck.js';

const RECIPE: Recipe = { fromNm: 400, toNm: 690, resolvingPower: 12_000, temperatureK: 5800, signalToNoise: 100, seed: 31 };
const judge = (recipe: Recipe, extinctionAv: number | null = null) => {
  const { spectrum } = noisySpectrum(recipe);
  return fitContinuum(spectrum, estimateNoise(spectrum), { ...DEFAULT_SETTINGS, extinctionAv }).summary;
};
/** The strongest diffuse bands as they come with one magnitude of extinction: the strengths of the line list over R_V = 3.1. */
const bandsFor = (av: number) =>
  [
    { nm: 443.004, fwhmNm: 1.75, ew: 0.223 },
    { nm: 578.21, fwhmNm: 0.21, ew: 0.0579 },
    { nm: 579.871, fwhmNm: 0.09, ew: 0.0132 },
    { nm: 620.482, fwhmNm: 0.12, ew: 0.0107 },
    { nm: 661.543, fwhmNm: 0.1, ew: 0.0231 },
  ].map(({ nm, fwhmNm, ew }) => ({ nm, fwhmNm, depth: (ew * av) / 3.1 / (1.0645 * fwhmNm) }));

describe('colour temperature', () => {
  it.each([4600, 5800, 7200, 9500])('of %d K is told within its error', (temperatureK) => {
    const { temperatureK: told, temperatureSigmaK, constrained, wienPeakNm: peak, lowerBoundK } = judge({ ...RECIPE, temperatureK });
    expect(constrained).toBe(true);
    expect(Math.abs(told! - temperatureK)).toBeLessThan(3 * temperatureSigmaK!);
    expect(Math.abs(told! / temperatureK - 1)).toBeLessThan(0.03);
    expect(peak).toBeCloseTo(wienPeakNm(told!), 9);
    expect(lowerBoundK).toBeNull();
  });

  it('has errors of the right size: response tilts of a per cent, forty stars', () => {
    const pulls = Array.from({ length: 40 }, (_, k) => {
      const tilt = 0.008 * Math.sin(12.9898 * (k + 1)) * 1.4;
      const bend = 0.008 * Math.sin(78.233 * (k + 1)) * 1.4;
      const temperatureK = 4800 + 120 * k;
      const response = (x: number) => 1 + tilt * x + bend * (4 * x ** 3 - 3 * x);
      const told = judge({ ...RECIPE, resolvingPower: 3000, temperatureK, seed: 100 + k, response });
      return Math.abs(told.temperatureK! - temperatureK) / told.temperatureSigmaK!;
    });
    // a normal deviate has median 0.67; of forty, the median scatters by 0.1
    expect(median(pulls)).toBeGreaterThan(0.3);
    expect(median(pulls)).toBeLessThan(1);
    expect(pulls.filter((p) => p > 3).length).toBeLessThanOrEqual(1);
  });

  it('is told in spite of a crowd of lines', () => {
    const { temperatureK, temperatureSigmaK } = judge({ ...RECIPE, lines: crowdOfDips(9, 600, 400, 690, 12_000) });
    expect(Math.abs(temperatureK! - 5800)).toBeLessThan(3 * temperatureSigmaK!);
    expect(Math.abs(temperatureK! / 5800 - 1)).toBeLessThan(0.03);
  });

  it('is not called constrained in the Rayleigh-Jeans tail; the bound that holds is told', () => {
    const { constrained, lowerBoundK, upperBoundK, statement } = judge({ ...RECIPE, fromNm: 640, toNm: 680, temperatureK: 30_000 });
    expect(constrained).toBe(false);
    expect(lowerBoundK!).toBeLessThan(30_000);
    expect(upperBoundK === null || upperBoundK > 30_000).toBe(true);
    expect(statement).toMatch(/not constrained/);
    expect(statement).toMatch(/confidence it (is above|lies between)/);
  });

  it.each([0.5, 1, 1.6])('does not take a hot star behind A_V = %d for a cool one', (av) => {
    const hot = judge({ ...RECIPE, temperatureK: 23_000, av, lines: bandsFor(av), signalToNoise: 150 });
    if (hot.constrained) expect(Math.abs(hot.temperatureK! - 23_000)).toBeLessThan(3 * hot.temperatureSigmaK!);
    else {
      expect(hot.lowerBoundK!).toBeLessThan(23_000);
      expect(hot.lowerBoundK!).toBeGreaterThan(9000);
      expect(hot.statement).toMatch(/dust/);
    }
  });

  it('holds to an extinction that a person gives', () => {
    const { temperatureK, temperatureSigmaK, statement } = judge({ ...RECIPE, temperatureK: 7000, av: 0.6 }, 0.6);
    expect(Math.abs(temperatureK! - 7000)).toBeLessThan(3 * temperatureSigmaK!);
    expect(statement).toMatch(/given visual extinction of 0\.60 mag/);
  });

  it('is not taken from between emission lines', () => {
    const lines = Array.from({ length: 30 }, (_, k) => ({ nm: 405 + 9.3 * k, depth: -20 / (1 + k / 5), fwhmNm: 0.1 }));
    const { constrained, statement } = judge({ ...RECIPE, temperatureK: 9000, signalToNoise: 20, lines });
    expect(constrained).toBe(false);
    expect(statement).toMatch(/[Ee]mission/);
  });

  it('warns of the Balmer jump and of molecules', () => {
    expect(judge({ ...RECIPE, fromNm: 340, temperatureK: 9000 }).statement).toMatch(/Balmer jump/);
    expect(judge({ ...RECIPE, temperatureK: 3400 }).statement).toMatch(/molecular bands/);
  });

  it('is not thrown off by a jump that no Planck curve has', () => {
    const { temperatureK } = judge({ ...RECIPE, fromNm: 330, temperatureK: 9000, response: (x) => (x < -0.72 ? 0.65 : 1) });
    expect(Math.abs(temperatureK! / 9000 - 1)).toBeLessThan(0.05);
  });
});
