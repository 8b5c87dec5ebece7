import fc from 'fast-check';
import { C_KM_PER_S } from '../units/index.js';
import { centralDepth, growthWidth, saturation } from './growth.js';

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });

/** F(tau) by its series, sqrt(pi) / 2 times the sum of (-1)^(n+1) tau^n / (n! sqrt(n)); good to rounding for tau below 10. */
function series(tau: number): number {
  let [sum, term] = [0, 1];
  for (let n = 1; n < 80; n++) {
    term *= tau / n;
    sum += (n % 2 ? term : -term) / Math.sqrt(n);
  }
  return (sum * Math.sqrt(Math.PI)) / 2;
}

describe('saturation of a Gaussian absorber', () => {
  it('is its series', () => {
    // interpolated between 50 values a decade
    for (let log = -6; log < 1; log += 0.013) expect(Math.abs(saturation(10 ** log) / series(10 ** log) - 1)).toBeLessThan(1e-4);
  });

  it('is sqrt(pi) tau / 2 while thin', () => {
    for (const tau of [1e-9, 1e-6, 9e-5]) expect(Math.abs(saturation(tau) / ((tau * Math.sqrt(Math.PI)) / 2) - 1)).toBeLessThan(1e-4);
  });

  it('grows as the root of ln tau when saturated', () => {
    // asymptotic: sqrt(ln tau) (1 + 0.2886 / ln tau - 0.1335 / ln^2 tau), 0.2886 being half of Euler's constant (Spitzer 1978, from memory)
    for (const tau of [1e3, 1e5, 1e7]) {
      const ln = Math.log(tau);
      expect(Math.abs(saturation(tau) / (Math.sqrt(ln) * (1 + 0.288608 / ln - 0.2472 / ln ** 2)) - 1)).toBeLessThan(0.005);
    }
  });

  it('never falls, across the ends of its table too', () => {
    for (let log = -6; log < 8.5; log += 0.01) expect(saturation(10 ** (log + 0.01))).toBeGreaterThan(saturation(10 ** log));
  });
});

describe('equivalent width', () => {
  it('of a thin line is W / lambda = 8.85e-13 N f lambda, lambda in cm, damped or not', () => {
    fc.assert(
      fc.property(between(300, 900), between(0.01, 1), between(0.5, 20), between(0, 1e9), (nm, f, b, gamma) => {
        const column = 1e-4 / centralDepth(1, f, nm, b); // that of an optical depth of 1e-4
        const thin = 8.8525e-13 * column * f * (nm * 1e-7) * nm;
        expect(Math.abs(growthWidth(column, f, nm, b, gamma) / thin - 1)).toBeLessThan(3e-4);
      }),
    );
  });

  it('lies between that of either part alone and their sum', () => {
    fc.assert(
      fc.property(between(9, 20), between(0.01, 1), between(0.5, 20), between(1e6, 1e9), (logN, f, b, gamma) => {
        const [both, core] = [growthWidth(10 ** logN, f, 500, b, gamma), growthWidth(10 ** logN, f, 500, b, 0)];
        expect(both).toBeGreaterThanOrEqual(core);
        const thin = ((500 * b) / C_KM_PER_S) * Math.sqrt(Math.PI) * centralDepth(10 ** logN, f, 500, b);
        expect(both).toBeLessThanOrEqual(thin * 1.001);
      }),
    );
  });

  it('scales with wavelength when Doppler parameter and optical depth stay', () => {
    expect(growthWidth(1e12, 0.5, 800, 3, 0) / growthWidth(2e12, 0.5, 400, 3, 0)).toBeCloseTo(2, 9);
  });

  it('of nothing is nothing', () => {
    expect(growthWidth(0, 0.5, 500, 3, 1e8)).toBe(0);
    expect(growthWidth(1e12, 0, 500, 3, 1e8)).toBe(0);
  });
});
