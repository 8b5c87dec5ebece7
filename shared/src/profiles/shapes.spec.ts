import { look } from './component.js';
import { FOUR_LN2, GAUSSIAN, GAUSSIAN_AREA, rotationShape, type Shape } from './shapes.js';

const value = (shape: Shape, u: number) => look(shape.value, shape, Math.abs(u));
const BLURS = [0.02, 0.05, 0.1, 0.2, 0.4, 0.7, 1];

/** Integral of a shape's table from one end of its reach to the other. */
function integral(shape: Shape): number {
  const steps = 4000;
  let sum = 0;
  for (let i = 0; i < steps; i++) sum += value(shape, ((i + 0.5) / steps) * shape.reach);
  return (2 * sum * shape.reach) / steps;
}

describe('Gaussian', () => {
  it('is the exponential to 1e-6 of its peak, and nothing beyond its reach', () => {
    for (let u = 0; u < 1.79; u += 0.0137) expect(Math.abs(value(GAUSSIAN, u) - Math.exp(-FOUR_LN2 * u * u))).toBeLessThan(1e-6);
    expect(value(GAUSSIAN, 1.81)).toBe(0);
  });

  it('has the area sqrt(pi / (4 ln 2)), of which its reach leaves out 2e-5', () => {
    expect(GAUSSIAN_AREA).toBeCloseTo(1.0644670194312262, 15);
    expect(Math.abs(integral(GAUSSIAN) / GAUSSIAN_AREA - 1)).toBeLessThan(4e-5);
  });
});

describe.each(BLURS)('rotation profile blurred by %d v sin i', (blur) => {
  const shape = rotationShape(blur);

  it('is 1 at the centre, a half at half its width, falls to either side and ends at its reach', () => {
    expect(value(shape, 0)).toBeCloseTo(1, 12);
    expect(value(shape, 0.5)).toBeCloseTo(0.5, 3);
    for (let u = 0.01; u < shape.reach; u += 0.01) expect(value(shape, u)).toBeLessThanOrEqual(value(shape, u - 0.01));
    expect(value(shape, shape.reach * 0.999)).toBeLessThan(2e-3);
  });

  it('has the area that it says', () => expect(Math.abs(integral(shape) / shape.area - 1)).toBeLessThan(1e-3));

  it('has the slope of its values', () => {
    const steps = 200;
    for (let u = 0; u < shape.reach - 0.1; u += 0.1) {
      let rise = 0;
      for (let i = 0; i < steps; i++) rise += look(shape.slope, shape, u + (0.1 * (i + 0.5)) / steps) * (0.1 / steps);
      expect(Math.abs(rise - (value(shape, u + 0.1) - value(shape, u)))).toBeLessThan(0.002);
    }
  });
});

describe('limits of the rotation profile', () => {
  // Gray, The Observation and Analysis of Stellar Photospheres, eq. 18.14, linear limb darkening e = 0.6 (from memory):
  // 2 (1 - e) sqrt(1 - x^2) + (pi / 2) e (1 - x^2), whose integral is pi (1 - e / 3)
  const limb = 0.6;
  const kernel = (x: number) => 2 * (1 - limb) * Math.sqrt(1 - x * x) + (Math.PI / 2) * limb * (1 - x * x);

  it('is the profile of a limb-darkened sphere where the instrument does not blur', () => {
    const shape = rotationShape(0.02);
    const half = halfWidth((x) => kernel(x) / kernel(0));
    for (let u = 0; u < 0.45 / half; u += 0.05) {
      const x = 2 * u * half;
      // a blur of a fiftieth tells where the profile bends most, near its end
      if (x < 0.9) expect(Math.abs(value(shape, u) - kernel(x) / kernel(0))).toBeLessThan(0.01);
    }
    expect(Math.abs((shape.area * 2 * half * kernel(0)) / (Math.PI * (1 - limb / 3)) - 1)).toBeLessThan(0.01);
  });

  it('is a Gaussian where the instrument blurs most', () => {
    const gap = (blur: number) => {
      const shape = rotationShape(blur);
      let most = 0;
      for (let u = 0; u < 1.3; u += 0.01) most = Math.max(most, Math.abs(value(shape, u) - value(GAUSSIAN, u)));
      return most;
    };
    expect(gap(2)).toBeLessThan(0.005);
    expect(gap(1)).toBeLessThan(0.01);
    expect(gap(0.05)).toBeGreaterThan(0.05);
    expect(Math.abs(rotationShape(2).area / GAUSSIAN_AREA - 1)).toBeLessThan(0.005);
  });

  it('keeps the light: blurring widens and lowers, the integral stays', () => {
    // the second moment of the kernel and of the blur add; for a Gaussian-like shape FWHM^2 follows the second moment
    const moment = integralOf((x) => x * x * kernel(x)) / integralOf(kernel);
    const shape = rotationShape(1.5);
    const fwhm = 2.3548 * Math.hypot(1.5, Math.sqrt(moment)); // in v sin i
    const second = secondMoment(shape) * fwhm ** 2;
    expect(Math.abs(second / (1.5 ** 2 + moment) - 1)).toBeLessThan(0.02);
  });

  it('is steeper at its edge and squarer than a Gaussian while the blur is small', () => {
    const shape = rotationShape(0.1);
    expect(value(shape, 0.3)).toBeGreaterThan(value(GAUSSIAN, 0.3));
    expect(value(shape, 0.8)).toBeLessThan(value(GAUSSIAN, 0.8));
  });
});

function halfWidth(f: (x: number) => number): number {
  let [low, high] = [0, 1];
  for (let i = 0; i < 50; i++) {
    const mid = (low + high) / 2;
    if (f(mid) > 0.5) low = mid;
    else high = mid;
  }
  return low;
}

function integralOf(f: (x: number) => number): number {
  const steps = 20_000;
  let sum = 0;
  for (let i = 0; i < steps; i++) sum += f(-1 + (2 * (i + 0.5)) / steps);
  return (2 * sum) / steps;
}

function secondMoment(shape: Shape): number {
  const steps = 4000;
  let [sum, norm] = [0, 0];
  for (let i = 0; i < steps; i++) {
    const u = ((i + 0.5) / steps) * shape.reach;
    sum += u * u * value(shape, u);
    norm += value(shape, u);
  }
  return sum / norm;
}
