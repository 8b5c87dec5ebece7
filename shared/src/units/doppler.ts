import { C_KM_PER_S, type KmPerS, type VacuumNm } from './types.js';

/**
 * Relativistic Doppler factor, observed over rest wavelength, of a source receding at `velocity`; larger than 1 when receding.
 * Velocities compose by multiplying factors, never by adding.
 */
export function dopplerFactor(velocity: KmPerS): number {
  const beta = velocity / C_KM_PER_S;
  return Math.sqrt((1 + beta) / (1 - beta));
}

/** The inverse of `dopplerFactor`. */
export function velocityOfFactor(factor: number): KmPerS {
  // (f^2 - 1) / (f^2 + 1) loses digits near f = 1; f - 1 is exact there
  return ((C_KM_PER_S * (factor - 1) * (factor + 1)) / (factor * factor + 1)) as KmPerS;
}

/** Relativistic Doppler velocity of a line at rest wavelength `rest` seen at `observed`; positive when receding. */
export function dopplerVelocity(observed: VacuumNm, rest: VacuumNm): KmPerS {
  const o: number = observed;
  const r: number = rest;
  return ((C_KM_PER_S * (o - r) * (o + r)) / (o * o + r * r)) as KmPerS;
}

/** Where a line of rest wavelength `rest` is seen when its source recedes at `velocity`. */
export const shifted = (rest: VacuumNm, velocity: KmPerS): VacuumNm => (rest * dopplerFactor(velocity)) as VacuumNm;

/** The velocity that two successive motions along the line of sight make together. */
export const composeVelocities = (a: KmPerS, b: KmPerS): KmPerS => velocityOfFactor(dopplerFactor(a) * dopplerFactor(b));

/** Radio velocity c (1 - rest / observed), VRAD of FITS. Source: Greisen et al. 2006, A&A 446, 747, table 3. */
export const radioVelocity = (observed: VacuumNm, rest: VacuumNm): KmPerS => ((C_KM_PER_S * (observed - rest)) / observed) as KmPerS;

/** Optical velocity c (observed / rest - 1), VOPT of FITS. Source as above. */
export const opticalVelocity = (observed: VacuumNm, rest: VacuumNm): KmPerS => ((C_KM_PER_S * (observed - rest)) / rest) as KmPerS;

/** Wavelength of a radio velocity. */
export const fromRadioVelocity = (velocity: KmPerS, rest: VacuumNm): VacuumNm => (rest / (1 - velocity / C_KM_PER_S)) as VacuumNm;

/** Wavelength of an optical velocity. */
export const fromOpticalVelocity = (velocity: KmPerS, rest: VacuumNm): VacuumNm => (rest * (1 + velocity / C_KM_PER_S)) as VacuumNm;
