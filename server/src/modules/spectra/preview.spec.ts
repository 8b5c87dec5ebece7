import { PREVIEW_COLUMNS, previewOf } from './preview.js';

const N = 10_000;
const wavelength = Float64Array.from({ length: N }, (_, i) => 400 + (300 * i) / (N - 1));
const good = () => new Uint8Array(N);
/** a slope over a factor of three, with a dip of 60 % that is 3 samples wide at sample 5000 */
const slope = wavelength.map((nm, i) => (nm / 400) ** 2 * (Math.abs(i - 5000) <= 1 ? 0.4 : 1));

test('shows a narrow dip at full depth in its column, and the continuum as one beside it', () => {
  const { low, high } = previewOf(
    { wavelength, flux: slope, bad: good() },
    { sampleNm: [...wavelength], sampleFlux: wavelength.map((nm) => (nm / 400) ** 2) as unknown as number[] },
  )!;
  expect([low.length, high.length]).toEqual([PREVIEW_COLUMNS, PREVIEW_COLUMNS]);
  const column = Math.floor((5000 / (N - 1)) * PREVIEW_COLUMNS);
  expect(low[column]).toBeCloseTo(0.4, 3);
  expect(high[column]).toBeCloseTo(1, 3);
  const beside = [...low.slice(0, column - 1), ...low.slice(column + 2)];
  for (const value of beside) expect(value).toBeCloseTo(1, 3);
});

test('takes the level from the spectrum itself while there is no continuum', () => {
  const { low, high } = previewOf({ wavelength, flux: slope, bad: good() })!;
  for (const value of high) {
    expect(value).toBeGreaterThan(0.9); // blocks follow the slope to some per cent
    expect(value).toBeLessThan(1.1);
  }
  expect(Math.min(...low.map((v) => v!))).toBeLessThan(0.45);
});

test('has gaps where samples are bad or missing, and none where they are only few', () => {
  const bad = good().fill(1, 2000, 4000);
  const masked = previewOf({ wavelength, flux: slope, bad })!;
  const inside = masked.low.slice(Math.ceil(0.2 * PREVIEW_COLUMNS) + 1, Math.floor(0.4 * PREVIEW_COLUMNS) - 1);
  expect(inside.every((value) => value === null)).toBe(true);
  expect(masked.low.filter((value) => value === null)).toHaveLength(101); // columns 103 to 203 lie wholly between samples 2000 and 4000
  const few = Float64Array.from({ length: 60 }, (_, i) => 500 + i);
  const sparse = previewOf({ wavelength: few, flux: new Float64Array(60).fill(2), bad: new Uint8Array(60) })!;
  expect(sparse.low.every((value) => value === 1)).toBe(true);
  const torn = few.map((nm) => (nm < 530 ? nm : nm + 100));
  const { low } = previewOf({ wavelength: torn, flux: new Float64Array(60).fill(2), bad: new Uint8Array(60) })!;
  expect(low.filter((value) => value === null).length).toBeGreaterThan(PREVIEW_COLUMNS / 2);
});

test('is nothing for one sample, and all gaps where nothing is good', () => {
  const one = { wavelength: Float64Array.of(500), flux: Float64Array.of(1), bad: new Uint8Array(1) };
  expect(previewOf(one)).toBeNull();
  const nothing = previewOf({ wavelength, flux: new Float64Array(N).fill(NaN), bad: good() })!;
  expect(nothing.low.every((value) => value === null)).toBe(true);
});
