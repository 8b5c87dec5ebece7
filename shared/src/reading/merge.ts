import { refuse } from './refusal.js';
import type { ReadWarning } from './types.js';

/** Columns of a spectrum, in one order. */
export interface Columns {
  readonly wavelength: Float64Array;
  readonly flux: Float64Array;
  readonly sigma: Float64Array | null;
  readonly bad: Uint8Array;
  /** piece of the file that each sample comes from; null when there is one */
  readonly piece: Uint16Array | null;
}

/** Samples of one wavelength become one: the mean of the good ones, weighted by 1 / sigma^2 where sigma is known. */
export function mergeDuplicates(columns: Columns, axisName: string, warnings: ReadWarning[]): Columns {
  const { starts, duplicates } = groupsOfEqual(columns.wavelength, axisName);
  if (duplicates === 0) return columns;
  const n = starts.length;
  const out = {
    wavelength: new Float64Array(n),
    flux: new Float64Array(n),
    sigma: columns.sigma && new Float64Array(n),
    bad: new Uint8Array(n),
    piece: columns.piece && new Uint16Array(n),
  };
  for (let g = 0; g < n; g++) {
    const from = starts[g]!;
    const to = g + 1 < n ? starts[g + 1]! : columns.wavelength.length;
    const mean = to - from === 1 ? sampleAt(columns, from) : meanOf(columns, from, to);
    out.wavelength[g] = columns.wavelength[from]!;
    out.flux[g] = mean.flux;
    out.bad[g] = mean.bad;
    if (out.piece) out.piece[g] = columns.piece![from]!;
    if (out.sigma) out.sigma[g] = mean.sigma;
  }
  const first = columns.wavelength[starts.findIndex((start, g) => (starts[g + 1] ?? columns.wavelength.length) - start > 1)];
  warnings.push({
    code: 'duplicates_merged',
    sentence: `${duplicates} duplicate wavelengths were found (first at ${first} nm in vacuum); samples of the same wavelength were merged into their mean${columns.sigma ? ', weighted by 1/sigma^2' : ''}.`,
    column: axisName,
  });
  return out;
}

const sampleAt = (c: Columns, i: number) => ({ flux: c.flux[i]!, sigma: c.sigma ? c.sigma[i]! : NaN, bad: c.bad[i]! });

/** The samples `from` to `to` as one; weights relative to the best sigma, so that no sigma is too small to be squared. */
function meanOf(c: Columns, from: number, to: number) {
  let best = Infinity;
  for (let i = from; i < to; i++) if (!c.bad[i] && c.sigma) best = Math.min(best, c.sigma[i]!);
  let weights = 0;
  let sum = 0;
  for (let i = from; i < to; i++) {
    if (c.bad[i]) continue;
    const weight = c.sigma ? (best / c.sigma[i]!) ** 2 : 1;
    weights += weight;
    sum += weight * c.flux[i]!;
  }
  const flux = sum / weights;
  if (!Number.isFinite(flux)) return { flux: NaN, sigma: NaN, bad: 1 };
  return { flux, sigma: c.sigma ? best / Math.sqrt(weights) : NaN, bad: 0 };
}

/** Equal wavelengths beyond this share mean that the column is not what it seems. */
const MOST_DUPLICATES = 0.5;

/** Groups of neighbours with one wavelength: the first position of each group and the number of groups. */
function groupsOfEqual(nm: Float64Array, name: string): { starts: Uint32Array; duplicates: number } {
  const starts = new Uint32Array(nm.length);
  let groups = 0;
  for (let i = 0; i < nm.length; i++) if (i === 0 || nm[i] !== nm[i - 1]) starts[groups++] = i;
  const duplicates = nm.length - groups;
  if (groups < 2 && nm.length > 1)
    refuse(
      'same_wavelength',
      `All ${nm.length} points have the same wavelength (column ${name}). Check which column holds the wavelengths.`,
      { column: name },
    );
  if (duplicates > MOST_DUPLICATES * nm.length)
    refuse(
      'same_wavelength',
      `${duplicates} of ${nm.length} points have a duplicate wavelength (column ${name}), too many to be merged. Check which column holds the wavelengths.`,
      { column: name },
    );
  return { starts: starts.slice(0, groups), duplicates };
}
