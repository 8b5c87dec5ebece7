import { readFileSync } from 'node:fs';
import {
  chanceThreshold,
  detect,
  falseMaxima,
  findExcesses,
  instrumentSigmaPx,
  thresholdFor,
  type NormalisedSamples,
} from '@foreveil/shared';
import { chance } from '../support/noisy-spectrum.js';

// Reference: how often white noise behind a Gaussian filter has a local maximum beyond k sigma, exactly on the lattice of pixels
// (trivariate normal, scipy 1.10.1), confirmed there by 1.2e8 simulated pixels; and how often a line of known strength is found.

interface Rate {
  id: string;
  kind: string;
  kernel_sigma_pix: number;
  k_sigma: number;
  theory_rate_per_pixel_one_sign: number;
}
interface Threshold {
  id: string;
  kind: string;
  kernel_sigma_pix: number;
  n_pixels: number;
  expected_false_one_sign: number;
  k_sigma: number;
}
interface Completeness {
  id: string;
  kind: string;
  line_sigma_pix: number;
  depth_in_noise_sigma: number;
  search_half_width_pix: number;
  detected_fraction_k4: number;
  detected_fraction_k5: number;
}
const { cases } = JSON.parse(readFileSync('test/fixtures/reference/significance.json', 'utf8')) as { cases: { kind: string }[] };
const of = <T extends { kind: string }>(kind: string) => cases.filter((c) => c.kind === kind) as T[];
const rates = of<Rate>('false_peak_rate');
const thresholds = of<Threshold>('threshold_for_expected_false');

it('has the reference cases', () => expect([rates.length, thresholds.length, of('completeness').length]).toEqual([48, 60, 12]));

describe('expected number of false maxima', () => {
  const ratio = ({ k_sigma, kernel_sigma_pix, theory_rate_per_pixel_one_sign: rate }: Rate) =>
    falseMaxima(k_sigma, 1, kernel_sigma_pix) / rate;

  // crossings of the continuous process, counted here, are fewer than its maxima by the few that do not cross: 1 % at 2 sigma
  it('is never less than the lattice has by more than 1.5 % at 2 sigma and 0.5 % from 2.5 sigma', () => {
    expect(Math.min(...rates.map(ratio))).toBeGreaterThan(0.985);
    expect(Math.min(...rates.filter(({ k_sigma }) => k_sigma >= 2.5).map(ratio))).toBeGreaterThan(0.995);
  });

  it('is never more than the lattice has by over a quarter: Rice alone would be up to 68 % over', () =>
    expect(Math.max(...rates.map(ratio))).toBeLessThan(1.25));

  it('sets thresholds that are not below those of the lattice and at most 0.07 sigma above', () => {
    for (const { kernel_sigma_pix, n_pixels, expected_false_one_sign, k_sigma } of thresholds) {
      const above = chanceThreshold(2 * expected_false_one_sign, n_pixels, [kernel_sigma_pix]) - k_sigma;
      expect(above).toBeGreaterThan(-0.002); // 0.5 % of a rate that falls by e^-2.5 or more a sigma
      expect(above).toBeLessThan(0.07);
    }
  });

  it('falls with the threshold, and grows with pixels and widths', () => {
    for (let k = 2; k < 7; k += 0.25) expect(falseMaxima(k + 0.25, 1000, 2)).toBeLessThan(falseMaxima(k, 1000, 2));
    expect(chanceThreshold(0.5, 40_000, [1])).toBeGreaterThan(chanceThreshold(0.5, 4000, [1]));
    expect(chanceThreshold(0.5, 4000, [1, 2])).toBeGreaterThan(chanceThreshold(0.5, 4000, [1]));
    expect(chanceThreshold(0.05, 4000, [1])).toBeGreaterThan(chanceThreshold(0.5, 4000, [1]));
  });
});

const RESOLVING_POWER = 30_000;

