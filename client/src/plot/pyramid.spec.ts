import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { buildPyramid, columnsOf, extremes, lowerBound, nearestIndex } from './pyramid.js';

const flat = (n: number) => new Float32Array(n).fill(1);
const grid = (n: number) => Float64Array.from({ length: n }, (_, i) => 400 + i * 0.001);

describe('extremes of a stretch', () => {
  it('are those of a plain scan, whatever the stretch and whatever is masked', () => {
    const cases = fc.record({
      values: fc.array(fc.float({ min: -10, max: 10, noNaN: true }), { minLength: 1, maxLength: 700 }),
      mask: fc.array(fc.boolean(), { minLength: 700, maxLength: 700 }),
      a: fc.nat(700),
      b: fc.nat(700),
    });
    fc.assert(
      fc.property(cases, ({ values, mask, a, b }) => {
        const bad = Uint8Array.from(values, (_, i) => Number(mask[i]));
        const [from, to] = [Math.min(a, b, values.length), Math.min(Math.max(a, b), values.length)];
        const out = new Float64Array(2);
        extremes(buildPyramid(Float32Array.from(values), bad), from, to, out);
        const good = values.slice(from, to).filter((_, i) => !bad[from + i]);
        expect([...out]).toEqual([Math.min(...good), Math.max(...good)].map((v) => Math.fround(v)));
      }),
    );
  });

  it('count NaN for nothing', () => {
    const out = new Float64Array(2);
    extremes(buildPyramid(Float32Array.of(NaN, 2, NaN, 3), new Uint8Array(4)), 0, 4, out);
    expect([...out]).toEqual([2, 3]);
  });
});

describe('columns', () => {
  it('keep a dip of a single sample among 200 000, wherever it lies and however few columns there are', () => {
    const n = 200_000;
    const wavelength = grid(n);
    fc.assert(
      fc.property(fc.nat(n - 1), fc.integer({ min: 1, max: 3000 }), (at, columns) => {
        const flux = flat(n);
        flux[at] = 0.25;
        const { low } = columnsOf(wavelength, buildPyramid(flux, new Uint8Array(n)), wavelength[0]!, wavelength[n - 1]!, columns);
        expect(Math.min(...low)).toBe(0.25);
        expect(low.filter((v) => v === 0.25)).toHaveLength(1);
      }),
      { numRuns: 40 },
    );
  });

  it('are NaN where nothing is good', () => {
    const bad = new Uint8Array(100).fill(1, 50);
    const { low } = columnsOf(grid(100), buildPyramid(flat(100), bad), 400, 400.099, 2);
    expect(low[0]).toBe(1);
    expect(low[1]).toBeNaN();
  });
});

describe('look-up', () => {
  it('finds the first value not below, and the nearest', () => {
    const values = [1, 2, 4, 8];
    expect([0, 1, 3, 9].map((x) => lowerBound(values, x))).toEqual([0, 0, 2, 4]);
    expect([0, 2.9, 3.1, 99].map((x) => nearestIndex(values, x))).toEqual([0, 1, 2, 3]);
    expect(nearestIndex([], 1)).toBe(-1);
  });
});
