import type { Spectrum } from '@foreveil/shared';

/** A spectrum reduced to equal columns of wavelength, for its strip and its small curve. */
export interface Face {
  /** vacuum nm */
  readonly fromNm: number;
  readonly toNm: number;
  /** flux in the file's unit, least and greatest of each column; null where no good sample lies */
  readonly fluxLow: readonly (number | null)[];
  readonly fluxHigh: readonly (number | null)[];
  /** the same over a rough level of the continuum, for the light strip */
  readonly low: readonly (number | null)[];
  readonly high: readonly (number | null)[];
}

export const FACE_COLUMNS = 512;
/** Columns on each side whose upper quantile is taken as the continuum's level. */
const LEVEL_REACH = 24;
const LEVEL_QUANTILE = 0.8;

type Columns = (number | null)[];

/** @returns null when the spectrum has no stretch to draw: fewer than two wavelengths, or no good sample */
export function faceOf({ wavelength, flux, bad }: Pick<Spectrum, 'wavelength' | 'flux' | 'bad'>): Face | null {
  const fromNm = wavelength[0] ?? NaN;
  const toNm = wavelength[wavelength.length - 1] ?? NaN;
  if (!(toNm > fromNm)) return null;
  const fluxLow: Columns = new Array<number | null>(FACE_COLUMNS).fill(null);
  const fluxHigh: Columns = new Array<number | null>(FACE_COLUMNS).fill(null);
  const columnOf = (nm: number) => Math.min(FACE_COLUMNS - 1, Math.max(0, Math.floor(((nm - fromNm) / (toNm - fromNm)) * FACE_COLUMNS)));
  const put = (column: number, value: number) => {
    if (value < (fluxLow[column] ?? Infinity)) fluxLow[column] = value;
    if (value > (fluxHigh[column] ?? -Infinity)) fluxHigh[column] = value;
  };
  const reach = sampleReach(wavelength);
  for (let i = 0; i < flux.length; i++) {
    const value = flux[i]!;
    if (bad[i] || !Number.isFinite(value)) continue;
    const nm = wavelength[i]!;
    // a sample stands for its surroundings too, so that few samples leave no holes between columns
    for (let c = columnOf(nm - reach), last = columnOf(nm + reach); c <= last; c++) put(c, value);
  }
  if (fluxHigh.every((value) => value === null)) return null;
  const level = levels(fluxHigh);
  const over = (columns: Columns): Columns => columns.map((value, i) => (value === null || !(level[i]! > 0) ? null : value / level[i]!));
  return { fromNm, toNm, fluxLow, fluxHigh, low: over(fluxLow), high: over(fluxHigh) };
}

/** Half of the usual step between samples, nm. */
function sampleReach(wavelength: Float64Array): number {
  const steps: number[] = [];
  const stride = Math.max(1, Math.floor(wavelength.length / 2000));
  for (let i = 0; i + 1 < wavelength.length; i += stride) steps.push(wavelength[i + 1]! - wavelength[i]!);
  steps.sort((a, b) => a - b);
  return (steps[steps.length >> 1] ?? 0) / 2;
}

/** Running upper quantile of the columns; NaN where nothing lies near. */
function levels(high: Columns): number[] {
  return high.map((_, i) => {
    const near = high
      .slice(Math.max(0, i - LEVEL_REACH), i + LEVEL_REACH + 1)
      .filter((value) => value !== null)
      .sort((a, b) => a - b);
    return near[Math.floor(LEVEL_QUANTILE * (near.length - 1))] ?? NaN;
  });
}
