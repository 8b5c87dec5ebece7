import fc from 'fast-check';
import { binAt, calibrationError, RELIABILITY_EDGES, reliabilityOf, shareInterval, type ReliabilityBin } from './reliability.js';
import { RELIABILITY } from './reliability-data.js';
import { DEFAULT_LIST_VERSION } from '../linelist/index.js';
import { PROGRAM_VERSION } from '../version.js';

describe('shareInterval', () => {
  it('agrees with the published example: 10 of 10 right, 95 %, is 0.72 to 1 (Brown, Cai & DasGupta 2001), here at one sigma', () => {
    // at z = 1 and 10 of 10 the interval is n / (n + 1) to 1
    expect(shareInterval(10, 10).low).toBeCloseTo(10 / 11, 12);
    expect(shareInterval(10, 10).high).toBeCloseTo(1, 12);
  });

  it('holds the observed share, and narrows with the root of the number of cases', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 5000 }), fc.double({ min: 0, max: 1, noNaN: true }), (count, part) => {
        const right = Math.round(part * count);
        const { low, high } = shareInterval(right, count);
        expect(low).toBeLessThanOrEqual(right / count + 1e-12);
        expect(high).toBeGreaterThanOrEqual(right / count - 1e-12);
        expect(high - low).toBeLessThanOrEqual(1 / Math.sqrt(count));
      }),
    );
  });

  it('says nothing without cases', () => expect(shareInterval(0, 0)).toEqual({ low: 0, high: 1 }));
});

describe('calibrationError', () => {
  const bin = (from: number, to: number, count: number, right: number, mean: number): ReliabilityBin => ({ from, to, count, right, mean });
  it('is the mean distance between what was said and what was so', () => {
    expect(calibrationError([bin(0, 0.5, 50, 10, 0.2), bin(0.5, 1, 50, 40, 0.9)])).toBeCloseTo(0.05, 12);
    expect(calibrationError([])).toBeNull();
  });
});

describe('the reliability that is shipped', () => {
  it('was measured on this version of the program and of the line list; otherwise run: npm run calibrate', () => {
    expect(RELIABILITY).toMatchObject({ programVersion: PROGRAM_VERSION, lineListVersion: DEFAULT_LIST_VERSION });
  });

  it('has every family with all bins, and counts that can be', () => {
    expect(RELIABILITY.families.map((f) => f.family)).toEqual(['stellar', 'interstellar', 'nebular', 'telluric', 'unidentified']);
    for (const { first } of RELIABILITY.families) {
      expect(first.map(({ from }) => from)).toEqual(RELIABILITY_EDGES.slice(0, -1));
      for (const { count, right, mean, from, to } of first) {
        expect(right).toBeLessThanOrEqual(count);
        if (count) expect(mean >= from && mean <= to).toBe(true);
      }
    }
  });

  it('is found by family, rank and probability, certainty included', () => {
    expect(reliabilityOf(RELIABILITY, 'stellar', 1, true)).toBe(RELIABILITY.families[0]!.first.at(-1));
    expect(binAt(RELIABILITY.families[0]!.first, 0.95)?.from).toBe(0.95);
    expect(reliabilityOf({ families: [] }, 'stellar', 0.5, true)).toBeUndefined();
  });
});
