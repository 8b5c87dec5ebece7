/** Samples cut into intervals of equal width in ln wavelength: the coarse grid on which smooth curves are fitted. */
export interface Blocks {
  readonly count: number;
  /** first sample of each block and, last, the number of samples; `count + 1` entries */
  readonly first: Int32Array;
  /** wavelength of the `count + 1` edges, nm */
  readonly edgeNm: Float64Array;
  /** wavelength of the middle of each block, nm */
  readonly centreNm: Float64Array;
}

/** One value per block and its inverse variance (0: not usable). */
export interface BlockValues {
  readonly value: Float64Array;
  readonly weight: Float64Array;
}

export const makeBlockValues = (count: number): BlockValues => ({ value: new Float64Array(count), weight: new Float64Array(count) });

const MOST_BLOCKS = 256;
const SAMPLES_PER_BLOCK = 12;
const FEWEST_BLOCKS = 5;

/** Cuts an ascending wavelength array into at most a few hundred blocks of, on average, at least a dozen samples. */
export function cutBlocks(wavelength: Float64Array): Blocks {
  const n = wavelength.length;
  const count = Math.max(1, Math.min(MOST_BLOCKS, Math.max(Math.floor(n / SAMPLES_PER_BLOCK), Math.min(FEWEST_BLOCKS, n >> 2))));
  const from = Math.log(wavelength[0]!);
  const step = (Math.log(wavelength[n - 1]!) - from) / count;
  const first = new Int32Array(count + 1);
  const edgeNm = new Float64Array(count + 1);
  const centreNm = new Float64Array(count);
  for (let b = 0, i = 0; b <= count; b++) {
    edgeNm[b] = Math.exp(from + b * step);
    if (b < count) centreNm[b] = Math.exp(from + (b + 0.5) * step);
    while (b > 0 && i < n && wavelength[i]! < edgeNm[b]!) i++;
    first[b] = b === count ? n : i;
  }
  return { count, first, edgeNm, centreNm };
}

/** Position of block edge (or, with 0.5 added, block middle) `b` scaled to [-1, 1]. */
export const scaledPosition = (b: number, count: number): number => (2 * b) / count - 1;
