import fc from 'fast-check';
import { chebyshevInto, chebyshevSum } from './chebyshev.js';

describe('Chebyshev series', () => {
  it('is the cosine of a multiple angle', () => {
    fc.assert(
      fc.property(fc.double({ min: -1, max: 1, noNaN: true }), (x) => {
        const values = new Float64Array(26);
        chebyshevInto(values, x, 24, 1);
        for (let k = 0; k <= 24; k++) expect(values[k + 1]!).toBeCloseTo(Math.cos(k * Math.acos(x)), 12);
        expect(values[0]).toBe(0); // before the offset nothing is written
      }),
    );
  });

  it('sums as term by term', () => {
    const coefficients = fc.array(fc.double({ min: -5, max: 5, noNaN: true }), { maxLength: 15 });
    fc.assert(
      fc.property(coefficients, fc.double({ min: -1, max: 1, noNaN: true }), (c, x) => {
        const plain = c.reduce((sum, a, k) => sum + a * Math.cos(k * Math.acos(x)), 0);
        expect(chebyshevSum(c, x)).toBeCloseTo(plain, 11);
      }),
    );
    expect(chebyshevSum([], 0.3)).toBe(0);
    expect(chebyshevSum([4], 0.3)).toBe(4);
  });

  it('writes only the orders asked for', () => {
    const out = new Float64Array(3).fill(9);
    chebyshevInto(out, 0.5, 0);
    expect(Array.from(out)).toEqual([1, 9, 9]);
  });
});
