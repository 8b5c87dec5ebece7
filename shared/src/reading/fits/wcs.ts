import {
  fromOpticalVelocity,
  fromRadioVelocity,
  C_M_PER_S,
  dopplerFactor,
  type KmPerS,
  type Medium,
  type VacuumNm,
} from '../../units/index.js';
import { parseAxisUnit } from '../columns/axis-unit.js';
import { settleAxis, unitOfRange, type Axis } from '../columns/axis.js';
import { stated } from '../columns/medium.js';
import { axisQuantity, type SpectralQuantity } from '../columns/words.js';
import { quoted, refuse } from '../refusal.js';
import type { ReadingCorrections, ReadWarning, Stated } from '../types.js';
import { AXIS_UNIT_NAMES } from '../columns/axis-unit.js';
import type { Hdu } from './hdu.js';
import type { Header } from './header.js';

/** Spectral axis of an image: its name, its values in nm and what it says of the medium. */
export interface ImageAxis {
  readonly name: string;
  readonly axis: Axis;
  readonly medium: Stated<Medium> | null;
}

/** Codes of spectral axes with their default units, FITS Standard 4.0 table 25. */
const CODES: Record<string, { quantity: SpectralQuantity; unit: string; medium?: Medium }> = {
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

/** A linear step along the axis in the unit of the header. */
interface Step {
  readonly pixelOfReference: number;
  readonly reference: number;
  readonly perPixel: number;
}

/** The spectral axis that the header of an image describes; refuses when there is none or its algorithm is not known. */
export function imageAxis(hdu: Hdu, k: number, length: number, corrections: ReadingCorrections, warnings: ReadWarning[]): ImageAxis {
  const { header } = hdu;
  const ctype = (header.text(`CTYPE${k}`) ?? '').toUpperCase();
  if (NOT_SPECTRAL.test(ctype))
    refuse('no_spectrum', `The axis of the image in ${hdu.place} is ${quoted(ctype)}, not a spectral axis.`, { card: `CTYPE${k}` });
  const code = CODES[ctype.slice(0, 4)];
  const algorithm = /^.{4}-(.*)$/.exec(ctype)?.[1]?.replace(/^-+/, '') ?? '';
  const isCoded = code !== undefined && (ctype.length === 4 || ctype[4] === '-');
  const step = stepOf(hdu, k, length, warnings);
  if (isCoded) return codedAxis(hdu, k, ctype, algorithm, step, length, corrections, warnings);
  return plainAxis(hdu, k, ctype, step, length, corrections, warnings);
}

function stepOf(hdu: Hdu, k: number, length: number, warnings: ReadWarning[]): Step {
  const { header } = hdu;
  const coefficients = [header.number('COEFF0'), header.number('COEFF1')] as const;
  const cd = header.number(`CD${k}_${k}`);
  const cdelt = header.number(`CDELT${k}`);
  const reference = header.number(`CRVAL${k}`);
  const perPixel = cd !== null && cd !== 0 ? cd : cdelt !== null ? cdelt * (header.number(`PC${k}_${k}`) ?? 1) : null;
  if (reference === null || perPixel === null) {
    if (coefficients[0] !== null && coefficients[1] !== null)
      return { pixelOfReference: 1, reference: coefficients[0], perPixel: coefficients[1] };
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

const linear = (step: Step, length: number): Float64Array =>
  Float64Array.from({ length }, (_, i) => step.reference + (i + 1 - step.pixelOfReference) * step.perPixel);

/** Greisen et al. 2006, A&A 446, 747 (Paper III): the ten codes, linear, logarithmic and the two reciprocal algorithms. */
function codedAxis(
  hdu: Hdu,
  k: number,
  ctype: string,
  algorithm: string,
  step: Step,
  length: number,
  corrections: ReadingCorrections,
  warnings: ReadWarning[],
): ImageAxis {
  const { header } = hdu;
  const type = ctype.slice(0, 4);
  const code = CODES[type]!;
  const card = `CTYPE${k}`;
  const values = linear(step, length);
  const reciprocal = (type === 'WAVE' && algorithm === 'F2W') || (['FREQ', 'ENER', 'WAVN'].includes(type) && algorithm === 'W2F');
  if (algorithm === 'LOG')
    for (let i = 0; i < length; i++) values[i] = step.reference * Math.exp((values[i]! - step.reference) / step.reference);
  else if (reciprocal) for (let i = 0; i < length; i++) values[i] = step.reference / (1 - (values[i]! - step.reference) / step.reference);
  else if (algorithm !== '')
    refuse(
      'unsupported_algorithm',
      `The algorithm ${quoted(ctype)} of the spectral axis in ${hdu.place} is not supported; only linear axes, -LOG, -F2W, -W2F and -TAB are. Write the wavelengths into a table.`,
      { card },
    );
  const cunit = header.text(`CUNIT${k}`) ?? '';
  if (code.quantity === 'velocity') return velocityAxis(hdu, type, values, cunit, card);
  const medium = code.medium ? stated(code.medium, card) : null;
  const unit = cunit || defaultUnit(values, code, type);
  if (cunit === '' && unit === code.unit) {
    const axis = settleAxis(
      values,
      { name: type, quantity: code.quantity, unit, where: `default unit of ${card} ${type}` },
      corrections,
      warnings,
    );
    return { name: type, axis, medium };
  }
  return {
    name: type,
    axis: settleAxis(values, { name: type, quantity: code.quantity, unit, where: `CUNIT${k}` }, corrections, warnings),
    medium,
  };
}

/** Metres are the default, but values that cannot be metres are left to the judgement by range. */
function defaultUnit(values: Float64Array, code: { unit: string; quantity: SpectralQuantity }, name: string): string {
  if (code.quantity !== 'length') return code.unit;
  return unitOfRange(values, name) === 'm' ? code.unit : '';
}

function velocityAxis(hdu: Hdu, type: string, values: Float64Array, cunit: string, card: string): ImageAxis {
  const rest = restWavelengthNm(hdu.header);
  if (rest === null)
    refuse(
      'no_rest_wavelength',
      `The axis ${type} in ${hdu.place} holds velocities, but neither RESTWAV nor RESTFRQ gives the rest wavelength they refer to.`,
      { card: 'RESTWAV' },
    );
  const scale = cunit === '' ? 1e-3 : velocityScale(cunit, card);
  const toNm: Record<string, (v: number) => number> = {
    VRAD: (v) => fromRadioVelocity((v * scale) as KmPerS, rest),
    VOPT: (v) => fromOpticalVelocity((v * scale) as KmPerS, rest),
    VELO: (v) => rest * dopplerFactor((v * scale) as KmPerS),
    ZOPT: (z) => rest * (1 + z),
    BETA: (beta) => rest * Math.sqrt((1 + beta) / (1 - beta)),
  };
  const convert = toNm[type]!;
  for (let i = 0; i < values.length; i++) values[i] = convert(values[i]!);
  const where = `${card}, rest wavelength ${rest.toFixed(4)} nm`;
  return {
    name: type,
    axis: { nm: values, unit: stated('velocity', where), medium: stated('vacuum', 'rest wavelength in vacuum') },
    medium: null,
  };
}

function velocityScale(cunit: string, card: string): number {
  const unit = parseAxisUnit(cunit);
  if (unit?.unit === 'velocity') return unit.scale;
  refuse('unknown_axis_unit', `The unit "${quoted(cunit)}" of the velocity axis is not a unit of velocity. Say which unit it is.`, {
    card,
  });
}

function restWavelengthNm(header: Header): VacuumNm | null {
  const metres = header.number('RESTWAV');
  if (metres !== null && metres > 0) return (metres * 1e9) as VacuumNm;
  const hertz = header.number('RESTFRQ') ?? header.number('RESTFREQ');
  return hertz !== null && hertz > 0 ? (((C_M_PER_S / hertz) * 1e9) as VacuumNm) : null;
}

/** Axes written before Paper III, or without a code: linear or log10, the unit in CUNIT, WAT or nowhere. */
function plainAxis(
  hdu: Hdu,
  k: number,
  ctype: string,
  step: Step,
  length: number,
  corrections: ReadingCorrections,
  warnings: ReadWarning[],
): ImageAxis {
  const { header } = hdu;
  const attributes = watAttributes(header, k);
  const log10 =
    header.number('DC-FLAG') === 1 || header.number('COEFF1') !== null || /LOG/.test(ctype) || /^LOG/i.test(header.text('WFITTYPE') ?? '');
  if (/^(?:multispec)$/i.test(attributes.wtype ?? '')) checkMultispec(header, hdu);
  const values = linear(step, length);
  const named = axisQuantity(ctype) ?? axisQuantity(attributes.label ?? '');
  const cunit = header.text(`CUNIT${k}`) ?? '';
  const unit = cunit && parseAxisUnit(cunit) ? cunit : (attributes.units ?? cunit);
  const quantity: SpectralQuantity = log10 ? 'log10_length' : named && named !== 'log10_length' ? named : 'length';
  const name = ctype === '' ? 'pixel axis' : ctype;
  const axis = settleAxis(values, { name, quantity, unit, where: cunit === unit ? `CUNIT${k}` : `WAT${k}_001` }, corrections, warnings);
  if (axis.unit.how === 'assumed' && log10)
    return { name, axis: { ...axis, unit: { ...axis.unit, where: `log10 of ${AXIS_UNIT_NAMES[axis.unit.value]}` } }, medium: null };
  return { name, axis, medium: null };
}

/** Attribute strings 'wtype=linear label=Wavelength units=angstroms', as image reduction systems write them. */
function watAttributes(header: Header, k: number): Partial<Record<string, string>> {
  const text = header.text(`WAT${k}_001`) ?? '';
  return Object.fromEntries([...text.matchAll(/(\w+)\s*=\s*(?:"([^"]*)"|(\S+))/g)].map((match) => [match[1]!, match[2] ?? match[3]!]));
}

/** A multispec image whose dispersion function is not linear must not be read as if it were. */
function checkMultispec(header: Header, hdu: Hdu) {
  let text = '';
  for (let n = 1; n < 1000; n++) {
    const card = header.get(`WAT2_${String(n).padStart(3, '0')}`);
    if (typeof card !== 'string') break;
    // trailing blanks belong to the string and are lost in a card; they separate words at most
    text += card.padEnd(68);
  }
  const spec = /spec1\s*=\s*"\s*\d+\s+\S+\s+(-?\d+)/.exec(text);
  if (spec && Number(spec[1]) !== 0 && Number(spec[1]) !== 1 && Number(spec[1]) !== -1)
    refuse(
      'unsupported_algorithm',
      `The dispersion function in the WAT2 cards of ${hdu.place} is not linear (type ${spec[1]}), which is not supported. Resample the spectrum or write it into a table.`,
      { card: 'WAT2_001' },
    );
}
