import fc from 'fast-check';
import { madSigma, median, packNumbers, quantile, quantileInPlace, selectInPlace } from './select.js';

const numbers = (options: { minLength?: number } = {}) =>
  fc.float64Array({ noNaN: true, noDefaultInfinity: true, maxLength: 300, ...options });

describe('order statistics', () => {
  it('selects what sorting puts there, for any values and rank', () => {
    fc.assert(
      fc.property(numbers({ minLength: 1 }), fc.nat(), (values, seed) => {
        const k = seed % values.length;
        // 0 and -0 are equal to a comparison and in any order
        expect(selectInPlace(values.slice(), k) === values.slice().sort()[k]).toBe(true);
      }),
    );
  });

  it('leaves smaller values on the left and larger ones on the right, and touches nothing outside the range', () => {
    fc.assert(
      fc.property(numbers({ minLength: 5 }), (values) => {
        const copy = values.slice();
        const from = 1;
        const to = values.length - 1;
        const k = (from + to) >> 1;
        const found = selectInPlace(copy, k, from, to);
        for (let i = from; i < k; i++) expect(copy[i]!).toBeLessThanOrEqual(found);
        for (let i = k; i < to; i++) expect(copy[i]!).toBeGreaterThanOrEqual(found);
        expect(copy[0]).toBe(values[0]);
        expect(copy[to]).toBe(values[to]);
      }),
    );
  });

  it('survives long runs of equal values and sorted input', () => {
    expect(selectInPlace(new Float64Array(10_000).fill(3), 5000)).toBe(3);
    const rising = Float64Array.from({ length: 10_000 }, (_, i) => i);
    expect(selectInPlace(rising.slice(), 1234)).toBe(1234);
    expect(selectInPlace(rising.slice().reverse(), 1234)).toBe(1234);
  });

  it('interpolates quantiles between order statistics', () => {
    expect(quantile([1, 2, 3, 4], 0.5)).toBe(2.5);
    expect(quantile([4, 1, 3, 2], 0.25)).toBe(1.75);
    expect(quantile([7], 0.9)).toBe(7);
    expect(quantile([1, 2, 3], 0)).toBe(1);
    expect(quantile([1, 2, 3], 1)).toBe(3);
  });

  it('lets quantiles rise with p and stay within the values', () => {
    fc.assert(
      fc.property(
        numbers({ minLength: 1 }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        (v, p, q) => {
          const low = quantile(v, Math.min(p, q));
          const high = quantile(v, Math.max(p, q));
          const sorted = v.slice().sort();
          // interpolation rounds in the last digit
          const slack = 1e-12 * Math.max(Math.abs(sorted[0]!), Math.abs(sorted.at(-1)!));
          expect(low - slack).toBeLessThanOrEqual(high);
          expect(low).toBeGreaterThanOrEqual(sorted[0]! - slack);
          expect(high).toBeLessThanOrEqual(sorted.at(-1)! + slack);
        },
      ),
    );
  });

  it('skips NaN, and gives NaN where there is nothing', () => {
    expect(median([NaN, 3, NaN, 1, 2])).toBe(2);
    expect(median([])).toBeNaN();
    expect(median([NaN])).toBeNaN();
    expect(madSigma([NaN, NaN])).toBeNaN();
    expect(quantileInPlace(new Float64Array(3), 0, 0.5)).toBeNaN();
    const out = new Float64Array(4);
    expect(packNumbers([NaN, 5, NaN, 6], out)).toBe(2);
    expect(Array.from(out.subarray(0, 2))).toEqual([5, 6]);
  });

  it('moves and scales the robust sigma with the values', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: 1, maxLength: 60 }),
        fc.integer({ min: -50, max: 50 }),
        (v, shift) => {
          // integers and a factor of two keep the arithmetic exact
          expect(madSigma(v.map((x) => 2 * x + shift))).toBe(2 * madSigma(v));
        },
      ),
    );
  });
});
