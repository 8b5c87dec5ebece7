import { readFileSync } from 'node:fs';
import { brightnessTemperature, lnPlanck, planck, planckSlope, wienPeakNm } from '@foreveil/shared';

/** Reference: 40-digit evaluation (mpmath 1.2.1) with CODATA 2018 constants, seen again with astropy 5.2.1. */
interface Case {
  id: string;
  kind: string;
  lambda_nm: number;
  T_K: number;
  B_lambda: number | null;
  log10_B_lambda: number;
  dlnB_dlnT: number;
  lambda_peak_nm: number;
  B_lambda_at_peak: number;
  pi_int_B_dlambda_erg_s_cm2: number;
  lambda_lo_nm: number;
  lambda_hi_nm: number;
  fraction: number;
}
const { cases, tolerance } = JSON.parse(readFileSync('test/fixtures/reference/planck.json', 'utf8')) as {
  cases: Case[];
  tolerance: { relative: number; stefan_boltzmann_numeric_rel: number };
};
const of = (kind: string) => cases.filter((c) => c.kind === kind);
const relative = (value: number, expected: number) => Math.abs(value / expected - 1);

describe('Planck curve', () => {
  it('has the reference cases', () => expect(of('planck').length).toBe(323));

  it.each(of('planck'))('$id', ({ lambda_nm, T_K, B_lambda, log10_B_lambda, dlnB_dlnT }) => {
    const value = planck(lambda_nm, T_K);
    // null: below the smallest normal double, where 0 or a denormal is the right answer
    if (B_lambda === null) expect(value).toBeLessThan(2.3e-308);
    else expect(relative(value, B_lambda)).toBeLessThan(tolerance.relative);
    expect(value).toBeGreaterThanOrEqual(0);
    expect(Math.abs(lnPlanck(lambda_nm, T_K) / Math.LN10 - log10_B_lambda)).toBeLessThan(1e-9);
    expect(relative(planckSlope(lambda_nm, T_K), dlnB_dlnT)).toBeLessThan(tolerance.relative);
  });

  it.each(of('wien'))('$id', ({ T_K, lambda_peak_nm, B_lambda_at_peak }) => {
    expect(relative(wienPeakNm(T_K), lambda_peak_nm)).toBeLessThan(tolerance.relative);
    expect(relative(planck(wienPeakNm(T_K), T_K), B_lambda_at_peak)).toBeLessThan(tolerance.relative);
  });

  it.each(of('brightness_temperature'))('$id', ({ lambda_nm, B_lambda, T_K }) => {
    expect(relative(brightnessTemperature(lambda_nm, B_lambda!), T_K)).toBeLessThan(tolerance.relative);
  });

  // Simpson's rule in ln wavelength; 1e-8 of the integral lies outside 1/60 to 3000 times the peak
  const integral = (fromNm: number, toNm: number, temperatureK: number) => {
    const steps = 4000;
    const h = Math.log(toNm / fromNm) / steps;
    let sum = 0;
    for (let i = 0; i <= steps; i++) {
      const nm = fromNm * Math.exp(i * h);
      sum += (i === 0 || i === steps ? 1 : i % 2 ? 4 : 2) * planck(nm, temperatureK) * nm * 10; // per Angstrom
    }
    return (sum * h) / 3;
  };
  it.each(of('stefan_boltzmann'))('$id', ({ T_K, pi_int_B_dlambda_erg_s_cm2 }) => {
    const peak = wienPeakNm(T_K);
    const all = Math.PI * integral(peak / 60, peak * 3000, T_K);
    expect(relative(all, pi_int_B_dlambda_erg_s_cm2)).toBeLessThan(tolerance.stefan_boltzmann_numeric_rel);
  });

  it.each(of('band_fraction'))('$id', ({ T_K, lambda_lo_nm, lambda_hi_nm, fraction }) => {
    const peak = wienPeakNm(T_K);
    const part = integral(lambda_lo_nm, lambda_hi_nm, T_K) / integral(peak / 60, peak * 3000, T_K);
    expect(relative(part, fraction)).toBeLessThan(1e-6);
  });
});
