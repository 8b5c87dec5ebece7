import fc from 'fast-check';
import { featureAtNm, inOrder } from '../../../test/support/features.js';
import { correlate, peaksOf, type VelocityGrid } from './correlate.js';
import { dopplerFactor } from './views.js';

const GRID: VelocityGrid = { from: -300, step: 1, count: 601 };
const REST = [500.1, 501.7, 503.2, 507.9, 511.3, 514.6];
const at = (v: number, extra: readonly number[] = []) =>
  inOrder([...REST.map((nm) => nm * dopplerFactor(v)), ...extra].map((nm) => featureAtNm(nm, 0.01, 10)));
const template = { wavelength: REST, weight: REST.map(() => 1) };

describe('correlation of features with a template', () => {
  it('is highest where all lines fall on features, and 1 there', () => {
    fc.assert(
      fc.property(fc.double({ min: -250, max: 250, noNaN: true }), (v) => {
        const features = at(v);
        const [best] = peaksOf(
          correlate(
            features,
            features.map(() => 1),
            features.map(() => 2),
            template,
            GRID,
          ),
          GRID,
          20,
          1,
        );
        expect(Math.abs(best!.velocity - v)).toBeLessThan(0.3);
        expect(best!.height).toBeGreaterThan(0.95);
        expect(best!.height).toBeLessThan(1.05);
      }),
    );
  });

  it('falls with features that no line explains, as the cosine of an angle does', () => {
    const features = at(40, [500.9, 502.5, 505, 506, 509, 512.9]);
    const [best] = peaksOf(
      correlate(
        features,
        features.map(() => 1),
        features.map(() => 2),
        template,
        GRID,
      ),
      GRID,
      20,
      1,
    );
    expect(best!.height).toBeCloseTo(6 / Math.sqrt(6 * 12), 1);
  });

  it('gives features and lines the say that their weights do', () => {
    const features = inOrder([featureAtNm(REST[0]! * dopplerFactor(-50), 0.01, 10), featureAtNm(REST[1]! * dopplerFactor(80), 0.01, 10)]);
    const best = (weight: number[]) => peaksOf(correlate(features, weight, [2, 2], template, GRID), GRID, 20, 1)[0]!.velocity;
    expect(best([2, 1])).toBeCloseTo(-50, 0);
    expect(best([1, 2])).toBeCloseTo(80, 0);
    expect(Math.max(...correlate(features, [0, 0], [2, 2], template, GRID))).toBe(0);
  });

  it('of nothing is nothing', () => {
    expect([...correlate([], [], [], template, GRID)].every((v) => v === 0)).toBe(true);
    expect(peaksOf(new Float64Array(GRID.count), GRID, 5, 3)).toEqual([]);
  });
});

describe('peaks', () => {
  const score = Float64Array.from(
    { length: 601 },
    (_, i) =>
      Math.exp(-0.5 * ((i - 100) / 4) ** 2) + 0.6 * Math.exp(-0.5 * ((i - 130.4) / 4) ** 2) + 0.3 * Math.exp(-0.5 * ((i - 400) / 4) ** 2),
  );

  it('come highest first, between the samples of the grid, and apart', () => {
    const peaks = peaksOf(score, GRID, 20, 5);
    expect(peaks.map(({ velocity }) => velocity.toFixed(0))).toEqual(['-200', '-170', '100']);
    expect(peaks[1]!.velocity).toBeCloseTo(-169.6, 1);
    expect(peaksOf(score, GRID, 50, 5).map(({ velocity }) => velocity.toFixed(0))).toEqual(['-200', '100']);
    expect(peaksOf(score, GRID, 20, 1)).toHaveLength(1);
  });

  it('have a significance above the scatter of the score', () => {
    const noisy = score.map((v, i) => v + 0.01 * Math.sin(i * 12.9898) * 43.7);
    const [best, ...rest] = peaksOf(noisy, GRID, 20, 5);
    expect(best!.significance).toBeGreaterThan(rest[0]!.significance);
  });
});
