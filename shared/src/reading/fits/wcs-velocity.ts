import { C_M_PER_S, dopplerFactor, fromOpticalVelocity, fromRadioVelocity, type KmPerS, type VacuumNm } from '../../units/index.js';
import { parseAxisUnit } from '../columns/axis-unit.js';
import { stated } from '../columns/medium.js';
import { quoted, refuse } from '../refusal.js';
import type { ReadingCorrections } from '../types.js';
import type { Header } from './header.js';
import type { AxisPlace, ImageAxis } from './axis-place.js';

/** Wavelength of a velocity, redshift or v/c about a rest wavelength, by axis code (Paper III table 3). */
const TO_NM: Record<string, (value: number, rest: VacuumNm) => number> = {
  VRAD: (v, rest) => fromRadioVelocity(v as KmPerS, rest),
  VOPT: (v, rest) => fromOpticalVelocity(v as KmPerS, rest),
  VELO: (v, rest) => rest * dopplerFactor(v as KmPerS),
  ZOPT: (z, rest) => rest * (1 + z),
  BETA: (beta, rest) => rest * Math.sqrt((1 + beta) / (1 - beta)),
};

/** An axis of velocities, turned into vacuum nm in place by the rest wavelength in the header. */
export function velocityAxis({ hdu, k }: AxisPlace, type: string, values: Float64Array, corrections: ReadingCorrections): ImageAxis {
  const rest = (corrections.restWavelengthNm as VacuumNm | undefined) ?? restWavelengthNm(hdu.header);
  if (rest === null)
    refuse(
      'no_rest_wavelength',
      `The axis ${type} in ${hdu.place} holds velocities, but neither RESTWAV nor RESTFRQ gives the rest wavelength they refer to.`,
      { card: 'RESTWAV' },
    );
  const toNm = TO_NM[type]!;
  const scale = type === 'ZOPT' || type === 'BETA' ? 1 : kmPerSInUnit(hdu.header.text(`CUNIT${k}`) ?? 'm/s', `CUNIT${k}`);
  for (let i = 0; i < values.length; i++) values[i] = toNm(values[i]! * scale, rest);
  const where = `CTYPE${k}, rest wavelength ${rest.toFixed(4)} nm`;
  return {
    name: type,
    axis: { nm: values, unit: stated('velocity', where), medium: stated('vacuum', 'rest wavelength in vacuum') },
    medium: null,
  };
}

function kmPerSInUnit(cunit: string, card: string): number {
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
