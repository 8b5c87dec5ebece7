import type { ReadContext } from '../context.js';
import { refuse } from '../refusal.js';
import { decode } from './decode.js';
import type { Hdu } from './hdu.js';

/** A 1-D image, or a stack of a few bands of the same length along one spectral axis. */
export interface ImageShape {
  /** number of the spectral axis, from 1 */
  readonly axis: number;
  readonly length: number;
  readonly bands: number;
}

const CODES: Record<number, string> = { 8: 'B', 16: 'I', 32: 'J', 64: 'K', '-32': 'E', '-64': 'D' };

/** More rows than this are a picture or many spectra, not flux, error and mask. */
const MOST_BANDS = 10;

/** Shape of an image with one spectral axis; refuses pictures. Axes of length 1 do not count. */
export function imageShape(hdu: Hdu): ImageShape {
  const { header } = hdu;
  const lengths = Array.from({ length: header.count('NAXIS') }, (_, k) => header.count(`NAXIS${k + 1}`));
  if (lengths.length === 0) refuse('no_data', `${hdu.place} has no data, so there is no spectrum in it.`);
  const empty = lengths.indexOf(0);
  if (empty >= 0) refuse('no_data', `The image in ${hdu.place} has no pixels (NAXIS${empty + 1} = 0).`, { card: `NAXIS${empty + 1}` });
  const long = lengths.flatMap((length, k) => (length > 1 ? [k] : []));
  const axis = long[0] ?? 0;
  const bands = lengths.reduce((product, length, k) => (k === axis ? product : product * length), 1);
  if (bands > MOST_BANDS)
    refuse(
      'not_one_dimensional',
      `The image in ${hdu.place} is two-dimensional (${lengths.join(' x ')}), not a spectrum. Extract a 1-D spectrum first.`,
    );
  return { axis: axis + 1, length: lengths[axis]!, bands };
}

/** Pixels of one band, scaled by BSCALE and BZERO; BLANK becomes NaN. */
export function readBand(hdu: Hdu, shape: ImageShape, band: number, { bytes, limits }: ReadContext): Float64Array {
  if (shape.length > limits.points)
    refuse(
      'too_large',
      `The image in ${hdu.place} has ${shape.length} pixels, more than the limit of ${limits.points}: too large for one spectrum.`,
    );
  const { header } = hdu;
  const bitpix = header.get('BITPIX') as number;
  const elementSize = Math.abs(bitpix) / 8;
  const scaling = {
    scale: header.number('BSCALE') ?? 1,
    zero: header.number('BZERO') ?? 0,
    blank: bitpix > 0 ? header.number('BLANK') : null,
  };
  const layout = { code: CODES[bitpix]!, bits: 8, groups: shape.length, groupStride: elementSize, perGroup: 1 };
  const out = new Float64Array(shape.length);
  decode(bytes, { ...layout, start: hdu.dataStart + band * shape.length * elementSize }, scaling, out, 0);
  return out;
}