function whiteNoise(seed: number, pixels: number, level: number): NormalisedSamples {
  const { normal } = chance(seed);
  const sigma = 0.01;
  return {
    wavelength: Float64Array.from({ length: pixels }, (_, i) => 500 * Math.exp(i / RESOLVING_POWER / 2.5)),
    flux: Float64Array.from({ length: pixels }, () => level + sigma * normal()),
    weight: new Float64Array(pixels).fill(sigma ** -2),
  };
}

describe('white noise', () => {
  const PIXELS = 3000;

  it('gives the filters as many excesses as were asked for', () => {
    const [asked, spectra] = [5, 40];
    let count = 0;
    for (let seed = 1; seed <= spectra; seed++) {
      const data = whiteNoise(seed, PIXELS, 0);
      const sigmaPx = instrumentSigmaPx(data.wavelength, RESOLVING_POWER);
      const widestNm = (data.wavelength.at(-1)! - data.wavelength[0]!) / 8;
      const threshold = thresholdFor(asked, sigmaPx, PIXELS, PIXELS / 8);
      count += findExcesses(data, { instrumentSigmaPx: sigmaPx, widestNm, zeroMean: true, threshold, correlation: [1] }).length;
    }
    // maxima at neighbouring widths are counted once though asked for twice; Poisson: 4 sigma of 200 are 57
    expect(count).toBeLessThan(asked * spectra + 4 * Math.sqrt(asked * spectra));
    expect(count).toBeGreaterThan(0.5 * asked * spectra);
  });

  it.each([
    [0.5, 30],
    [5, 12],
  ])('gives the whole detection no more than the %d features a spectrum that were asked for', (asked, spectra) => {
    let count = 0;
    for (let seed = 1; seed <= spectra; seed++) {
      const data = whiteNoise(1000 + seed, PIXELS, 1);
      count += detect({ data, resolvingPower: RESOLVING_POWER, correlation: [1], falseFeatures: asked, continuumSigma: 0 }).model.components
        .length;
    }
    expect(count).toBeLessThanOrEqual(asked * spectra);
  });
});

describe('completeness', () => {
  const TRIALS = 500;

  it.each(of<Completeness>('completeness'))('$id', ({ line_sigma_pix, depth_in_noise_sigma, search_half_width_pix, ...c }) => {
    const { normal } = chance(31);
    const [n, middle] = [97, 48];
    const line = Float64Array.from({ length: n }, (_, i) => -depth_in_noise_sigma * Math.exp(-0.5 * ((i - middle) / line_sigma_pix) ** 2));
    const wavelength = Float64Array.from({ length: n }, (_, i) => 500 + i);
    const options = { instrumentSigmaPx: new Float64Array(n).fill(line_sigma_pix), zeroMean: false, correlation: [1] };
    // one width only, that of the line, as in the reference
    const widestNm = line_sigma_pix * 2.36;
    const found = { 4: 0, 5: 0 };
    for (let t = 0; t < TRIALS; t++) {
      const flux = line.map((f) => f + normal());
      const excesses = findExcesses({ wavelength, flux, weight: new Float64Array(n).fill(1) }, { ...options, widestNm, threshold: 4 });
      const here = excesses.filter((e) => e.kind === 'dip' && Math.abs(e.centre - wavelength[middle]!) <= search_half_width_pix + 0.5);
      const best = Math.max(0, ...here.map((e) => e.significance));
      if (best > 4) found[4]++;
      if (best > 5) found[5]++;
    }
    // binomial scatter at 4 sigma, and the reference's own 0.02
    const near = (fraction: number, expected: number) =>
      expect(Math.abs(fraction - expected)).toBeLessThan(0.02 + 4 * Math.sqrt((expected * (1 - expected)) / TRIALS));
    near(found[4] / TRIALS, c.detected_fraction_k4);
    near(found[5] / TRIALS, c.detected_fraction_k5);
  });
});
