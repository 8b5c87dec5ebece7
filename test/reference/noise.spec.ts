import { readFileSync } from 'node:fs';
import { derSnr, estimateNoise, madSigma, median, type Spectrum } from '@foreveil/shared';

/**
 * Reference: DER_SNR (Stoehr et al. 2008, ASP Conf. Ser. 394, 505) and the scaled median absolute deviation by numpy 1.24.2 on stored
 * arrays. The stored DER_SNR values use the published factor 0.6052697, 2e-7 below 1.482602218505602 / sqrt(6).
 */
interface Case {
  id: string;
  n: number;
  true_sigma: number;
  signal_median: number | null;
  der_snr_noise: number | null;
  der_snr: number | null;
  mad_sigma: number;
  flux: (number | null)[];
}
const reference = JSON.parse(readFileSync('test/fixtures/reference/noise.json', 'utf8')) as {
  cases: Case[];
  tolerance: { relative: number };
  constants: { der_snr_factor_used: number; der_snr_factor_exact: number };
};
const factor = reference.constants.der_snr_factor_exact / reference.constants.der_snr_factor_used;
const numbers = (flux: Case['flux']) => Float64Array.from(flux, (f) => f ?? NaN);

describe('noise of stored arrays', () => {
  it('has the reference cases', () => expect(reference.cases.length).toBe(20));

  it.each(reference.cases)('$id', ({ flux, der_snr_noise, der_snr, signal_median, mad_sigma }) => {
    const found = derSnr(numbers(flux));
    if (der_snr_noise === null) expect(found).toBeNull();
    else {
      expect(found!.noise).toBeCloseTo(der_snr_noise * factor, 12);
      expect(found!.signal).toBe(signal_median);
      if (der_snr === null) expect(found!.signalToNoise).toBeNaN();
      else expect(Math.abs((found!.signalToNoise * factor) / der_snr - 1)).toBeLessThan(reference.tolerance.relative);
    }
    expect(Math.abs(madSigma(numbers(flux)) - mad_sigma)).toBeLessThanOrEqual(1e-9 * mad_sigma);
  });
});

describe('noise model of the same arrays, no sigma stated', () => {
  const asSpectrum = (flux: Case['flux']): Spectrum => ({
    wavelength: Float64Array.from(flux, (_, i) => 500 + 0.01 * i),
    flux: numbers(flux),
    sigma: null,
    bad: Uint8Array.from(flux, (f) => (f === null || f === 0 ? 1 : 0)),
    fluxKind: 'unknown',
    resolvingPower: null,
    frame: 'unknown',
  });
  const chosen = reference.cases.filter(({ n, true_sigma, id }) => n >= 200 && true_sigma > 0 && id !== 'noise_ramp');

  // 4 times the scatter of an estimate from n samples, 1.4 / sqrt(n); what noise is correlated is found out, not told
  it.each(chosen)('$id', ({ id, flux, n, true_sigma }) => {
    const model = estimateNoise(asSpectrum(flux));
    expect(model.how).toBe('estimated');
    const ratio = median(model.sigma) / true_sigma;
    // 5 % of outliers touch 15 % of the differences, and the median of the rest is their 59 % quantile: 22 % more
    const byOutliers = id === 'outliers_5pc' ? 0.2 : 0;
    expect(Math.abs(Math.log(ratio) - byOutliers)).toBeLessThan((4 * 1.4) / Math.sqrt(n));
  });

  it('follows noise that grows tenfold along the array', () => {
    const { flux } = reference.cases.find(({ id }) => id === 'noise_ramp')!;
    const { sigma } = estimateNoise(asSpectrum(flux));
    expect(sigma[350]! / sigma[50]!).toBeGreaterThan(2);
  });

  it('sees that neighbouring samples of smoothed noise are tied', () => {
    const { flux } = reference.cases.find(({ id }) => id === 'correlated_gauss3')!;
    const { correlation } = estimateNoise(asSpectrum(flux));
    // a Gaussian of 3 samples: exp(-1/36) at lag 1, exp(-9/36) at lag 3
    expect(correlation[1]!).toBeGreaterThan(0.8);
    expect(correlation[3]!).toBeGreaterThan(0.5);
  });
});
