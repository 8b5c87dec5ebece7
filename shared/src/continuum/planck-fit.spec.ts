import fc from 'fast-check';
import { chance } from '../../../test/support/noisy-spectrum.js';
import { fitPlanck } from './planck-fit.js';
import { planck } from './planck.js';
import { transmission } from './extinction.js';

const wavelength = Float64Array.from({ length: 200 }, (_, i) => 380 + 2 * i);
const body = (temperatureK: number, scale: number, av = 0) =>
  wavelength.map((nm) => scale * planck(nm, temperatureK) * transmission(nm, av));
const percent = (flux: Float64Array) => flux.map((f) => 0.01 * f);

describe('least-squares fit of a Planck curve', () => {
  it('finds temperature and scale of any noiseless body', () => {
    fc.assert(
      fc.property(fc.double({ min: 7.5, max: 10.5, noNaN: true }), fc.double({ min: -60, max: 60, noNaN: true }), (lnT, lnScale) => {
        const flux = body(Math.exp(lnT), Math.exp(lnScale));
        const found = fitPlanck(wavelength, flux, percent(flux), null);
        expect(found.end).toBe('converged');
        // the last step may be worth 1e-12 of chi square: 1e-6 of an error of some per mille
        expect(Math.abs(Math.log(found.temperatureK) - lnT)).toBeLessThan(1e-7);
        expect(Math.abs(found.lnScale - lnScale)).toBeLessThan(1e-6);
        expect(found.chi2).toBeLessThan(1e-9);
      }),
      { numRuns: 40 },
    );
  });

  it('halves the temperature where every wavelength is doubled', () => {
    const { normal } = chance(2);
    const flux = body(6000, 1).map((f) => f * (1 + 0.01 * normal()));
    const sigma = percent(flux);
    const one = fitPlanck(wavelength, flux, sigma, null);
    const other = fitPlanck(
      wavelength.map((nm) => 2 * nm),
      flux,
      sigma,
      null,
    );
    expect(other.temperatureK / one.temperatureK).toBeCloseTo(0.5, 9);
    expect(other.temperatureSigmaK / one.temperatureSigmaK).toBeCloseTo(0.5, 6);
    expect(other.chi2).toBeCloseTo(one.chi2, 6);
  });

  it('finds the extinction too when asked, and applies a given one', () => {
    const flux = body(9000, 1, 0.8);
    const free = fitPlanck(wavelength, flux, percent(flux), null, { fitAv: true });
    expect(free.av).toBeCloseTo(0.8, 5);
    expect(free.temperatureK / 9000).toBeCloseTo(1, 5);
    expect(free.avSigma).toBeGreaterThan(0);
    const given = fitPlanck(wavelength, flux, percent(flux), null, { av: 0.8 });
    expect(given.temperatureK / 9000).toBeCloseTo(1, 8);
    expect(given.avSigma).toBe(0);
    // unknown dust widens the error: the two are nearly degenerate
    expect(free.temperatureSigmaK).toBeGreaterThan(3 * given.temperatureSigmaK);
  });

  it('has errors that shrink with the square root of the number of samples', () => {
    const flux = body(6000, 1);
    const half = Uint8Array.from(flux, (_, i) => i % 2);
    const ratio =
      fitPlanck(wavelength, flux, percent(flux), half).temperatureSigmaK /
      fitPlanck(wavelength, flux, percent(flux), null).temperatureSigmaK;
    expect(ratio).toBeCloseTo(Math.SQRT2, 1);
  });

  it('leaves out what is masked, NaN or without a sigma', () => {
    const flux = body(5000, 1);
    const sigma = percent(flux);
    const mask = new Uint8Array(flux.length);
    flux[3] = 1e9;
    mask[3] = 1;
    flux[4] = NaN;
    sigma[5] = 0;
    flux[5] = -1e9;
    sigma[6] = NaN;
    expect(fitPlanck(wavelength, flux, sigma, mask).temperatureK / 5000).toBeCloseTo(1, 8);
    expect(fitPlanck(wavelength, flux, sigma, mask).degrees).toBe(200 - 4 - 2);
  });

  it('says so when there is too little to fit', () => {
    const none = new Float64Array(0);
    expect(fitPlanck(none, none, none, null).end).toBe('too_few_samples');
    expect(fitPlanck(Float64Array.of(500), Float64Array.of(1), Float64Array.of(0.1), null)).toMatchObject({
      end: 'too_few_samples',
      temperatureSigmaK: NaN,
    });
  });
});
