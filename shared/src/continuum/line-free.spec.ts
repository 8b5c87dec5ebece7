import { chance } from '../../../test/support/noisy-spectrum.js';
import { makeWorkspace, rejectBoxes, type Rejection } from './line-free.js';

const RULE: Rejection = { sigmasDown: 3.2, sigmasUp: 3.2, floorDown: 0, floorUp: 0, inflation: 1 };

/** White noise of `n` samples on a level of 1 with S/N 100, plus a signal in sigma. */
function workspace(n: number, seed: number, signal: (i: number) => number = () => 0) {
  const { normal } = chance(seed);
  const inverseSigma = new Float64Array(n).fill(100);
  const wavelength = Float64Array.from({ length: n }, (_, i) => 500 + i);
  const blocks = { count: 1, first: Int32Array.of(0, n), edgeNm: Float64Array.of(500, 500 + n), centreNm: Float64Array.of(500 + n / 2) };
  const space = makeWorkspace({ wavelength, flux: new Float64Array(n), inverseSigma, blocks });
  space.level.fill(1);
  for (let i = 0; i < n; i++) space.residual[i] = normal() + signal(i);
  return space;
}
const rejected = (space: ReturnType<typeof workspace>, from = 0, to = space.rejected.length) => {
  let sum = 0;
  for (let i = from; i < to; i++) sum += space.rejected[i]!;
  return sum / (to - from);
};

describe('rejection of boxes', () => {
  it('takes little of pure noise, and does not move its mean', () => {
    const space = workspace(100_000, 1);
    rejectBoxes(space, RULE);
    // two sided 3.2 sigma is 0.0014 of the boxes, at seventeen sizes, two boxes a cell: a few per cent
    expect(rejected(space)).toBeLessThan(0.08);
    let sum = 0;
    let m = 0;
    space.residual.forEach((z, i) => {
      if (space.rejected[i]) return;
      sum += z;
      m++;
    });
    expect(Math.abs(sum / m)).toBeLessThan(4 / Math.sqrt(m));
  });

  it.each([
    ['a narrow deep line', 3, -12],
    ['a wide shallow one', 200, -0.6],
    ['a wing of a quarter sigma over two thousand samples', 2000, -0.25],
    ['a peak', 10, 6],
  ])('finds %s', (_, width, depth) => {
    const space = workspace(50_000, 2, (i) => (i >= 20_000 && i < 20_000 + width ? depth : 0));
    rejectBoxes(space, RULE);
    expect(rejected(space, 20_000, 20_000 + width)).toBeGreaterThan(0.8);
    expect(rejected(space, 30_000, 50_000)).toBeLessThan(0.08);
  });

  it('does not let a deep line drag its surroundings along', () => {
    const space = workspace(20_000, 3, (i) => (i >= 10_000 && i < 10_004 ? -500 : 0));
    rejectBoxes(space, RULE);
    expect(rejected(space, 9_000, 9_900)).toBeLessThan(0.15);
    expect(rejected(space, 10_000, 10_004)).toBe(1);
  });

  it('keeps wide boxes that depart by less than the floor', () => {
    // half a sigma at S/N 100 is half a per cent
    const space = workspace(20_000, 4, (i) => (i >= 5000 && i < 7000 ? -0.5 : 0));
    rejectBoxes(space, { ...RULE, floorDown: 0.01, floorUp: 0.01 });
    expect(rejected(space, 5000, 7000)).toBeLessThan(0.05);
  });

  it('rejects bad samples always', () => {
    const space = workspace(100, 5);
    space.inverseSigma[50] = 0;
    rejectBoxes(space, RULE);
    expect(space.rejected[50]).toBe(1);
  });

  it.each([0, 1, 2, 3, 5, 7, 17])('handles %d samples', (n) => {
    const space = workspace(n, 6);
    rejectBoxes(space, RULE);
    expect(space.rejected).toHaveLength(n);
  });
});
