import { describe, expect, it } from 'vitest';
import { columnBars, extremesPath, isDense, lightPath, pixelEdges, stepPath, xOf, yOf, type Frame, type Pen } from './curve-paths.js';
import { buildPyramid, columnsOf } from './pyramid.js';

const frame: Frame = { left: 0, top: 0, width: 100, height: 100, fromNm: 0, toNm: 10, low: 0, high: 1 };

/** Writes down what is drawn. */
class Recorder implements Pen {
  readonly strokes: [number, number][][] = [];
  moveTo(x: number, y: number) {
    this.strokes.push([[x, y]]);
  }
  lineTo(x: number, y: number) {
    this.strokes.at(-1)!.push([x, y]);
  }
  closePath() {}
}

const trace = (values: number[], bad: number[] = []) => ({
  wavelength: Float64Array.from(values, (_, i) => i + 0.5),
  values: Float32Array.from(values),
  bad: Uint8Array.from(values, (_, i) => Number(bad.includes(i))),
});

describe('the steps of a curve', () => {
  it('are one level line a pixel, joined where pixels meet', () => {
    const pen = new Recorder();
    stepPath(pen, frame, trace([1, 0.5, 0.5, 1, 1, 1, 1, 1, 1, 1]));
    expect(pen.strokes).toHaveLength(1);
    expect(pen.strokes[0]!.slice(0, 4)).toEqual([
      [0, 0],
      [10, 0],
      [10, 50],
      [20, 50],
    ]);
  });

  it('stop at a masked sample and start again after it', () => {
    const pen = new Recorder();
    stepPath(pen, frame, trace([1, 1, 1, 1, 1, 1], [2]));
    expect(pen.strokes).toHaveLength(2);
    expect(pen.strokes[1]![0]).toEqual([30, 0]);
  });

  it('do not bridge a hole between detectors', () => {
    const pen = new Recorder();
    const wavelength = Float64Array.of(0.5, 1.5, 2.5, 7.5, 8.5);
    stepPath(pen, frame, { wavelength, values: new Float32Array(5).fill(1), bad: new Uint8Array(5) });
    expect(pen.strokes.map((s) => [s[0]![0], s.at(-1)![0]])).toEqual([
      [0, 30],
      [70, 90],
    ]);
  });

  it('give the pixel at an edge the width of its neighbour', () => {
    const edges = new Float64Array(2);
    pixelEdges(Float64Array.of(1, 2, 3), 0, edges);
    expect([...edges]).toEqual([0.5, 1.5]);
  });
});

describe('a curve of more samples than pixels', () => {
  it('is drawn through the extremes, so a dip of one sample reaches its full depth', () => {
    const n = 50_000;
    const wavelength = Float64Array.from({ length: n }, (_, i) => (i / n) * 10);
    const values = new Float32Array(n).fill(0.9);
    values[31_234] = 0.1;
    expect(isDense(wavelength, frame)).toBe(true);
    const pen = new Recorder();
    extremesPath(pen, frame, columnsOf(wavelength, buildPyramid(values, new Uint8Array(n)), 0, 10, 100));
    const depth = pen.strokes.flat().filter(([, y]) => Math.abs(y - yOf(frame, 0.1)) < 1e-4); // 32-bit samples
    expect(depth.length).toBeGreaterThan(0);
    expect(Math.abs(depth[0]![0] - xOf(frame, wavelength[31_234]!))).toBeLessThanOrEqual(1);
  });

  it('lifts the pen over empty columns', () => {
    const pen = new Recorder();
    const gap = Float32Array.of(1, 1, NaN, NaN, NaN, 1, 1);
    extremesPath(pen, { ...frame, width: 7 }, { low: gap, high: gap });
    expect(pen.strokes).toHaveLength(2);
  });
});

describe('bars of columns', () => {
  const bars = (low: number[], high: number[]) => {
    const out: [number, number, number][] = [];
    columnBars({ ...frame, width: low.length }, { low: Float32Array.from(low), high: Float32Array.from(high) }, (...bar) => out.push(bar));
    return out;
  };

  it('reach from the highest to the lowest sample, at least one pixel', () => {
    expect(bars([0.2, 0.2], [0.9, 0.9])).toEqual([
      [0, 10, 70],
      [1, 10, 70],
    ]);
    expect(bars([0.5], [0.5])).toEqual([[0, 50, 1]]);
  });

  it('meet their neighbours on a slope and stop at a gap', () => {
    const [, down, , alone] = bars(
      [0.9, 0.3, NaN, 0.1, 0.1].filter((_, i) => i !== 4),
      [0.9, 0.4, NaN, 0.1],
    );
    expect(down![1]).toBe(11); // up to the end of the bar before
    expect(alone).toBeUndefined();
    expect(bars([0.9, NaN, 0.1], [0.9, NaN, 0.1]).at(-1)).toEqual([2, 90, 1]);
  });
});

describe('light taken', () => {
  const area = (strokes: [number, number][][]) =>
    strokes.reduce(
      (sum, s) => sum + Math.abs(s.reduce((a, [x, y], i) => a + x * s[(i + 1) % s.length]![1] - s[(i + 1) % s.length]![0] * y, 0)) / 2,
      0,
    );

  it('has the area of the dip, which is its equivalent width, and none where the curve is above', () => {
    const taken = new Recorder();
    const given = new Recorder();
    const level = new Float32Array(10).fill(0.8);
    const dip = trace([0.8, 0.8, 0.4, 0.8, 0.8, 1, 0.8, 0.8, 0.8, 0.8]);
    lightPath(taken, frame, dip, level, 'taken');
    lightPath(given, frame, dip, level, 'given');
    expect(area(taken.strokes)).toBeCloseTo(10 * 40, 3); // one pixel of 10 wide, 0.4 of 100 deep
    expect(area(given.strokes)).toBeCloseTo(10 * 20, 3);
  });
});
