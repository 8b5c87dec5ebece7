import fc from 'fast-check';
import { faddeevaInto, scaledErfc, voigtFwhm, voigtH, voigtProfile } from './faddeeva.js';

const w = (x: number, y: number) => {
  const out = new Float64Array(2);
  faddeevaInto(out, x, y);
  return { re: out[0]!, im: out[1]! };
};
const x = fc.double({ min: -40, max: 40, noNaN: true });
const y = fc.double({ min: 1e-6, max: 40, noNaN: true });

describe('Faddeeva function', () => {
  it('is one at the origin and mirrors about the imaginary axis', () => {
    expect(w(0, 0).re).toBeCloseTo(1, 15);
    fc.assert(
      fc.property(x, y, (at, height) => {
        expect(w(-at, height).re).toBe(w(at, height).re);
        expect(w(-at, height).im + w(at, height).im).toBe(0);
      }),
    );
  });

  it("obeys its differential equation w' = -2 z w + 2i / sqrt(pi) across all regions", () => {
    fc.assert(
      fc.property(x, y, (at, height) => {
        const h = 1e-4 * Math.max(1, Math.hypot(at, height) * 0.1);
        const slope = (w(at + h, height).re - w(at - h, height).re) / (2 * h);
        const { re, im } = w(at, height);
        // central differences: h^2 |w'''| / 6 and rounding / h, both far below 1e-7 of 1
        expect(Math.abs(slope - 2 * (height * im - at * re))).toBeLessThan(1e-7);
      }),
      { numRuns: 500 },
    );
  });

  it('has no step where one method hands over to another', () => {
    for (let angle = 0; angle <= 90; angle += 1) {
      const c = Math.cos((angle * Math.PI) / 180);
      const s = Math.max(1e-9, Math.sin((angle * Math.PI) / 180));
      for (const radius of [8, Math.sqrt(200), Math.sqrt(1000), 1000]) {
        const inside = w(radius * (1 - 1e-12) * c, radius * (1 - 1e-12) * s).re;
        const outside = w(radius * (1 + 1e-12) * c, radius * (1 + 1e-12) * s).re;
        expect(Math.abs(outside / inside - 1)).toBeLessThan(2e-11); // 1e-12 of distance, times the power of two of the wings
      }
    }
  });

  it('keeps the Lorentz wing for any small damping: H -> a / (sqrt(pi) u^2)', () => {
    fc.assert(
      fc.property(fc.double({ min: -12, max: -2, noNaN: true }), fc.double({ min: 30, max: 3000, noNaN: true }), (exponent, u) => {
        const a = 10 ** exponent;
        // next term of the asymptotic series: 3 / (2 u^2)
        expect(Math.abs((voigtH(a, u) * Math.sqrt(Math.PI) * u * u) / a - 1)).toBeLessThan(2 / (u * u) + 1e-12);
      }),
    );
  });

  it('gives exp(x^2) erfc(x) its values at 0, 1 and far out', () => {
    expect(scaledErfc(0)).toBeCloseTo(1, 15);
    expect(scaledErfc(1)).toBeCloseTo(0.427583576155807, 14); // Abramowitz & Stegun table 7.2
    expect(scaledErfc(1e4) * 1e4 * Math.sqrt(Math.PI)).toBeCloseTo(1, 8);
  });

  it('narrows to a Gaussian and to a Lorentzian', () => {
    expect(voigtProfile(0.3, 0, 0.2)).toBeCloseTo(0.2 / (Math.PI * (0.09 + 0.04)), 14);
    expect(voigtFwhm(0, 0.2)).toBe(0.4);
    expect(voigtFwhm(0.1, 0)).toBeCloseTo(2 * Math.sqrt(2 * Math.LN2) * 0.1, 14);
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 10, noNaN: true }), fc.double({ min: 0.001, max: 10, noNaN: true }), (sigma, gamma) => {
        const width = voigtFwhm(sigma, gamma);
        expect(voigtProfile(width / 2, sigma, gamma) / voigtProfile(0, sigma, gamma)).toBeCloseTo(0.5, 12);
      }),
    );
  });
});
