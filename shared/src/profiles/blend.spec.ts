import fc from 'fast-check';
import { copies, damped, dip, grid, light, peak, samples } from '../../../test/support/blends.js';
import { chance } from '../../../test/support/noisy-spectrum.js';
import { chi2Of, fitBlend, rangeOf } from './blend.js';
import { asDamped, equivalentWidth, newComponent, settle, withCore, type Component } from './component.js';
import { rotationShape } from './shapes.js';

const LIMITS = { narrowest: 0.01, widest: 5 };
const ROTATION = rotationShape(0.3);

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });

describe('recovery', () => {
  it('of one line from any start within its width', () => {
    const lines = fc.record({
      centre: between(499.5, 500.5),
      fwhm: between(0.05, 0.6),
      amplitude: between(0.02, 0.95),
      kind: fc.constantFrom('dip' as const, 'peak' as const),
    });
    const starts = fc.record({ shift: between(-0.4, 0.4), stretch: between(0.6, 1.7), weaken: between(0.4, 1) });
    fc.assert(
      fc.property(lines, starts, ({ kind, centre, fwhm, amplitude }, { shift, stretch, weaken }) => {
        const data = samples([newComponent(kind, centre, fwhm, amplitude)], 1e4);
        const c = newComponent(kind, centre + shift * fwhm, fwhm * stretch, amplitude * weaken);
        fitBlend(data, [c], [], LIMITS, [498, 502]);
        // what is left is worth less than a hundredth of an error at this signal to noise
        expect(Math.abs(c.amplitude / amplitude - 1)).toBeLessThan(1e-3);
        expect(Math.abs(c.centre - centre) / fwhm).toBeLessThan(1e-3);
        expect(Math.abs(c.fwhm / fwhm - 1)).toBeLessThan(1e-3);
      }),
      { numRuns: 60 },
    );
  });

  it.each<[string, Component[]]>([
    ['two overlapping dips', [dip(499.9, 0.2, 0.6), dip(500.1, 0.25, 0.4)]],
    ['three dips, the middle one weak', [dip(499.7, 0.2, 0.6), dip(500, 0.2, 0.15), dip(500.3, 0.2, 0.7)]],
    ['a dip within a peak', [peak(500, 0.6, 1.2), dip(500.05, 0.12, 0.5)]],
    ['a rotating and a narrow line', [withCore(dip(500, 0.8, 0.4), ROTATION), dip(500.2, 0.06, 0.5)]],
    ['a damped line with a neighbour', [damped(500, 0.12, 0.8, 8, 0.2), dip(500.9, 0.1, 0.3)]],
  ])('of %s that multiply and add as light does', (_, truth) => {
    const data = samples(truth, 1000);
    const fitted = copies(truth);
    for (const [i, c] of fitted.entries()) {
      c.amplitude *= 0.85;
      c.centre += (i % 2 ? -0.1 : 0.1) * c.fwhm;
      c.scale *= 1.15;
      settle(c);
    }
    const { chi2 } = fitBlend(data, fitted, [], LIMITS, [498, 502], 1e-6);
    expect(chi2).toBeLessThan(0.5); // of 401 samples without noise
    fitted.forEach((c, i) => {
      const t = truth[i]!;
      expect(Math.abs(c.centre - t.centre) / c.sigmaCentre).toBeLessThan(0.5);
      expect(Math.abs(equivalentWidth(c).value - equivalentWidth(t).value) / equivalentWidth(c).sigma).toBeLessThan(0.5);
      expect(Math.abs(Math.log(c.fwhm / t.fwhm)) / c.sigmaLogFwhm).toBeLessThan(0.5);
    });
  });
});

