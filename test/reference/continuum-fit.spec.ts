import { readFileSync } from 'node:fs';
import { DEFAULT_SETTINGS, estimateNoise, fitContinuum, fitPlanck, type Spectrum } from '@foreveil/shared';

/**
 * Reference: least squares by scipy 1.10.1 (curve_fit, absolute sigma) on stored noisy Planck spectra, CODATA 2018 constants,
 * extinction by Cardelli, Clayton & Mathis 1989.
 */
interface Case {
  id: string;
  kind: string;
  truth: { T_K: number; E_BV: number; R_V: number } | null;
  fit: { T_K: number; T_err_K: number; ln_scale: number; ln_scale_err: number; E_BV: number | null; E_BV_err: number | null; chi2: number };
  mask_intervals_nm?: [number, number][];
  E_BV_mode: 'none' | 'fixed' | 'free';
  pull_T: number;
  wavelength: number[];
  flux: number[];
  flux_err: number[];
}
const { cases } = JSON.parse(readFileSync('test/fixtures/reference/continuum_fit.json', 'utf8')) as { cases: Case[] };
const columns = ({ wavelength, flux, flux_err, mask_intervals_nm }: Case) => ({
  wavelength: Float64Array.from(wavelength),
  flux: Float64Array.from(flux),
  sigma: Float64Array.from(flux_err),
  bad: Uint8Array.from(wavelength, (nm) => (mask_intervals_nm?.some(([a, b]) => nm >= a && nm <= b) ? 1 : 0)),
});
const avOf = ({ truth, E_BV_mode }: Case) => (E_BV_mode === 'fixed' ? truth!.E_BV * truth!.R_V : 0);
const fitted = cases.filter((c) => c.kind === 'planck_fit');

describe('plain least squares of a Planck curve', () => {
  it('has the reference cases', () => expect(fitted.length).toBe(31));

  it.each(fitted)('$id', (one) => {
    const { wavelength, flux, sigma, bad } = columns(one);
    const found = fitPlanck(wavelength, flux, sigma, bad, { av: avOf(one), fitAv: one.E_BV_mode === 'free' });
    expect(found.end).toBe('converged');
    expect(Math.abs(found.temperatureK - one.fit.T_K)).toBeLessThan(0.02 * one.fit.T_err_K);
    expect(Math.abs(found.lnScale - one.fit.ln_scale)).toBeLessThan(0.02 * one.fit.ln_scale_err);
    expect(Math.abs(found.temperatureSigmaK / one.fit.T_err_K - 1)).toBeLessThan(0.05);
    expect(Math.abs(found.chi2 / one.fit.chi2 - 1)).toBeLessThan(1e-6);
    if (one.fit.E_BV !== null) expect(Math.abs(found.av / 3.1 - one.fit.E_BV)).toBeLessThan(0.02 * one.fit.E_BV_err!);
  });
});

describe('robust continuum of the same spectra', () => {
  const robust = (one: Case, extinctionAv: number | null) => {
    const spectrum: Spectrum = { ...columns(one), fluxKind: 'per_wavelength', resolvingPower: null, frame: 'unknown' };
    return fitContinuum(spectrum, estimateNoise(spectrum), { ...DEFAULT_SETTINGS, extinctionAv }).summary;
  };

  // lines left in, emission lines left in, three per cent of outliers: plain least squares is pulled
  it.each(cases.filter(({ id }) => /unmasked|outliers/.test(id)))('$id lands at least twice as near to the truth', (one) => {
    const { temperatureK } = robust(one, 0);
    expect(Math.abs(temperatureK! - one.truth!.T_K)).toBeLessThan(0.5 * Math.abs(one.fit.T_K - one.truth!.T_K));
  });

  it.each(fitted)('$id: the truth lies within the error, or the temperature is called unconstrained', (one) => {
    const { temperatureK, temperatureSigmaK, constrained, lowerBoundK } = robust(one, one.E_BV_mode === 'fixed' ? avOf(one) : null);
    if (constrained) expect(Math.abs(temperatureK! - one.truth!.T_K)).toBeLessThan(3 * temperatureSigmaK!);
    else if (lowerBoundK !== null) expect(lowerBoundK).toBeLessThan(one.truth!.T_K);
  });

  it.each(['T40000_650_662_snr50', 'T20000_580_600_snr100', 'T40000_350_700_snr100'])('%s is not constrained', (id) => {
    const { constrained, statement } = robust(
      cases.find((c) => c.id === id)!,
      null,
    );
    expect(constrained).toBe(false);
    expect(statement).toMatch(/not constrained/);
  });

  it('does not let reddening pass for a low temperature: 12 000 K behind E(B-V) = 0.3, not told', () => {
    const one = cases.find(({ id }) => id === 'T12000_E0.3_ignored')!;
    const { constrained, temperatureK, temperatureSigmaK } = robust(one, null);
    expect(one.fit.T_K).toBeLessThan(8000); // what plain least squares says, with an error of 6 K
    if (constrained) expect(Math.abs(temperatureK! - 12_000)).toBeLessThan(3 * temperatureSigmaK!);
  });

  it('takes a flux of 1 everywhere for normalised', () => {
    const { constrained, temperatureK, model, statement } = robust(
      cases.find(({ id }) => id === 'flat_spectrum')!,
      null,
    );
    expect({ constrained, temperatureK, model }).toEqual({ constrained: false, temperatureK: null, model: 'local' });
    expect(statement).toMatch(/normalised/);
  });
});
