import fc from 'fast-check';
import { asDamped, equivalentWidth, newComponent, profileOf, settle, withCore, type Component } from './component.js';
import { addComponent, indexAt } from './samples.js';
import { rotationShape } from './shapes.js';

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const gaussians = fc.record({ centre: between(300, 900), fwhm: between(0.005, 3), amplitude: between(0.001, 1) });
const ROTATION = rotationShape(0.2);

/** Equivalent width of a component by summing 1 - F on a fine grid, nm. */
function summed(c: Component): number {
  const n = 4001;
  const step = (2.2 * c.reach) / n;
  const wavelength = Float64Array.from({ length: n }, (_, i) => c.centre + (i - (n - 1) / 2) * step);
  const dips = new Float64Array(n).fill(1);
  const peaks = new Float64Array(n);
  addComponent(c, wavelength, 0, n, dips, peaks);
  return dips.reduce((sum, d, i) => sum + (1 - d - peaks[i]!) * step, 0);
}

describe('equivalent width', () => {
  it('of a Gaussian is depth x sigma x sqrt(2 pi), positive in absorption and negative in emission', () => {
    fc.assert(
      fc.property(gaussians, fc.boolean(), ({ centre, fwhm, amplitude }, dip) => {
        const c = newComponent(dip ? 'dip' : 'peak', centre, fwhm, amplitude);
        const sigma = fwhm / (2 * Math.sqrt(2 * Math.log(2)));
        const closed = (dip ? 1 : -1) * amplitude * sigma * Math.sqrt(2 * Math.PI);
        expect(equivalentWidth(c).value).toBeCloseTo(closed, 12);
      }),
    );
  });

  it.each<[string, (c: Component) => Component, number]>([
    ['a Gaussian', (c) => c, 1e-4], // its reach leaves 4e-5 of the area out
    ['a rotation profile', (c) => withCore(c, ROTATION), 1e-3],
  ])('is what the light of %s sums to', (_, shaped, tolerance) => {
    for (const kind of ['dip', 'peak'] as const) {
      const c = shaped(newComponent(kind, 500, 0.3, 0.4));
      expect(Math.abs(summed(c) / equivalentWidth(c).value - 1)).toBeLessThan(tolerance);
    }
  });

  it('of a damped profile holds the wings beyond its reach, where its depth goes as the inverse square of the distance', () => {
    const c = asDamped(newComponent('dip', 500, 0.3, 0.4));
    const near = 0.98 * c.reach; // the last of the table runs out to nothing
    const beyond = 2 * c.amplitude * profileOf(c)(c.centre + near) * (near ** 2 / c.reach);
    expect(Math.abs((summed(c) + beyond) / equivalentWidth(c).value - 1)).toBeLessThan(2e-3);
  });

  it('has no error before a fit', () => expect(equivalentWidth(newComponent('dip', 500, 0.1, 0.5)).sigma).toBeNaN());
});

describe('changing the shape', () => {
  it.each<[string, (c: Component) => Component]>([
    ['damped', asDamped],
    ['rotation', (c) => withCore(c, ROTATION)],
    ['damped and back', (c) => withCore(asDamped(c), c.core)],
  ])('to %s keeps place, depth and FWHM, and leaves the first alone', (_, change) => {
    fc.assert(
      fc.property(gaussians, ({ centre, fwhm, amplitude }) => {
        const before = newComponent('dip', centre, fwhm, amplitude);
        const kept = { ...before };
        const after = change(before);
        expect([after.centre, after.amplitude]).toEqual([centre, amplitude]);
        expect(after.fwhm).toBeCloseTo(fwhm, 12);
        const phi = profileOf(after);
        expect(phi(centre)).toBeCloseTo(1, 9);
        expect(phi(centre + fwhm / 2)).toBeCloseTo(0.5, 2);
        expect(before).toEqual(kept);
      }),
    );
  });

  it('is taken up by settle: width, area and reach follow the scale', () => {
    const c = asDamped(newComponent('dip', 500, 0.3, 0.4));
    const [fwhm, area, reach] = [c.fwhm, c.area, c.reach];
    c.scale *= 2;
    settle(c);
    expect([c.fwhm / fwhm, c.area / area, c.reach / reach].map((x) => x.toFixed(12))).toEqual(Array(3).fill((2).toFixed(12)));
  });
});

describe('profiles on samples', () => {
  const wavelength = Float64Array.from({ length: 200 }, (_, i) => 500 + i * 0.01);
  const drawn = (...list: Component[]) => {
    const dips = new Float64Array(200).fill(1);
    const peaks = new Float64Array(200);
    for (const c of list) addComponent(c, wavelength, 0, 200, dips, peaks);
    return { dips, peaks };
  };
  const one = newComponent('dip', 500.8, 0.2, 0.6);
  const other = newComponent('dip', 500.9, 0.3, 0.5);

  it('dips multiply', () => {
    const [both, a, b] = [drawn(one, other).dips, drawn(one).dips, drawn(other).dips];
    both.forEach((value, i) => expect(value).toBeCloseTo(a[i]! * b[i]!, 14));
  });

  it('peaks add', () => {
    const [p, q] = [newComponent('peak', 500.8, 0.2, 6), newComponent('peak', 500.9, 0.3, 5)];
    const [both, a, b] = [drawn(p, q).peaks, drawn(p).peaks, drawn(q).peaks];
    both.forEach((value, i) => expect(value).toBeCloseTo(a[i]! + b[i]!, 13));
  });

  it('are mirrored about their centre', () => {
    for (const c of [one, withCore(one, ROTATION), asDamped(one)]) {
      const phi = profileOf(c);
      for (let d = 0; d < c.reach; d += c.reach / 50) expect(phi(c.centre - d)).toBeCloseTo(phi(c.centre + d), 9);
    }
  });

  it('touch only the samples asked for, written from an offset', () => {
    const dips = new Float64Array(20).fill(1);
    addComponent(one, wavelength, 70, 90, dips, new Float64Array(20));
    const whole = drawn(one).dips;
    dips.forEach((value, i) => expect(value).toBe(whole[70 + i]));
  });

  it('are found by wavelength: the first sample at or beyond', () => {
    expect(indexAt(wavelength, 499)).toBe(0);
    expect(indexAt(wavelength, wavelength[70]!)).toBe(70);
    expect(indexAt(wavelength, wavelength[70]! + 1e-6)).toBe(71);
    expect(indexAt(wavelength, 600)).toBe(200);
    expect(indexAt(new Float64Array(0), 500)).toBe(0);
  });
});