describe('fitBlend', () => {
  const truth = [dip(499.9, 0.2, 0.6), dip(500.12, 0.25, 0.4)];

  it('ends with the chi square of what it leaves behind', () => {
    const { normal } = chance(3);
    const data = samples(truth, 80, normal);
    const fitted = copies(truth);
    const { chi2, end } = fitBlend(data, fitted, [], LIMITS, [499, 501]);
    expect(end).toBe('converged');
    expect(chi2Of(data, fitted, [499, 501])).toBeCloseTo(chi2, 6);
    expect(chi2).toBeLessThan(chi2Of(data, truth, [499, 501]));
    const byHand = light(data.wavelength, fitted).reduce(
      (sum, m, i) => (data.wavelength[i]! >= 499 && data.wavelength[i]! < 501 ? sum + data.weight[i]! * (data.flux[i]! - m) ** 2 : sum),
      0,
    );
    expect(chi2).toBeCloseTo(byHand, 6);
  });

  it('takes others as they are', () => {
    const [free, fixed] = copies(truth) as [Component, Component];
    const kept = { ...fixed };
    free.centre += 0.03;
    fitBlend(samples(truth, 500), [free], [fixed], LIMITS);
    expect(fixed).toEqual(kept);
    expect(Math.abs(free.centre - truth[0]!.centre) / free.sigmaCentre).toBeLessThan(0.5);
  });

  it('gives the same to the last bit whatever was fitted before', () => {
    const { normal } = chance(5);
    const data = samples(truth, 80, normal);
    const first = copies(truth);
    fitBlend(data, first, [], LIMITS);
    fitBlend(
      samples([damped(500, 0.1, 0.7, 6, 0.3)], 50),
      [damped(500.1, 0.1, 0.5, 2, 0.4), dip(499, 0.1, 0.1), dip(501, 0.2, 0.2)],
      [],
      LIMITS,
      [498, 502],
    );
    const again = copies(truth);
    fitBlend(data, again, [], LIMITS);
    expect(again).toEqual(first);
  });

  it('does not see samples of no weight', () => {
    const data = samples(truth, 100);
    const spoilt = { ...data, flux: data.flux.slice(), weight: data.weight.slice() };
    for (let i = 180; i < 190; i++) [spoilt.flux[i], spoilt.weight[i]] = [1e6, 0];
    const fitted = copies(truth);
    fitBlend(spoilt, fitted, [], LIMITS);
    fitted.forEach((c, i) => expect(Math.abs(c.centre - truth[i]!.centre) / c.sigmaCentre).toBeLessThan(0.1));
  });

  it('keeps depths within 0 and 1, widths within the limits and centres within a FWHM of the start, whatever the data', () => {
    fc.assert(
      fc.property(fc.integer(), between(0.05, 1), (seed, fwhm) => {
        const { normal } = chance(seed);
        const wavelength = grid(499, 501, 0.02);
        const data = { wavelength, flux: wavelength.map(() => 5 * normal()), weight: wavelength.map(() => 1) };
        const c = dip(500, fwhm, 0.5);
        fitBlend(data, [c], [], { narrowest: 0.05, widest: 1 }, [499, 501]);
        expect(c.amplitude).toBeGreaterThanOrEqual(0);
        expect(c.amplitude).toBeLessThanOrEqual(1);
        expect(c.fwhm).toBeGreaterThanOrEqual(0.05 * 0.999);
        expect(c.fwhm).toBeLessThanOrEqual(1.001);
        expect(Math.abs(c.centre - 500)).toBeLessThanOrEqual(fwhm * 1.001);
      }),
    );
  });

  it('leaves a component without data where it is', () => {
    const data = samples(truth, 100);
    const off = { ...data, weight: new Float64Array(data.weight.length) };
    const c = dip(500, 0.2, 0.5);
    const { chi2 } = fitBlend(off, [c], [], LIMITS);
    expect(chi2).toBe(0);
    expect([c.centre, c.fwhm, c.amplitude]).toEqual([500, 0.2, 0.5]);
  });

  it('covers what its components reach, damped wings up to four FWHM', () => {
    const simple = dip(500, 0.2, 0.5);
    expect(rangeOf([simple])).toEqual([500 - simple.reach, 500 + simple.reach]);
    const winged = asDamped(simple);
    const [from, to] = rangeOf([winged, dip(501, 0.1, 0.1)]);
    expect(500 - from).toBeCloseTo(Math.min(winged.reach, 4 * winged.fwhm), 12);
    expect(to).toBeCloseTo(501 + dip(501, 0.1, 0.1).reach, 12);
  });
});
