import type { Spectrum } from '../spectrum/index.js';

/** Good samples cut into intervals of equal width in ln wavelength: the coarse grid on which smooth curves are fitted. */
export interface Blocks {
  readonly count: number;
  /** first sample of each block and, last, the number of samples; `count + 1` entries */
  readonly first: Int32Array;
  /** wavelength of the `count + 1` edges, nm */
  readonly edgeNm: Float64Array;
  /** wavelength of the middle of each block, nm */
  readonly centreNm: Float64Array;
  /** middle of each block scaled to [-1, 1] over the range, in ln wavelength */
  readonly x: Float64Array;
}

const LARGEST_COUNT = 320;
const FEWEST_SAMPLES = 12;

/** Cuts a spectrum into at most a few hundred blocks of, on average, at least a dozen samples. */
export function cutBlocks(spectrum: Spectrum): Blocks {
  const { wavelength } = spectrum;
  const n = wavelength.length;
  const count = Math.max(1, Math.min(LARGEST_COUNT, Math.floor(n / FEWEST_SAMPLES)));
  const from = Math.log(wavelength[0]!);
  const step = (Math.log(wavelength[n - 1]!) - from) / count;
  const edgeNm = new Float64Array(count + 1);
  const centreNm = new Float64Array(count);
  const x = new Float64Array(count);
  const first = new Int32Array(count + 1);
  for (let b = 0, i = 0; b <= count; b++) {
    edgeNm[b] = Math.exp(from + b * step);
    if (b < count) {
      centreNm[b] = Math.exp(from + (b + 0.5) * step);
      x[b] = count > 1 ? (2 * (b + 0.5)) / count - 1 : 0;
    }
    while (b > 0 && i < n && wavelength[i]! < edgeNm[b]!) i++;
    first[b] = b === count ? n : i;
  }
  return { count, first, edgeNm, centreNm, x };
}
