import fc from 'fast-check';
import { cutBlocks } from './blocks.js';
import { extinctionCurve, transmission, type ExtinctionLaw } from './extinction.js';
import { brightnessTemperature, lnPlanck, planck, planckSlope, wienPeakNm } from './planck.js';
import { smoothRipple } from './ripple.js';
import { gridAround, highestPoint, meanOf, quantileOf, widthAt } from './search.js';
import { makeSmoothModel, normalSums } from './smooth-model.js';

const temperature = fc.double({ min: 100, max: 100_000, noNaN: true });
const nm = fc.double({ min: 100, max: 30_000, noNaN: true });

describe('Planck curve', () => {
  it('rises with temperature at every wavelength, and is undone by the brightness temperature', () => {
    fc.assert(
      fc.property(nm, temperature, (l, t) => {
        const value = planck(l, t);
        fc.pre(value > 1e-250);
        expect(planck(l, 1.01 * t)).toBeGreaterThan(value);
        expect(brightnessTemperature(l, value) / t).toBeCloseTo(1, 9);
        expect(Math.exp(lnPlanck(l, t)) / value).toBeCloseTo(1, 9);
      }),
    );
    expect(brightnessTemperature(500, 0)).toBeNaN();
  });

  it('has its peak where Wien says, and the slope of a difference quotient', () => {
    fc.assert(
      fc.property(nm, temperature, (l, t) => {
        const peak = wienPeakNm(t);
        expect(planck(peak, t)).toBeGreaterThan(planck(1.02 * peak, t));
        expect(planck(peak, t)).toBeGreaterThan(planck(0.98 * peak, t));
        const quotient = (lnPlanck(l, t * 1.0001) - lnPlanck(l, t / 1.0001)) / (2 * Math.log(1.0001));
        expect(planckSlope(l, t) / quotient).toBeCloseTo(1, 5);
      }),
    );
  });
});

describe('extinction', () => {
  const law = fc.constantFrom<ExtinctionLaw>('ccm89', 'odonnell94', 'fitzpatrick99');

  it('is about 1 in the visual, falls towards the red, and multiplies', () => {
    fc.assert(
      fc.property(law, fc.double({ min: 2.1, max: 5, noNaN: true }), fc.double({ min: 360, max: 2400, noNaN: true }), (one, rv, l) => {
        expect(extinctionCurve(549.5, one, rv)).toBeCloseTo(1, 1);
        expect(extinctionCurve(l, one, rv)).toBeGreaterThan(extinctionCurve(1.1 * l, one, rv));
        expect(transmission(l, 1.5, one, rv)).toBeCloseTo(transmission(l, 1, one, rv) * transmission(l, 0.5, one, rv), 12);
        expect(transmission(l, 0, one, rv)).toBe(1);
      }),
    );
  });
});

describe('smooth model', () => {
  it('sums Chebyshev products by the rule as it would one by one', () => {
    const wavelength = Float64Array.from({ length: 3000 }, (_, i) => 350 + 0.15 * i);
    const blocks = cutBlocks(wavelength);
    const model = makeSmoothModel(blocks, () => 0, 7000, 12);
    const value = Float64Array.from({ length: blocks.count }, (_, b) => Math.sin(b));
    const weight = Float64Array.from({ length: blocks.count }, (_, b) => (b % 7 === 0 ? 0 : 1 + Math.cos(b) ** 2));
    const m = model.columns;
    const { matrix, right, squares } = normalSums(model, { value, weight });
    for (let j = 0; j < m; j++) {
      for (let k = 0; k <= j; k++) {
        let plain = 0;
        for (let b = 0; b < blocks.count; b++) plain += weight[b]! * model.centre[b * m + j]! * model.centre[b * m + k]!;
        expect(matrix[j * m + k]!).toBeCloseTo(plain, 8);
      }
      let plain = 0;
      for (let b = 0; b < blocks.count; b++) plain += weight[b]! * model.centre[b * m + j]! * value[b]!;
      expect(right[j]!).toBeCloseTo(plain, 8);
    }
    expect(squares).toBeCloseTo(
      value.reduce((sum, v, b) => sum + weight[b]! * v * v, 0),
      8,
    );
  });

  it('cuts blocks that cover every sample once', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 5000 }), fc.double({ min: 1e-6, max: 1e-3, noNaN: true }), (n, step) => {
        const { count, first, edgeNm } = cutBlocks(Float64Array.from({ length: n }, (_, i) => 400 * Math.exp(i * step)));
        expect(first[0]).toBe(0);
        expect(first[count]).toBe(n);
        for (let b = 0; b < count; b++) {
          expect(first[b + 1]!).toBeGreaterThanOrEqual(first[b]!);
          expect(edgeNm[b + 1]!).toBeGreaterThanOrEqual(edgeNm[b]!);
        }
      }),
    );
  });
});

describe('ripple', () => {
  const values = (n: number, curve: (b: number) => number, noise: number) => ({
    value: Float64Array.from({ length: n }, (_, b) => curve(b) + noise * Math.sin(b * b * 12.9898)),
    weight: new Float64Array(n).fill(2 / (noise * noise)),
  });

  it('follows a wave many times its noise', () => {
    const wave = (b: number) => 0.02 * Math.sin(b / 5);
    const curve = smoothRipple(values(200, wave, 0.001));
    curve.forEach((s, b) => expect(Math.abs(s - wave(b))).toBeLessThan(0.003));
  });

  it('does not follow noise', () => {
    const curve = smoothRipple(values(200, () => 0, 0.005));
    expect(Math.sqrt(curve.reduce((sum, s) => sum + s * s, 0) / 200)).toBeLessThan(0.0015);
  });

  it('comes back to 0 where nothing is known', () => {
    const { value, weight } = values(200, () => 0.02, 0.001);
    weight.fill(0, 60);
    const curve = smoothRipple({ value, weight });
    expect(Math.abs(curve[199]!)).toBeLessThan(0.01);
    expect(smoothRipple({ value: Float64Array.of(1, 1), weight: Float64Array.of(1, 1) })).toEqual(new Float64Array(2));
  });
});

describe('search in one variable', () => {
  const parabola = (centre: number, width: number) => (u: number) => -0.5 * ((u - centre) / width) ** 2;

  it('finds peak, width, mean and quantiles of a normal distribution', () => {
    fc.assert(
      fc.property(fc.double({ min: 7.5, max: 11.5, noNaN: true }), fc.double({ min: 0.005, max: 0.2, noNaN: true }), (centre, width) => {
        const f = parabola(centre, width);
        expect(Math.abs(highestPoint(f, 7, 12) - centre)).toBeLessThan(0.05 * width + 1e-3);
        expect(widthAt(f, centre)).toBeCloseTo(width, 6);
        const grid = gridAround(f, centre, 0.8 * width, centre - 2, centre + 2);
        expect(meanOf(grid).mean).toBeCloseTo(centre, 6);
        expect(meanOf(grid).sigma / width).toBeCloseTo(1, 2);
        // spreading each point over its step widens the tails a little
        expect((quantileOf(grid, 0.975) - centre) / width).toBeCloseTo(1.96, 0);
        expect(quantileOf(grid, 0.5)).toBeCloseTo(centre, 3);
      }),
    );
  });

  it('stays inside its range', () => {
    expect(highestPoint((u) => u, 0, 1)).toBeLessThanOrEqual(1);
    const { u } = gridAround(() => 0, 5, 0.1, 4, 7);
    expect([u[0], u.at(-1)]).toEqual([4, 7]);
  });
});
