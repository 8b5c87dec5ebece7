import { readFileSync } from 'node:fs';
import type { ReadResult } from '@foreveil/shared';

/** Statistics over finite values; std is that of the population. */
export interface Statistics {
  n_finite: number;
  mean: number;
  std: number;
  sum: number;
  min: number;
  max: number;
}
/** What must come out of a good file: points and wavelengths in file order and in the file's own medium. */
export interface Good {
  file: string;
  what: string;
  format: 'fits' | 'text';
  n_points: number;
  first_wavelength_nm: number;
  last_wavelength_nm: number;
  min_wavelength_nm: number;
  max_wavelength_nm: number;
  medium: 'vacuum' | 'air' | 'unknown';
  file_order: 'ascending' | 'descending' | 'ascending_with_duplicates' | 'unsorted';
  flux: Statistics;
  flux_unit: string;
  error: Statistics | null;
  tol_relative: number;
  first_vacuum_nm?: number;
  last_vacuum_nm?: number;
  n_duplicates?: number;
  generated?: boolean;
  gzip?: boolean;
  optional?: boolean;
}
/** How a bad file must be answered; `outcome` names alternatives joined by `_or_`. */
export interface Bad {
  file: string;
  what: string;
  outcome: string;
  must_mention: string[][];
  lines?: number[];
  n_points?: number;
  generated?: boolean;
}

const ROOT = 'test/fixtures/corpus';
export const expected = JSON.parse(readFileSync(`${ROOT}/expected.json`, 'utf8')) as { good: Good[]; bad: Bad[] };
export const bytesOf = (file: string): Uint8Array => new Uint8Array(readFileSync(`${ROOT}/${file}`));

/** Everything that a person is told about a file. */
export const sentences = (result: ReadResult): string =>
  (result.ok ? result.reading.warnings.map((warning) => warning.sentence) : [result.problem.sentence]).join('\n');

export function statistics(values: Float64Array): Statistics {
  const finite = values.filter(Number.isFinite);
  const n = finite.length;
  const sum = finite.reduce((total, value) => total + value, 0);
  const mean = sum / n;
  const std = Math.sqrt(finite.reduce((total, value) => total + (value - mean) ** 2, 0) / n);
  return {
    n_finite: n,
    mean,
    std,
    sum,
    min: finite.reduce((a, b) => Math.min(a, b), Infinity),
    max: finite.reduce((a, b) => Math.max(a, b), -Infinity),
  };
}

/** Means, standard deviations and extremes agree to `relative` of the largest value; so do sums, per sample. */
export function expectStatistics(values: Float64Array, wanted: Statistics, relative: number) {
  const found = statistics(values);
  const scale = Math.max(Math.abs(wanted.min), Math.abs(wanted.max));
  expect(found.n_finite).toBe(wanted.n_finite);
  for (const key of ['mean', 'std', 'min', 'max'] as const)
    expect(Math.abs(found[key] - wanted[key]) / scale).toBeLessThanOrEqual(relative);
  expect(Math.abs(found.sum - wanted.sum) / (scale * wanted.n_finite)).toBeLessThanOrEqual(relative);
}

/** What holds for every spectrum, wherever it comes from. */
export function expectSound(result: Extract<ReadResult, { ok: true }>) {
  const { wavelength, flux, sigma, bad } = result.spectrum;
  expect(wavelength.length).toBeGreaterThan(1);
  expect([flux.length, bad.length, sigma?.length ?? flux.length]).toEqual(Array(3).fill(wavelength.length));
  expect(wavelength.every((value, i) => value > (i === 0 ? 0 : wavelength[i - 1]!) && value < Infinity)).toBe(true);
  expect(flux.every((value, i) => Number.isFinite(value) || (Number.isNaN(value) && bad[i] === 1))).toBe(true);
  expect(sigma?.every((value, i) => (value > 0 && value < Infinity) || (Number.isNaN(value) && bad[i] === 1)) ?? true).toBe(true);
  expect(result.reading.points).toBeGreaterThanOrEqual(wavelength.length);
}
