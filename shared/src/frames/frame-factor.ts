import { velocityOfFactor, type KmPerS } from '../units/index.js';
import { barycentricFactor, geocentricFactor, heliocentricFactor } from './earth.js';
import { localStandardFactor } from './lsr.js';
import type { Observation } from './types.js';

/** Frames that an observer's wavelengths can be brought to; the names of `Frame` and the standard of 2010. */
export type ReachableFrame = 'topocentric' | 'geocentric' | 'heliocentric' | 'barycentric' | 'lsrk' | 'lsrd' | 'lsr_2010';

/**
 * Factor from wavelengths seen by the observer to those in `frame`: multiply. Factors compose by multiplication, and the one
 * between two frames is their quotient.
 */
export function frameFactor(frame: ReachableFrame, observation: Observation): number {
  switch (frame) {
    case 'topocentric':
      return 1;
    case 'geocentric':
      return geocentricFactor(observation);
    case 'heliocentric':
      return heliocentricFactor(observation);
    case 'barycentric':
      return barycentricFactor(observation);
    default:
      return barycentricFactor(observation) * localStandardFactor(frame, observation.pointing);
  }
}

/** Velocity to add, by multiplying Doppler factors, to one measured in `from` to have it in `to`, km/s. */
export const frameVelocity = (from: ReachableFrame, to: ReachableFrame, observation: Observation): KmPerS =>
  velocityOfFactor(frameFactor(to, observation) / frameFactor(from, observation));

/**
 * Velocity, km/s, at which what is at rest with the observer, above all lines of the Earth's air, stands in a spectrum of
 * `frame`. Correcting a spectrum moves these lines along with all others, so it is the correction itself: 0 in a topocentric
 * spectrum, +25 km/s in a barycentric one that was taken while the Earth ran towards the star at 25 km/s. Null for frames that
 * the observer's place and time do not lead to: that of the source, or an unknown one.
 */
export function observerVelocity(frame: string, observation: Observation | null): KmPerS | null {
  if (frame === 'topocentric') return 0 as KmPerS;
  if (!isReachable(frame) || observation === null) return null;
  return velocityOfFactor(frameFactor(frame, observation));
}

const REACHABLE: ReadonlySet<string> = new Set<ReachableFrame>([
  'topocentric',
  'geocentric',
  'heliocentric',
  'barycentric',
  'lsrk',
  'lsrd',
  'lsr_2010',
]);
const isReachable = (frame: string): frame is ReachableFrame => REACHABLE.has(frame);
