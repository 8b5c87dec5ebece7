import { readFileSync } from 'node:fs';
import { voigtFwhm, voigtH, voigtProfile } from '@foreveil/shared';

/** Reference: 40-digit evaluation (mpmath 1.2.1) for H; scipy 1.10.1 for normalised profiles and widths. */
interface Case {
  id: string;
  kind: string;
  a: number;
  u: number;
  H: number;
  integral_H_du: number;
  sigma: number;
  gamma_hwhm: number;
  peak: number;
  fwhm: number;
  x: number[];
  value: number[];
  peak_unit_area: number;
}
const { cases, tolerance } = JSON.parse(readFileSync('test/fixtures/reference/voigt.json', 'utf8')) as {
  cases: Case[];
  tolerance: { H_relative_if_faddeeva_grade: number; fwhm_relative: number };
};
const of = (kind: string) => cases.filter((c) => c.kind === kind);

describe('Voigt function', () => {
  it('has the reference cases', () => expect(of('H').length).toBe(315));

  it.each(of('H'))('$id', ({ a, u, H }) => {
    // H is given as 0 where it is below 1e-300
    if (H === 0) expect(voigtH(a, u)).toBeLessThan(1e-290);
    else expect(Math.abs(voigtH(a, u) / H - 1)).toBeLessThan(tolerance.H_relative_if_faddeeva_grade);
    expect(voigtH(a, -u)).toBe(voigtH(a, u));
  });

  it.each(of('area_H'))('$id', ({ a, integral_H_du }) => {
    // u = tan(t) maps the whole line to a finite range; the integrand is smooth and periodic there, so the midpoint rule is exact to rounding
    const steps = 20_000;
    let sum = 0;
    for (let i = 0; i < steps; i++) {
      const t = Math.PI * ((i + 0.5) / steps - 0.5);
      sum += voigtH(a, Math.tan(t)) / Math.cos(t) ** 2;
    }
    expect(Math.abs((sum * Math.PI) / steps / integral_H_du - 1)).toBeLessThan(1e-9);
  });

  it.each(of('normalised_voigt'))('$id', ({ sigma, gamma_hwhm, peak, fwhm, x, value }) => {
    expect(Math.abs(voigtProfile(0, sigma, gamma_hwhm) / peak - 1)).toBeLessThan(1e-12);
    expect(Math.abs(voigtFwhm(sigma, gamma_hwhm) / fwhm - 1)).toBeLessThan(tolerance.fwhm_relative);
    // far out, x itself carries the rounding of the file: 1e-12 of the exponent
    x.forEach((at, i) => expect(Math.abs(voigtProfile(at, sigma, gamma_hwhm) - value[i]!)).toBeLessThanOrEqual(1e-11 * value[i]! + 1e-300));
  });

  it.each(of('gaussian'))('$id', ({ sigma, peak_unit_area, fwhm }) => {
    expect(Math.abs(voigtProfile(0, sigma, 0) / peak_unit_area - 1)).toBeLessThan(1e-14);
    expect(Math.abs(voigtFwhm(sigma, 0) / fwhm - 1)).toBeLessThan(1e-12);
  });
});
