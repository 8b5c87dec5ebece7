import type { Continuum, Spectrum, SpectrumSummary } from '@foreveil/shared';

export const PREVIEW_COLUMNS = 512;
/** blocks in which the level of the spectrum is taken while no continuum was fitted */
const BLOCKS = 24;
/** a sample stands for the half of the way to its neighbours, but not across a gap of more than this many usual steps */
const GAP_STEPS = 3;

type Level = (wavelengthNm: number) => number;

/**
 * Lowest and highest normalised flux in each of 512 equal columns of wavelength, for small drawings; null where no good sample lies.
 * @param continuum divides the flux; without one its level is taken as the 80 % quantile of good samples in blocks
 */
export function previewOf(
  { wavelength, flux, bad }: Pick<Spectrum, 'wavelength' | 'flux' | 'bad'>,
  continuum?: Pick<Continuum, 'sampleNm' | 'sampleFlux'>,
): SpectrumSummary['preview'] {
  const n = wavelength.length;
  const from = wavelength[0]!;
  const span = wavelength[n - 1]! - from;
  if (!(span > 0)) return null;
  const level = continuum ? interpolated(continuum.sampleNm, continuum.sampleFlux) : blockLevel({ wavelength, flux, bad });
  const reach = (GAP_STEPS * usualStep(wavelength)) / 2;
  const low = new Float64Array(PREVIEW_COLUMNS).fill(Infinity);
  const high = new Float64Array(PREVIEW_COLUMNS).fill(-Infinity);
  const columnOf = (nm: number) => Math.min(PREVIEW_COLUMNS - 1, Math.max(0, Math.floor(((nm - from) / span) * PREVIEW_COLUMNS)));
  for (let i = 0; i < n; i++) {
    const value = flux[i]! / level(wavelength[i]!);
    if (bad[i] || !Number.isFinite(value)) continue;
    const before = i > 0 ? Math.min(reach, (wavelength[i]! - wavelength[i - 1]!) / 2) : 0;
    const after = i < n - 1 ? Math.min(reach, (wavelength[i + 1]! - wavelength[i]!) / 2) : 0;
    for (let c = columnOf(wavelength[i]! - before), last = columnOf(wavelength[i]! + after); c <= last; c++) {
      if (value < low[c]!) low[c] = value;
      if (value > high[c]!) high[c] = value;
    }
  }
  return { low: rounded(low), high: rounded(high) };
}

const rounded = (column: Float64Array): (number | null)[] =>
  Array.from(column, (v) => (Number.isFinite(v) ? Number(v.toPrecision(4)) : null));

function usualStep(wavelength: Float64Array): number {
  const steps = new Float64Array(Math.min(wavelength.length - 1, 4096));
  const stride = (wavelength.length - 1) / steps.length;
  for (let k = 0; k < steps.length; k++) {
    const i = Math.floor(k * stride);
    steps[k] = wavelength[i + 1]! - wavelength[i]!;
  }
  return steps.sort()[steps.length >> 1]!;
}

/** Level through the 80 % quantiles of blocks that hold equally many samples. */
function blockLevel({ wavelength, flux, bad }: Pick<Spectrum, 'wavelength' | 'flux' | 'bad'>): Level {
  const nm: number[] = [];
  const levels: number[] = [];
  for (let block = 0; block < BLOCKS; block++) {
    const start = Math.floor((block * flux.length) / BLOCKS);
    const end = Math.floor(((block + 1) * flux.length) / BLOCKS);
    const good = flux.slice(start, end).filter((value, i) => !bad[start + i] && Number.isFinite(value));
    if (!good.length) continue;
    nm.push((wavelength[start]! + wavelength[end - 1]!) / 2);
    levels.push(good.sort()[Math.floor(0.8 * (good.length - 1))]!);
  }
  return interpolated(nm, levels);
}

/** Straight lines through the points, flat beyond the ends; NaN where the level is not positive. Fast for rising arguments. */
function interpolated(nm: readonly number[], values: readonly number[]): Level {
  let k = 0;
  return (at) => {
    if (k > 0 && at < nm[k]!) k = 0;
    while (k < nm.length - 2 && at > nm[k + 1]!) k++;
    const [x0, x1, y0, y1] = [nm[k]!, nm[k + 1] ?? nm[k]!, values[k]!, values[k + 1] ?? values[k]!];
    const share = x1 > x0 ? Math.min(1, Math.max(0, (at - x0) / (x1 - x0))) : 0;
    const value = y0 + share * (y1 - y0);
    return value > 0 ? value : NaN;
  };
}
