import { describe, expect, it } from 'vitest';
import { foldAxis, lanes, placeOf } from './spectral-axis.js';

const OPTICAL = { fromNm: 380, toNm: 680 };
const RED = { fromNm: 470, toNm: 690 };
const UV = { fromNm: 120, toNm: 172 };

describe('one axis for several spectra', () => {
  it('is one piece where they overlap, from end to end', () => {
    const [piece, ...others] = foldAxis([OPTICAL, RED]);
    expect(others).toEqual([]);
    expect(piece).toMatchObject({ start: 0, end: 1 });
    expect(piece!.fromNm).toBeLessThan(380);
    expect(piece!.toNm).toBeGreaterThan(690);
  });

  it('folds away what nobody observed, in order, without gaps or overlaps beyond the fold', () => {
    const axis = foldAxis([OPTICAL, UV]);
    expect(axis).toHaveLength(2);
    expect(axis[0]!.start).toBe(0);
    expect(axis[1]!.end).toBeCloseTo(1, 12);
    expect(axis[1]!.start).toBeGreaterThan(axis[0]!.end);
    expect(placeOf(250, axis)).toBeNull();
  });

  it('bridges a short gap instead of folding it', () => {
    expect(foldAxis([OPTICAL, { fromNm: 690, toNm: 760 }])).toHaveLength(1);
  });

  it('keeps an infrared spectrum from crushing the others', () => {
    const axis = foldAxis([UV, OPTICAL, { fromNm: 2380, toNm: 188_557 }]);
    expect(axis).toHaveLength(3);
    for (const { start, end } of axis) expect(end - start).toBeGreaterThan(0.1);
  });

  it('places wavelengths in order and every end of every spectrum on the axis', () => {
    const axis = foldAxis([UV, OPTICAL, RED]);
    const places = [120, 172, 380, 470, 680, 690].map((nm) => placeOf(nm, axis));
    expect(places).not.toContain(null);
    expect([...places].sort((a, b) => a! - b!)).toEqual(places);
  });

  it('of nothing is nothing', () => {
    expect(foldAxis([])).toEqual([]);
    expect(foldAxis([{ fromNm: 500, toNm: 500 }])).toEqual([]);
  });
});

describe('lanes', () => {
  it('puts what does not overlap side by side, and what does below', () => {
    expect(lanes([UV, OPTICAL, RED], 3)).toEqual([[OPTICAL, UV], [RED]]);
  });
  it('drops the narrowest when there are more overlaps than room', () => {
    expect(lanes([OPTICAL, RED, { fromNm: 500, toNm: 510 }], 2)).toEqual([[OPTICAL], [RED]]);
  });
});
