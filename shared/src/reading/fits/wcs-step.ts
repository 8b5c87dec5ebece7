import { refuse } from '../refusal.js';
import type { ReadWarning } from '../types.js';
import type { AxisPlace } from './axis-place.js';

/** A linear step along the axis in the unit of the header. */
export interface Step {
  readonly pixelOfReference: number;
  readonly reference: number;
  readonly perPixel: number;
}

/** From CRVAL, CRPIX and CD, CDELT or PC, or from the COEFF cards of log-linear survey spectra. */
export function stepOf({ hdu, k, length }: AxisPlace, warnings: ReadWarning[]): Step {
  const { header } = hdu;
  const cd = header.number(`CD${k}_${k}`);
  const cdelt = header.number(`CDELT${k}`);
  const reference = header.number(`CRVAL${k}`);
  const perPixel = cd !== null && cd !== 0 ? cd : cdelt !== null ? cdelt * (header.number(`PC${k}_${k}`) ?? 1) : null;
  if (reference === null || perPixel === null) {
    const [first, each] = [header.number('COEFF0'), header.number('COEFF1')];
    if (first !== null && each !== null) return { pixelOfReference: 1, reference: first, perPixel: each };
    refuse(
      'no_wavelength_axis',
      `The image in ${hdu.place} has no wavelength calibration: CRVAL${k} and CDELT${k} (or CD${k}_${k}) are needed to turn pixels into wavelengths.`,
      { card: `CRVAL${k}` },
    );
  }
  if (perPixel === 0 && length > 1)
    refuse('zero_step', `CDELT${k} = 0 in ${hdu.place}: the step is zero, so all pixels would have the same wavelength.`, {
      card: `CDELT${k}`,
    });
  const pixelOfReference = header.number(`CRPIX${k}`);
  if (pixelOfReference === null)
    warnings.push({
      code: 'reference_pixel_assumed',
      sentence: `CRPIX${k} is missing in ${hdu.place}; pixel 0 was taken, as the FITS Standard says. If the first pixel was meant, the wavelengths are one pixel off.`,
    });
  return { pixelOfReference: pixelOfReference ?? 0, reference, perPixel };
}

/** Values of a linear axis; pixels count from 1. */
export function linear(step: Step, length: number): Float64Array {
  const values = new Float64Array(length);
  for (let i = 0; i < length; i++) values[i] = step.reference + (i + 1 - step.pixelOfReference) * step.perPixel;
  return values;
}
