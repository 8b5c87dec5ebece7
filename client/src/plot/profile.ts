import { dampedTable, dampedValue, type Feature } from '@foreveil/shared';

/** The measurements a fitted profile can be drawn from. */
export type ProfileNumbers = Pick<Feature, 'wavelengthNm' | 'fwhmNm' | 'depth' | 'equivalentWidthNm' | 'kind' | 'damped'>;

// Areas of profiles of unit peak and unit FWHM.
const GAUSS_AREA = Math.sqrt(Math.PI / (4 * Math.LN2));
const LORENTZ_REACH = 12; // FWHM; the fit cuts its wings there
const LORENTZ_AREA = Math.atan(2 * LORENTZ_REACH);
/** Rotation with linear limb darkening 0.6 (Gray, The Observation and Analysis of Stellar Photospheres): full width at half maximum 1.5588 v sin i. */
const ROTATION_HALF_BASE = 1 / 1.5588;
const ROTATION_AREA = 0.9253;

const gauss = (u: number) => Math.exp(-4 * Math.LN2 * u * u);
const lorentz = (u: number) => 1 / (1 + 4 * u * u);
const rotation = (u: number) => {
  const q = 1 - (u / ROTATION_HALF_BASE) ** 2;
  return q <= 0 ? 0 : (0.8 * Math.sqrt(q) + 0.3 * Math.PI * q) / (0.8 + 0.3 * Math.PI);
};

/** A profile of unit peak; `reachNm` is where it may be taken as zero. */
export interface DrawnProfile {
  readonly reachNm: number;
  /** nm from the centre on which it is worth drawing by itself */
  readonly stretchNm: number;
  readonly at: (nm: number) => number;
}

/** A saturated line with damping wings, from the parameters of its fit. */
function dampedProfile({ wavelengthNm, fwhmNm }: ProfileNumbers, { dopplerNm, ...shape }: NonNullable<Feature['damped']>): DrawnProfile {
  const table = dampedTable(shape);
  return {
    reachNm: table.reach * dopplerNm,
    stretchNm: Math.min(table.reach * dopplerNm, 4 * fwhmNm),
    at: (nm) => dampedValue(table, Math.abs(nm - wavelengthNm) / dopplerNm),
  };
}

/**
 * The fitted shape where its parameters are known, else one that has the measured centre, width, depth and equivalent width: area / (depth x FWHM) lies at 0.93 for pure rotation, 1.06
 * for a Gaussian and 1.53 for a Lorentzian, and a mixture of neighbours fills what is between.
 */
export function drawnProfile(f: ProfileNumbers): DrawnProfile {
  if (f.damped) return dampedProfile(f, f.damped);
  const area = Math.abs(f.equivalentWidthNm / (f.depth * f.fwhmNm)) || GAUSS_AREA;
  const wings = Math.min(1, Math.max(0, (area - GAUSS_AREA) / (LORENTZ_AREA - GAUSS_AREA)));
  const spin = Math.min(1, Math.max(0, (GAUSS_AREA - area) / (GAUSS_AREA - ROTATION_AREA)));
  const reach = wings > 0.02 ? LORENTZ_REACH : 1.8;
  return {
    reachNm: reach * f.fwhmNm,
    stretchNm: (wings > 0.02 ? 4 : 1.5) * f.fwhmNm,
    at: (nm) => {
      const u = Math.abs(nm - f.wavelengthNm) / f.fwhmNm;
      if (u > reach) return 0;
      if (spin > 0) return spin * rotation(u) + (1 - spin) * gauss(u);
      return wings > 0.02 ? wings * lorentz(u) + (1 - wings) * gauss(u) : gauss(u);
    },
  };
}
