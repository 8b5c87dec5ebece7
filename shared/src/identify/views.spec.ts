import fc from 'fast-check';
import { copies, dip, grid, samples } from '../../../test/support/blends.js';
import { featureAtNm, inOrder } from '../../../test/support/features.js';
import { equivalentWidth, fitBlend } from '../profiles/index.js';
import { coverageOf, dopplerFactor, featureAt, velocityOf } from './views.js';

describe('velocities', () => {
  const velocities = fc.double({ min: -1e5, max: 1e5, noNaN: true });
  it('go there and back', () => {
    fc.assert(fc.property(velocities, (v) => expect(velocityOf(500 * dopplerFactor(v), 500)).toBeCloseTo(v, 6)));
  });

  it('are relativistic: their factors multiply, and a half of light makes the root of three', () => {
    expect(dopplerFactor(0.5 * 299_792.458)).toBeCloseTo(Math.sqrt(3), 12);
    fc.assert(fc.property(velocities, (v) => expect(dopplerFactor(v) * dopplerFactor(-v)).toBeCloseTo(1, 12)));
  });
});

describe('coverage', () => {
  const wavelength = grid(500, 510, 0.01);
  const weight = new Float64Array(wavelength.length).fill(100 ** 2);
  for (let i = 400; i < 500; i++) weight[i] = 0;
  const coverage = coverageOf(wavelength, weight, 20_000, 4.5);

  it('has the error of an equivalent width that a fit of place, depth and width finds, but for what place and width cost', () => {
    const line = dip(502, 0.06, 0.05);
    const [fitted] = copies([line]);
    fitBlend(samples([line], 100, undefined, wavelength), [fitted!], [], { narrowest: 0.01, widest: 1 });
    // with the width free, a Gaussian's area is known to sqrt(3 / 2) times less (Landman, Roussel-Dupre & Tanigawa 1982, from memory)
    const ratio = equivalentWidth(fitted!).sigma / coverage.sigmaW(502, 0.06);
    expect(ratio).toBeGreaterThan(0.95);
    expect(ratio).toBeLessThan(1.3);
  });

  it('grows with the root of the width and falls with the signal to noise', () => {
    expect(coverage.sigmaW(502, 0.08) / coverage.sigmaW(502, 0.02)).toBeCloseTo(2, 6);
    const worse = coverageOf(
      wavelength,
      weight.map((w) => w / 4),
      20_000,
      4.5,
    );
    expect(worse.sigmaW(502, 0.05) / coverage.sigmaW(502, 0.05)).toBeCloseTo(2, 6);
  });

  it('is none outside, in gaps and where the spectrum ends within the line', () => {
    expect([499.9, 510.1, 504.5, 500.005].map((nm) => coverage.sigmaW(nm, 0.05))).toEqual([NaN, NaN, NaN, NaN]);
    expect(coverage.sigmaW(503.9, 0.05)).toBeGreaterThan(0);
    expect(coverage.sigmaW(505.1, 0.05)).toBeGreaterThan(0);
  });

  it('knows its ends and its resolution element', () => {
    expect([coverage.fromNm, coverage.toNm, coverage.threshold]).toEqual([500, wavelength.at(-1), 4.5]);
    expect(coverage.elementV).toBeCloseTo(14.99, 2);
  });
});

it('a feature is found by wavelength: the first at or beyond', () => {
  const features = inOrder([505, 501, 503].map((nm) => featureAtNm(nm, 0.01, 10)));
  expect([500, 501, 501.1, 505, 506].map((nm) => featureAt(features, nm))).toEqual([0, 0, 1, 2, 3]);
});
