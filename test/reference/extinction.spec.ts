import { readFileSync } from 'node:fs';
import { extinctionCurve, transmission, type ExtinctionLaw } from '@foreveil/shared';

/**
 * Reference: own evaluation with numpy 1.24.2 and scipy 1.10.1 of Cardelli, Clayton & Mathis 1989, ApJ 345, 245; O'Donnell 1994,
 * ApJ 422, 158; Fitzpatrick 1999, PASP 111, 63 (natural spline through the anchors of its tables 3 and 4).
 * Published: CCM89 table 3 (from memory) and F99 table 3.
 */
interface Case {
  id: string;
  kind: string;
  wavelength_nm: number;
  x_per_um: number;
  R_V: number;
  ccm89: number | null;
  odonnell94: number | null;
  f99_table4: number;
  published?: number;
  published_A_over_EBV?: number;
  tol: number;
  law: 'ccm89' | 'odonnell94' | 'f99_table4';
  A_V: number;
  A_lambda_mag: number;
  flux_factor_to_deredden: number;
}
const { cases, tolerance } = JSON.parse(readFileSync('test/fixtures/reference/extinction.json', 'utf8')) as {
  cases: Case[];
  tolerance: { formula_abs: number; f99_abs: number };
};
const of = (kind: string) => cases.filter((c) => c.kind === kind);
const LAWS: Record<Case['law'], ExtinctionLaw> = { ccm89: 'ccm89', odonnell94: 'odonnell94', f99_table4: 'fitzpatrick99' };

describe('extinction laws', () => {
  it('has the reference cases', () => expect(of('A_over_AV').length).toBe(385));

  it.each(of('A_over_AV'))('$id', ({ wavelength_nm, R_V, ccm89, odonnell94, f99_table4 }) => {
    if (ccm89 !== null) expect(Math.abs(extinctionCurve(wavelength_nm, 'ccm89', R_V) - ccm89)).toBeLessThan(tolerance.formula_abs);
    if (odonnell94 !== null)
      expect(Math.abs(extinctionCurve(wavelength_nm, 'odonnell94', R_V) - odonnell94)).toBeLessThan(tolerance.formula_abs);
    // the same end condition and the same anchors as the reference, so that the formula's own tolerance holds for the spline too
    expect(Math.abs(extinctionCurve(wavelength_nm, 'fitzpatrick99', R_V) - f99_table4)).toBeLessThan(tolerance.formula_abs);
  });

  it.each(of('published'))('$id', ({ wavelength_nm, x_per_um, R_V, published, published_A_over_EBV, tol }) => {
    if (published !== undefined) expect(Math.abs(extinctionCurve(1e3 / x_per_um, 'ccm89', R_V) - published)).toBeLessThan(tol);
    else expect(Math.abs(R_V * extinctionCurve(wavelength_nm, 'fitzpatrick99', R_V) - published_A_over_EBV!)).toBeLessThan(tol);
  });

  it.each(of('deredden'))('$id', ({ wavelength_nm, law, R_V, A_V, A_lambda_mag, flux_factor_to_deredden }) => {
    expect(Math.abs(A_V * extinctionCurve(wavelength_nm, LAWS[law], R_V) - A_lambda_mag)).toBeLessThan(
      tolerance.formula_abs * Math.max(1, A_V),
    );
    expect(Math.abs(transmission(wavelength_nm, A_V, LAWS[law], R_V) * flux_factor_to_deredden - 1)).toBeLessThan(1e-5);
  });
});
