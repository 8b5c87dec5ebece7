import { normalDraws } from './draws.js';

const DRAWS = 400;
const dimension = (k: number) => Array.from({ length: DRAWS }, (_, j) => normalDraws(j, k));
const mean = (x: readonly number[]) => x.reduce((a, b) => a + b, 0) / x.length;

describe('draws', () => {
  it.each([0, 1, 5, 15, 16, 40])('of dimension %d are normal: mean 0, variance 1, a symmetric share beyond one and two sigma', (k) => {
    const x = dimension(k);
    // a low-discrepancy sequence is nearer than the 1 / sqrt(400) = 0.05 of chance
    expect(Math.abs(mean(x))).toBeLessThan(0.05);
    expect(Math.abs(mean(x.map((v) => v * v)) - 1)).toBeLessThan(0.1);
    expect(Math.abs(x.filter((v) => v > 1).length / DRAWS - 0.1587)).toBeLessThan(0.02);
    expect(Math.abs(x.filter((v) => v < -1).length / DRAWS - 0.1587)).toBeLessThan(0.02);
    expect(Math.abs(x.filter((v) => Math.abs(v) > 2).length / DRAWS - 0.0455)).toBeLessThan(0.015);
  });

  it('of different dimensions have nothing to do with each other', () => {
    for (let a = 0; a < 12; a++)
      for (let b = a + 1; b < 12; b++) {
        const [x, y] = [dimension(a), dimension(b)];
        expect(Math.abs(mean(x.map((v, j) => v * y[j]!)))).toBeLessThan(0.2); // 4 of 1 / sqrt(400)
      }
  });

  it('are the same in every run', () => expect(dimension(3)).toEqual(dimension(3)));
});
