import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fromOklab, lightOf, matchingFunctions, quickLight, toOklab, visibility } from './light.js';

describe('the colour of light', () => {
  it('follows the CIE 1931 observer', () => {
    // CIE 1931 2-degree observer, ISO/CIE 11664-1, values at 10-nm steps from memory; Wyman et al. state errors of a few hundredths
    const table: [number, number, number, number][] = [
      [450, 0.3362, 0.038, 1.7721],
      [500, 0.0049, 0.323, 0.272],
      [550, 0.4334, 0.995, 0.0087],
      [600, 1.0622, 0.631, 0.0008],
      [650, 0.2835, 0.107, 0],
    ];
    for (const [nm, ...xyz] of table) {
      const fitted = matchingFunctions(nm);
      for (const c of [0, 1, 2]) expect(Math.abs(fitted[c]! - xyz[c]!)).toBeLessThan(0.05);
    }
  });

  it('can always be shown: every component lies within the screen', () => {
    fc.assert(
      fc.property(fc.double({ min: 300, max: 1100, noNaN: true }), fc.constantFrom(0.7, 0.77, 0.8, 0.81), (nm, cap) => {
        for (const c of lightOf(nm, cap)) {
          expect(c).toBeGreaterThanOrEqual(0);
          expect(c).toBeLessThanOrEqual(1);
        }
      }),
    );
  });

  it('is red at 650, green at 540 and blue-violet at 440 nm', () => {
    const [red, green, blue] = [650, 540, 440].map((nm) => lightOf(nm, 0.8));
    expect(red![0]).toBeGreaterThan(2 * Math.max(red![1], red![2]));
    expect(green![1]).toBeGreaterThan(2 * Math.max(green![0], green![2]));
    expect(blue![2]).toBeGreaterThan(2 * Math.max(blue![0], blue![1]));
  });

  it('comes from the table as from the formula', () => {
    for (const nm of [400, 500.5, 589, 700]) quickLight(nm, 0.8).forEach((c, i) => expect(c).toBeCloseTo(lightOf(nm, 0.8)[i]!, 6));
  });

  it('goes to OKLab and back', () => {
    const unit = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(unit, unit, unit, (r, g, b) => {
        fromOklab(toOklab([r, g, b])).forEach((v, i) => expect(v).toBeCloseTo([r, g, b][i]!, 5)); // the matrices are given to ten digits
      }),
    );
  });

  it('has grey without chroma and white at lightness 1 (Ottosson 2020)', () => {
    const [lightness, a, b] = toOklab([1, 1, 1]);
    expect(lightness).toBeCloseTo(1, 4);
    expect(Math.hypot(a, b)).toBeLessThan(1e-4);
  });

  it('counts as seen between 390 and 690 nm only', () => {
    expect([350, 390, 550, 690, 720].map(visibility)).toEqual([0, 1, 1, 1, 0]);
  });
});
