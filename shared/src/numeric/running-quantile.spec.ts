import fc from 'fast-check';
import { runningMedian, runningQuantile } from './running-quantile.js';

/** The definition, by sorting every window. */
function bySorting(values: Float64Array, window: number, p: number): Float64Array {
  const half = Math.min(Math.floor(window / 2), (values.length - 1) >> 1);
  const size = 2 * half + 1;
  return values.map((_, i) => {
    const from = Math.max(0, Math.min(values.length - size, i - half));
    return values.slice(from, from + size).sort()[Math.round(p * (size - 1))]!;
  });
}

describe('running quantile', () => {
  it('is what sorting every window gives, ties and all', () => {
    const values = fc.array(fc.oneof(fc.integer({ min: 0, max: 4 }), fc.double({ min: 0, max: 5, noNaN: true })), {
      minLength: 1,
      maxLength: 120,
    });
    fc.assert(
      fc.property(values, fc.integer({ min: 1, max: 80 }), fc.double({ min: 0, max: 1, noNaN: true }), (list, window, p) => {
        const array = Float64Array.from(list, (x) => x + 0);
        expect(Array.from(runningQuantile(array, window, p))).toEqual(Array.from(bySorting(array, window, p)));
      }),
      { numRuns: 300 },
    );
  });

  it('handles nothing, one sample, and a window longer than the array', () => {
    expect(runningMedian(new Float64Array(0), 5)).toHaveLength(0);
    expect(Array.from(runningMedian(Float64Array.of(7), 5))).toEqual([7]);
    expect(Array.from(runningMedian(Float64Array.of(3, 1, 2), 99))).toEqual([2, 2, 2]);
  });

  it('looks past NaN', () => {
    expect(Array.from(runningMedian(Float64Array.of(NaN, 1, NaN, 2, 3, NaN), 3))).toEqual([2, 2, 2, 2, 2, 2]);
    expect(Array.from(runningMedian(Float64Array.of(NaN, NaN), 3))).toEqual([NaN, NaN]);
  });

  it('costs about the same for a window ten times as long', () => {
    const values = Float64Array.from({ length: 60_000 }, (_, i) => Math.sin(i * i));
    const fastest = (window: number) => {
      let best = Infinity;
      for (let run = 0; run < 7; run++) {
        const before = performance.now();
        runningMedian(values, window);
        best = Math.min(best, performance.now() - before);
      }
      return best;
    };
    fastest(51);
    // a cost growing with the window would be a factor of ten; sorting alone, log(510) / log(51), allows for 1.6
    expect(fastest(511)).toBeLessThan(3 * fastest(51));
  });
});
