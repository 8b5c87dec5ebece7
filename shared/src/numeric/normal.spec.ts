import fc from 'fast-check';
import { erf, erfc, normalCdf, normalDensity, normalQuantile, truncatedNormal } from './normal.js';

describe('normal distribution', () => {
  // Abramowitz & Stegun 1964, tables 7.1 and 7.3, and DLMF 7; digits from memory, the last ones seen in 40-digit evaluations
  it.each([
    [0.1, 0.1124629160182849],
    [0.5, 0.5204998778130465],
    [1, 0.8427007929497149],
    [2, 0.9953222650189527],
  ])('erf(%d)', (x, value) => expect(Math.abs(erf(x) / value - 1)).toBeLessThan(4e-16));

  it.each([
    [0.5, 0.4795001221869535],
    [3, 2.209049699858544e-5],
    [10, 2.088487583762545e-45],
  ])('erfc(%d)', (x, value) => expect(Math.abs(erfc(x) / value - 1)).toBeLessThan(1e-14));

  it('is odd, adds to one, and rises', () => {
    fc.assert(
      fc.property(fc.double({ min: -6, max: 6, noNaN: true }), (x) => {
        expect(erf(-x)).toBe(-erf(x));
        expect(Math.abs(erf(x) + erfc(x) - 1)).toBeLessThan(4e-16);
        expect(normalCdf(x)).toBeLessThanOrEqual(normalCdf(x + 0.01));
      }),
    );
  });

  it('inverts its distribution function, far into the tails', () => {
    fc.assert(
      fc.property(fc.double({ min: -300, max: -0.01, noNaN: true }), (exponent) => {
        const p = 10 ** exponent;
        // the density's steepness turns rounding of z into z^2 roundings of p
        const z = normalQuantile(p);
        expect(Math.abs(normalCdf(z) / p - 1)).toBeLessThan(1e-14 * (1 + z * z));
      }),
    );
    expect(normalQuantile(0.975)).toBeCloseTo(1.959963984540054, 14); // NIST/SEMATECH e-Handbook, 1.3.6.7.1
    expect(normalQuantile(0.5)).toBeCloseTo(0, 15);
    expect([normalQuantile(0), normalQuantile(1), normalQuantile(2)]).toEqual([-Infinity, Infinity, NaN]);
  });

  it('gives mean and variance of a truncated deviate as summing its density does', () => {
    fc.assert(
      fc.property(fc.double({ min: -4, max: 0, noNaN: true }), fc.double({ min: 0.5, max: 4, noNaN: true }), (low, length) => {
        const high = low + length;
        const steps = 4000;
        const [mass, first, second] = [0, 1, 2].map((power) => {
          let sum = 0;
          for (let i = 0; i < steps; i++) {
            const z = low + ((i + 0.5) / steps) * length;
            sum += normalDensity(z) * z ** power;
          }
          return (sum * length) / steps;
        }) as [number, number, number];
        const { mean, variance } = truncatedNormal(low, high);
        // midpoint rule of 4000 steps over at most 4: 1e-7
        expect(mean).toBeCloseTo(first / mass, 6);
        expect(variance).toBeCloseTo(second / mass - (first / mass) ** 2, 6);
      }),
      { numRuns: 30 },
    );
  });
});
