import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { evidenceFor } from '../test/a-result.js';
import { barLength, factorLabel, oddsLabel, together } from './odds.js';

describe('odds', () => {
  it('multiply to the odds of the stated probability', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-4, max: 0.9999, noNaN: true }), (p) => {
        const total = together(evidenceFor(p));
        expect(1 / (1 + Math.exp(-total))).toBeCloseTo(p, 9);
      }),
    );
  });

  it.each([
    [Math.log(20), '×20'],
    [Math.log(1 / 4), '÷4'],
    [Math.log(1.4), '×1.4'],
    [-Math.log(1.4), '÷1.4'],
    [Math.log(130), '×130'],
    [Math.log(2.35), '×2.4'],
    [Math.log(3e5), '×10⁵'],
    [0, '×1'],
    [-0.01, '×1'],
  ])('of %f read %s', (logOdds, label) => expect(factorLabel(logOdds)).toBe(label));

  it('are said as a ratio', () => {
    expect(oddsLabel(Math.log(36))).toBe('36 to 1');
    expect(oddsLabel(-Math.log(4))).toBe('1 to 4');
  });

  it('draw bars to the right for, to the left against, and no longer than the scale', () => {
    expect(barLength(0)).toBe(0);
    expect(barLength(Math.log(150))).toBe(1);
    expect(barLength(99)).toBe(1);
    expect(barLength(-99)).toBe(-1);
    expect(barLength(-1)).toBeLessThan(0);
  });
});
