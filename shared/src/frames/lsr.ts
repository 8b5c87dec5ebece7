import { C_KM_PER_S } from '../units/index.js';
import { dot, unitVector, type IcrsDirection, type Vector3 } from './types.js';

export type LocalStandard = 'lsrk' | 'lsrd' | 'lsr_2010';

/**
 * Motion of the Sun against the local standards of rest, km/s. `lsrk`: 20 km/s towards 18h +30 deg of 1900, the kinematic
 * standard of FITS (Greisen et al. 2006, A&A 446, 747, section 4.3.2; Gordon 1976). `lsrd`: (U, V, W) = (9, 12, 7), Delhaye 1965, what
 * FITS means by LSRD. `lsr_2010`: (11.1, 12.24, 7.25), Schönrich, Binney & Dehnen 2010, MNRAS 403, 1829.
 */
const GALACTIC: Record<Exclude<LocalStandard, 'lsrk'>, Vector3> = { lsrd: [9, 12, 7], lsr_2010: [11.1, 12.24, 7.25] };

/** ICRS directions of the axes U (towards l = 0), V (l = 90) and W (the pole): ESA 1997, SP-1200, Hipparcos catalogue vol. 1, eq. 1.5.11. */
const AXES: readonly [Vector3, Vector3, Vector3] = [
  [-0.054_875_560_4, -0.873_437_090_2, -0.483_835_015_5],
  [0.494_109_427_9, -0.444_829_63, 0.746_982_244_5],
  [-0.867_666_149, -0.198_076_373_4, 0.455_983_776_2],
];

/** The apex 18h +30 deg of B1900 in ICRS, degrees: precessed with the matrices of IAU 1976 and FK4 by astropy 5.2.1. */
const LSRK_APEX: IcrsDirection = { raDeg: 270.959_285, decDeg: 30.004_655 };
const LSRK_KM_PER_S = 20;

/** The Sun's motion on the axes of the ICRS, km/s. */
export function solarMotion(standard: LocalStandard): Vector3 {
  if (standard === 'lsrk') {
    const [x, y, z] = unitVector(LSRK_APEX);
    return [LSRK_KM_PER_S * x, LSRK_KM_PER_S * y, LSRK_KM_PER_S * z];
  }
  const [u, v, w] = GALACTIC[standard];
  const along = (k: 0 | 1 | 2) => u * AXES[0][k] + v * AXES[1][k] + w * AXES[2][k];
  return [along(0), along(1), along(2)];
}

/** Factor that turns barycentric wavelengths into those in a local standard of rest. */
export const localStandardFactor = (standard: LocalStandard, pointing: IcrsDirection): number =>
  1 + dot(solarMotion(standard), unitVector(pointing)) / C_KM_PER_S;
