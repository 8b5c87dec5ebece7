import { copies, dip, grid, peak, samples } from '../../../test/support/blends.js';
import { asDamped, equivalentWidth, fitBlend, type Component } from '../profiles/index.js';
import { measure } from './measure.js';

const WAVELENGTH = grid(498, 502, 0.01);
const R = 5000;
const LIMITS = { narrowest: 0.01, widest: 5 };

/** Components fitted to the light that they make, and measured. */
function measured(truth: readonly Component[], continuumSigma = 0, signalToNoise = 200) {
  const data = samples(truth, signalToNoise, undefined, WAVELENGTH);
  const fitted = copies(truth);
  fitBlend(data, fitted, [], LIMITS, [498, 502]);
  return fitted.map((c) =>
    measure(
      c,
      data,
      fitted.filter((o) => o !== c),
      R,
      continuumSigma,
    ),
  );
}

describe('equivalent widths', () => {
  it.each<[string, Component[]]>([
    ['a dip', [dip(500, 0.2, 0.5)]],
    ['a peak', [peak(500, 0.2, 3)]],
    ['two dips that overlap', [dip(499.9, 0.2, 0.5), dip(500.1, 0.25, 0.4)]],
    ['a dip within a peak', [peak(500, 0.6, 1.5), dip(500.05, 0.15, 0.5)]],
    ['a peak within a broad dip', [dip(500, 1, 0.4), peak(500.1, 0.15, 0.6)]],
  ])('of %s by summation are those of the fit, each line for itself', (_, truth) => {
    measured(truth).forEach((m, i) => {
      const exact = equivalentWidth(truth[i]!).value;
      expect(m.equivalentWidthNm).toBeCloseTo(exact, 5);
      // the sum goes 1.5 FWHM to either side, which leaves 4e-4 of a Gaussian out
      expect(Math.abs(m.directNm / exact - 1)).toBeLessThan(2e-3);
    });
  });

  it('are positive in absorption and negative in emission', () => {
    const [p, d] = measured([peak(500, 0.6, 1.5), dip(500.05, 0.15, 0.5)]);
    expect([Math.sign(p!.directNm), Math.sign(p!.equivalentWidthNm), Math.sign(d!.directNm), Math.sign(d!.equivalentWidthNm)]).toEqual([
      -1, -1, 1, 1,
    ]);
  });

  it("have errors that hold the continuum's placement over the width of the line", () => {
    const [without, withIt] = [0, 0.01].map((sigma) => measured([dip(500, 0.2, 0.5)], sigma)[0]!);
    const placement = Math.sqrt(withIt!.equivalentWidthSigmaNm ** 2 - without!.equivalentWidthSigmaNm ** 2);
    expect(placement).toBeCloseTo(0.01 * 1.06 * 0.2, 4); // an area of 1.06 FWHM times the error of the level
    expect(withIt!.directSigmaNm).toBeGreaterThan(0.01 * 0.6);
  });

  it('by summation have the error of Vollmann & Eversberg 2006: step times sigma over the root of the samples', () => {
    const [m] = measured([dip(500, 0.2, 0.5)]);
    expect(m!.directSigmaNm).toBeCloseTo(0.01 * 0.005 * Math.sqrt(60), 5);
  });

  it('of a damped line take the wings in', () => {
    const [m] = measured([asDamped(dip(500, 0.15, 0.6))]);
    expect(m!.directNm / m!.equivalentWidthNm).toBeGreaterThan(0.9);
    expect(m!.directNm).toBeLessThan(m!.equivalentWidthNm);
  });
});

describe('what else is measured', () => {
  it('the signal to noise of a sample, and the significance of the line', () => {
    const [m] = measured([dip(500, 0.2, 0.5)], 0, 130);
    expect(m!.snr).toBeCloseTo(130, 6);
    expect(m!.significance).toBeCloseTo(m!.component.amplitude / m!.component.sigmaAmplitude, 9);
  });

  it('no more than what the data hold: a line in a gap has no direct width', () => {
    const data = samples([dip(500, 0.2, 0.5)], 100, undefined, WAVELENGTH);
    const m = measure(dip(500, 0.2, 0.5), { ...data, weight: new Float64Array(data.weight.length) }, [], R, 0);
    expect([m.directNm, m.snr]).toEqual([0, 0]);
    expect(m.flags).toContain('edge');
  });
});
