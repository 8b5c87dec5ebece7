import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { modelOver } from './curve-data.js';
import { drawnProfile, type ProfileNumbers } from './profile.js';

const feature = (areaRatio: number, parts: Partial<ProfileNumbers> = {}): ProfileNumbers => {
  const [fwhmNm, depth] = [0.2, 0.5];
  return { wavelengthNm: 500, fwhmNm, depth, kind: 'dip', equivalentWidthNm: areaRatio * fwhmNm * depth, ...parts };
};

describe('a profile drawn from its measurements', () => {
  it('has the measured equivalent width and half its depth at half its width', () => {
    // 0.9253 pure rotation, 1.0645 Gaussian, 1.5292 Lorentzian cut at 12 FWHM
    fc.assert(
      fc.property(fc.double({ min: 0.9253, max: 1.5292, noNaN: true }), (ratio) => {
        const f = feature(ratio);
        const profile = drawnProfile(f);
        const step = profile.reachNm / 20_000;
        let area = 0;
        for (let nm = f.wavelengthNm - profile.reachNm; nm < f.wavelengthNm + profile.reachNm; nm += step) area += profile.at(nm) * step;
        // a share of wings below 2 % is drawn without them
        expect(Math.abs((area * f.depth) / f.equivalentWidthNm - 1)).toBeLessThan(0.012);
        expect(profile.at(f.wavelengthNm)).toBeCloseTo(1, 9);
        expect(profile.at(f.wavelengthNm + f.fwhmNm / 2)).toBeCloseTo(0.5, 3);
      }),
    );
  });

  it('draws a Gaussian where numbers are missing', () => {
    expect(drawnProfile(feature(NaN)).at(500.1)).toBeCloseTo(0.5, 9);
  });
});

describe('the model', () => {
  const wavelength = Float64Array.of(499, 500, 501);
  it('multiplies dips', () => {
    expect(modelOver(wavelength, [feature(1.0645), feature(1.0645, { depth: 0.2 })])[1]).toBeCloseTo(0.5 * 0.8, 6);
  });
  it('adds peaks, whose depth is negative', () => {
    expect(modelOver(wavelength, [feature(1.0645, { kind: 'peak', depth: -2 })])[1]).toBeCloseTo(3, 6);
  });
});
