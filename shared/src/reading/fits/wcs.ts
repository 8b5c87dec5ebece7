import type { Medium } from '../../units/index.js';
import { settleAxis } from '../columns/axis.js';
import { stated } from '../columns/medium.js';
import type { SpectralQuantity } from '../columns/words.js';
import type { ReadContext } from '../context.js';
import { quoted, refuse } from '../refusal.js';
import type { AxisPlace, ImageAxis } from './axis-place.js';
import { plainAxis } from './wcs-plain.js';
import { linear, stepOf, type Step } from './wcs-step.js';
import { velocityAxis } from './wcs-velocity.js';

interface AxisCode {
  readonly quantity: SpectralQuantity;
  readonly unit: string;
  readonly medium?: Medium;
}

/** Codes of spectral axes with their default units, FITS Standard 4.0 table 25. */
const CODES: Record<string, AxisCode> = {
  WAVE: { quantity: 'length', unit: 'm', medium: 'vacuum' },
  AWAV: { quantity: 'length', unit: 'm', medium: 'air' },
  FREQ: { quantity: 'frequency', unit: 'Hz' },
  ENER: { quantity: 'energy', unit: 'J' },
  WAVN: { quantity: 'wavenumber', unit: 'm-1' },
  VRAD: { quantity: 'velocity', unit: 'm/s' },
  VOPT: { quantity: 'velocity', unit: 'm/s' },
  VELO: { quantity: 'velocity', unit: 'm/s' },
  ZOPT: { quantity: 'velocity', unit: '' },
  BETA: { quantity: 'velocity', unit: '' },
};
/** Axis types that are positions or something else: such an image is no spectrum. */
const NOT_SPECTRAL = /^(?:RA--|DEC-|GLON|GLAT|ELON|ELAT|TIME|STOKES|UTC|TAI|TDB|MJD)/;

/** The spectral axis that the header of an image describes; refuses when there is none or its algorithm is not known. */
export function imageAxis(place: AxisPlace, context: ReadContext): ImageAxis {
  const { hdu, k } = place;
  const ctype = (hdu.header.text(`CTYPE${k}`) ?? '').toUpperCase();
  if (NOT_SPECTRAL.test(ctype))
    refuse('no_spectrum', `The axis of the image in ${hdu.place} is ${quoted(ctype)}, not a spectral axis.`, { card: `CTYPE${k}` });
  const code = CODES[ctype.slice(0, 4)];
  const step = stepOf(place, context.warnings);
  const isCoded = code !== undefined && (ctype.length === 4 || ctype[4] === '-');
  return isCoded ? codedAxis(place, ctype, code, step, context) : plainAxis(place, ctype, step, context);
}

/** Greisen et al. 2006, A&A 446, 747 (Paper III): the ten codes, linear, logarithmic and the two reciprocal algorithms. */
function codedAxis(place: AxisPlace, ctype: string, code: AxisCode, step: Step, context: ReadContext): ImageAxis {
  const { hdu, k } = place;
  const type = ctype.slice(0, 4);
  const card = `CTYPE${k}`;
  const values = nonLinear(place, ctype, step);
  if (code.quantity === 'velocity') return velocityAxis(place, type, values, context.corrections);
  const cunit = hdu.header.text(`CUNIT${k}`) ?? '';
  const unit = cunit || defaultUnit(values, code, place, context);
  const where = cunit ? `CUNIT${k}` : `default unit of ${card} ${type}`;
  const axis = settleAxis(values, { name: type, quantity: code.quantity, unit, where }, context);
  return { name: type, axis, medium: code.medium ? stated(code.medium, card) : null };
}

/** Values along the axis in the unit of the header, by the algorithm in the second half of CTYPE. */
function nonLinear({ hdu, k, length }: AxisPlace, ctype: string, step: Step): Float64Array {
  const type = ctype.slice(0, 4);
  const algorithm = ctype.slice(4).replace(/^-+/, '');
  const values = linear(step, length);
  const { reference } = step;
  if (algorithm === '') return values;
  if (algorithm === 'LOG') {
    for (let i = 0; i < length; i++) values[i] = reference * Math.exp((values[i]! - reference) / reference);
    return values;
  }
  // pixels even in the reciprocal: frequency under a wavelength, or wavelength under a frequency
  if ((type === 'WAVE' && algorithm === 'F2W') || (['FREQ', 'ENER', 'WAVN'].includes(type) && algorithm === 'W2F')) {
    for (let i = 0; i < length; i++) values[i] = reference / (1 - (values[i]! - reference) / reference);
    return values;
  }
  refuse(
    'unsupported_algorithm',
    `The algorithm ${quoted(ctype)} of the spectral axis in ${hdu.place} is not supported; only linear axes, -LOG, -F2W, -W2F and -TAB are. Write the wavelengths into a table.`,
    { card: `CTYPE${k}` },
  );
}

/** 10 nm to 1 mm: wavelengths of spectra. */
const SHORTEST_M = 1e-8;
const LONGEST_M = 1e-3;

/**
 * The standard's own unit where CUNIT is missing. Wavelengths that cannot be metres were meant in another unit: that is asked
 * and not guessed, for a code of Paper III promises the standard's unit.
 */
function defaultUnit(values: Float64Array, code: AxisCode, place: AxisPlace, context: ReadContext): string {
  if (code.quantity !== 'length' || context.corrections.axisUnit) return code.unit;
  const [first, last] = [values[0]!, values.at(-1)!];
  const [min, max] = [Math.min(first, last), Math.max(first, last)];
  if (min >= SHORTEST_M && max <= LONGEST_M) return code.unit;
  refuse(
    'unknown_axis_unit',
    `CUNIT${place.k} is missing in ${place.hdu.place}. The FITS Standard means metres then, but the values from ${min} to ${max} are no wavelengths in metres${min > 900 ? '; Angstrom is likely' : ''}. Say which unit it is.`,
    { card: `CUNIT${place.k}` },
  );
}
