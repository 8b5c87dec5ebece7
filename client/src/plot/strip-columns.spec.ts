import { describe, expect, it } from 'vitest';
import { encode, quickLight, STRIP_CAP } from './light.js';
import { shownLuminance, telling, toDisplay } from './strip-columns.js';

/** Uniform noise in 0..1 that is the same in every run (Lehmer, modulus 2^31 - 1). */
function* lehmer(seed = 7): Generator<number, never> {
  for (let x = seed; ;) {
    x = (x * 48271) % 2147483647;
    yield x / 2147483647;
  }
}

/** WCAG 2 relative luminance of a colour as the screen gets it. */
const luminance = (nm: number, shown: number, scheme: 'light' | 'dark') => {
  const linear = quickLight(nm, STRIP_CAP[scheme]).map((c) => {
    const byte = encode(c * shown) / 255;
    return byte <= 0.04045 ? byte / 12.92 : ((byte + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * linear[0]! + 0.7152 * linear[1]! + 0.0722 * linear[2]!;
};

describe('the strip', () => {
  it.each([90, 520, 1280])('keeps a half-deep dip one column wide visible on %d pixels, at every colour, by day and night', (width) => {
    const [from, to, n] = [380, 690, 2688];
    for (const nm of [402, 450, 520, 589, 670]) {
      const columns = new Array<number | null>(n).fill(1);
      columns[Math.round(((nm - from) / (to - from)) * n)] = 0.5;
      const shown = toDisplay(columns, width, false).map((v) => shownLuminance(v!, false));
      const [dip, around] = [Math.min(...shown), shown[0]!];
      for (const scheme of ['light', 'dark'] as const) {
        const contrast = (luminance(nm, around, scheme) + 0.05) / (luminance(nm, dip, scheme) + 0.05);
        expect(contrast).toBeGreaterThan(1.5); // the least that was measured on the drawn strip
      }
    }
  });

  it('is even where there is only noise', () => {
    const random = lehmer();
    const low = Array.from({ length: 512 }, () => 1 - 0.02 - 0.006 * random.next().value);
    const high = Array.from({ length: 512 }, () => 1 + 0.02 + 0.006 * random.next().value);
    const columns = telling(low, high).filter((v) => v !== null);
    expect(Math.max(...columns.map((v) => Math.abs(v - 1)))).toBeLessThan(0.004); // half the spread of the extremes
  });

  it('shows a dip at full depth among noise, and a peak at full height', () => {
    const low = new Array<number>(300).fill(0.98);
    const high = new Array<number>(300).fill(1.02);
    low[100] = 0.6;
    high[200] = 3;
    const columns = telling(low, high);
    expect(columns[100]).toBe(0.6);
    expect(columns[200]).toBe(3);
  });

  it('leaves masked columns open', () => {
    expect(telling([1, null, 1], [1, null, 1])[1]).toBeNull();
    expect(toDisplay([null, null], 1, false)).toEqual([null]);
  });

  it('darkens with depth and never leaves the scale', () => {
    const levels = [0, 0.2, 0.5, 0.9, 1, 1.5, 4, 100].map((v) => shownLuminance(v, false));
    expect(levels).toEqual([...levels].sort((a, b) => a - b));
    expect(levels.at(-1)).toBeLessThanOrEqual(1);
    expect(shownLuminance(-1, false)).toBe(0);
    expect(shownLuminance(1, true)).toBeLessThan(0.11); // an emission spectrum starts dark
  });
});
