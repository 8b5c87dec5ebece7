import fc from 'fast-check';
import { choleskyInPlace, choleskySolve } from './linear.js';

/** A symmetric positive definite matrix: B B^T plus a little on the diagonal, row-major. */
const positiveDefinite = (n: number) =>
  fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: n * n, maxLength: n * n }).map((b) => {
    const a = new Float64Array(n * n);
    for (let i = 0; i < n; i++)
      for (let j = 0; j < n; j++) {
        for (let k = 0; k < n; k++) a[i * n + j]! += b[i * n + k]! * b[j * n + k]!;
        if (i === j) a[i * n + j]! += 0.1;
      }
    return a;
  });
const systems = fc.integer({ min: 1, max: 8 }).chain((n) =>
  fc.record({
    n: fc.constant(n),
    a: positiveDefinite(n),
    x: fc.array(fc.double({ min: -10, max: 10, noNaN: true }), { minLength: n, maxLength: n }),
  }),
);
const times = (a: Float64Array, x: ArrayLike<number>, n: number) =>
  Float64Array.from({ length: n }, (_, i) => {
    let sum = 0;
    for (let j = 0; j < n; j++) sum += a[i * n + j]! * x[j]!;
    return sum;
  });

describe('Cholesky factor', () => {
  it('times its transpose is the matrix', () => {
    fc.assert(
      fc.property(systems, ({ n, a }) => {
        const l = a.slice();
        expect(choleskyInPlace(l, n)).toBe(true);
        for (let i = 0; i < n; i++)
          for (let j = 0; j <= i; j++) {
            let sum = 0;
            for (let k = 0; k <= j; k++) sum += l[i * n + k]! * l[j * n + k]!;
            expect(Math.abs(sum - a[i * n + j]!)).toBeLessThan(1e-12 * (1 + Math.abs(a[i * n + j]!)) * 10);
          }
      }),
    );
  });

  it('solves linear equations', () => {
    fc.assert(
      fc.property(systems, ({ n, a, x }) => {
        const l = a.slice();
        const b = times(a, x, n);
        choleskyInPlace(l, n);
        choleskySolve(l, n, b);
        // condition numbers go to 1e4 here: sixteen digits less four, with room
        for (let i = 0; i < n; i++) expect(Math.abs(b[i]! - x[i]!)).toBeLessThan(1e-9);
      }),
    );
  });

  it('is refused for what is not positive definite', () => {
    expect(choleskyInPlace(Float64Array.of(1, 2, 2, 1), 2)).toBe(false);
    expect(choleskyInPlace(Float64Array.of(0), 1)).toBe(false);
    expect(choleskyInPlace(Float64Array.of(1, NaN, NaN, 1), 2)).toBe(false);
    expect(choleskyInPlace(Float64Array.of(-4), 1)).toBe(false);
  });

  it('of nothing is nothing', () => expect(choleskyInPlace(new Float64Array(0), 0)).toBe(true));
});
