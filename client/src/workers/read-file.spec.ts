import { describe, expect, it } from 'vitest';
import { FACE_COLUMNS, faceOf } from './face.js';
import { knownLineHint } from './known-line.js';
import { offendingLines } from './offending-lines.js';
import { readFile } from './read-file.js';

const bytes = (text: string) => new TextEncoder().encode(text);

/** An invented spectrum on an even grid; `fluxAt` gives its flux. */
function spectrum(n: number, fluxAt: (nm: number, i: number) => number, fromNm = 480, toNm = 680) {
  const wavelength = Float64Array.from({ length: n }, (_, i) => fromNm + ((toNm - fromNm) * i) / (n - 1));
  return { wavelength, flux: Float64Array.from(wavelength, fluxAt), bad: new Uint8Array(n) };
}

describe('the face of a file', () => {
  it('keeps a dip one sample wide among a hundred thousand', () => {
    const face = faceOf(spectrum(100_000, (_, i) => (i === 43_210 ? 0.2 : 1)))!;
    const column = Math.floor((43_210 / 99_999) * FACE_COLUMNS);
    expect(face.low[column]).toBeCloseTo(0.2, 10);
    expect(face.high[column]).toBe(1);
    expect(face.low.filter((v) => v! < 0.9)).toHaveLength(1);
  });

  it('leaves no holes when there are fewer samples than columns', () => {
    const face = faceOf(spectrum(100, () => 5))!;
    expect(face.fluxHigh).not.toContain(null);
    expect(new Set(face.high)).toEqual(new Set([1]));
  });

  it('shows masked and missing stretches as nothing', () => {
    const masked = spectrum(10_000, (nm) => (nm > 600 ? NaN : 1));
    masked.bad.fill(1, 0, 2000);
    const face = faceOf(masked)!;
    expect(face.low[10]).toBeNull();
    expect(face.low[FACE_COLUMNS - 10]).toBeNull();
    expect(face.low[FACE_COLUMNS / 2]).toBe(1);
  });

  it('divides by the slope of the continuum, so that a blue star is not half dark', () => {
    const face = faceOf(spectrum(20_000, (nm) => (480 / nm) ** 4))!;
    for (const value of face.low) expect(value).toBeGreaterThan(0.95);
  });

  it('of a single wavelength, or of nothing good, is none', () => {
    expect(faceOf(spectrum(1, () => 1))).toBeNull();
    expect(faceOf(spectrum(50, () => NaN))).toBeNull();
  });
});

describe('a line that everybody knows', () => {
  const noise = (i: number) => 0.004 * Math.sin(i * 12.9898) * Math.cos(i * 4.1414);
  const dip = (nm: number, centre: number) => -0.6 * Math.exp(-0.5 * ((nm - centre) / 0.08) ** 2);

  it('is found with its velocity', () => {
    // H alpha, 656.461 nm, receding at 45.67 km/s: 656.461 * (1 + 45.67 / 299792.458) = 656.561
    const hint = knownLineHint(spectrum(40_000, (nm, i) => 1 + noise(i) + dip(nm, 656.561)))!;
    expect(hint.name).toBe('Hα');
    expect(Math.abs(hint.velocityKmPerS - 45.67)).toBeLessThan(0.5); // a tenth of a sample of 5 nm / 1000
  });

  it('is not mixed with its neighbour where both lie within reach, as the sodium doublet does', () => {
    // both approaching at 95 km/s: 589.158 and 589.756 nm, NIST, times (1 - 95 / 299792.458)
    const doublet = (nm: number) => dip(nm, 588.9713) + 0.8 * dip(nm, 589.5691);
    const hint = knownLineHint(spectrum(40_000, (nm, i) => 1 + noise(i) + doublet(nm), 583, 595))!;
    expect(hint.name).toBe('Na I');
    expect(Math.abs(hint.velocityKmPerS + 95)).toBeLessThan(1);
  });

  it('is not made up where only noise lies', () => {
    expect(knownLineHint(spectrum(40_000, (_, i) => 1 + noise(i)))).toBeNull();
  });
});

describe('offending lines', () => {
  const text = bytes('# a table\n500.1 1.0\n500.0 \t1.1\n500.3 1.2\n');
  it('are the one at fault with its neighbours, by number', () => {
    expect(offendingLines(text, 3).map(({ number, atFault }) => [number, atFault])).toEqual([
      [2, false],
      [3, true],
      [4, false],
    ]);
    expect(offendingLines(text, 3)[1]!.text).toBe('500.0     1.1');
  });
  it('are none where no line is to blame, beyond the end, or in a binary file', () => {
    expect(offendingLines(text, undefined)).toEqual([]);
    expect(offendingLines(text, 99)).toEqual([]);
    expect(offendingLines(Uint8Array.of(1, 0, 10, 2), 1)).toEqual([]);
  });
  it('cannot hide or turn around what they say', () => {
    expect(offendingLines(bytes('1 \u202e2\u0007'), 1)[0]!.text).toBe('1 2');
  });
});

describe('reading a file in the browser', () => {
  const table = (medium: string) =>
    bytes(`${medium}wavelength (nm),flux\n${Array.from({ length: 400 }, (_, i) => `${500 + i * 0.1},${1 + (i % 7) * 0.01}`).join('\n')}\n`);

  it('gives the reading and a face', () => {
    const read = readFile(table('# medium: air\n'), 'star.csv', {});
    expect(read).toMatchObject({ ok: true, reading: { points: 400, medium: { value: 'air', how: 'stated' } }, hint: null });
  });

  it('takes a correction and says that a person said it', () => {
    const open = readFile(table(''), 'star.csv', {});
    expect(open).toMatchObject({ ok: true, reading: { medium: { how: 'not_stated' } } });
    const answered = readFile(table(''), 'star.csv', { medium: 'air' });
    expect(answered).toMatchObject({ ok: true, reading: { medium: { value: 'air', how: 'corrected' } } });
  });

  it('of no spectrum gives a sentence', () => {
    const read = readFile(bytes('dear all, the night was clear\n'), 'notes.txt', {});
    expect(read.ok).toBe(false);
    expect(!read.ok && read.problem.sentence).toMatch(/^[A-Z].*\.$/);
  });
});
