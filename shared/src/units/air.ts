import type { AirNm, Medium, VacuumNm } from './types.js';

/** Below this vacuum wavelength spectra are in vacuum by convention, nm. */
export const AIR_STARTS_NM = 200;

/**
 * Refractivity n - 1 of standard air (15 C, 101325 Pa, dry), dimensionless.
 * @param vacuum wavelength, 200-2500 nm; below 200 nm wavelengths are vacuum by convention and this is not called
 * Source: Morton 2000, ApJS 130, 403, the relation adopted with the IAU standard.
 */
export function airRefractivity(vacuum: number): number {
  const s = 1e3 / vacuum; // vacuum wavenumber, 1/um
  const s2 = s * s;
  return 8.34254e-5 + 2.406147e-2 / (130 - s2) + 1.5998e-4 / (38.9 - s2);
}

/** Wavelength in standard air of a vacuum wavelength; unchanged below 200 nm. */
export function vacuumToAir(vacuum: VacuumNm): AirNm {
  if (!(vacuum >= AIR_STARTS_NM)) return vacuum as number as AirNm;
  return (vacuum / (1 + airRefractivity(vacuum))) as AirNm;
}

/** Air wavelength of the first vacuum wavelength that the convention converts, nm. */
const FIRST_AIR_NM = AIR_STARTS_NM / (1 + airRefractivity(AIR_STARTS_NM));

/**
 * Vacuum wavelength of a wavelength in standard air: the exact inverse of `vacuumToAir`, by iteration (each step gains a
 * factor of about 1e5). Unchanged below the air wavelength of 200 nm in vacuum.
 */
export function airToVacuum(air: AirNm): VacuumNm {
  if (!(air >= FIRST_AIR_NM)) return air as number as VacuumNm;
  let vacuum: number = air;
  for (let step = 0; step < 8; step++) {
    const next: number = air * (1 + airRefractivity(vacuum));
    if (next === vacuum) break;
    vacuum = next;
  }
  return vacuum as VacuumNm;
}

/** A column of wavelengths in nm of the given medium, turned into vacuum nm in place. */
export function toVacuumInPlace(nm: Float64Array, medium: Medium): Float64Array {
  if (medium === 'vacuum') return nm;
  for (let i = 0; i < nm.length; i++) nm[i] = airToVacuum(nm[i]! as AirNm);
  return nm;
}
