import { frameVelocity, localStandardFactor, type LocalStandard, type ReachableFrame } from '../frames/index.js';
import { velocityOfFactor, type KmPerS } from '../units/index.js';
import type { Reading } from './types.js';

/** A frame that velocities can be shown in, and what to add to them, by multiplying Doppler factors, to have them there. */
export interface OfferedFrame {
  readonly to: ReachableFrame;
  readonly addKmPerS: KmPerS;
}

const STANDARDS: readonly LocalStandard[] = ['lsrk', 'lsrd', 'lsr_2010'];

/**
 * Frames that the velocities of a spectrum can be brought to. The Earth's motion is taken off only where it is still in, which is in
 * a topocentric or geocentric spectrum, and only where time, site and pointing are known. From the Sun or the barycentre the local
 * standards of rest need the pointing alone. Nothing is offered from an unknown frame.
 */
export function offeredFrames({ frame, midMjdUtc, site, pointing }: Reading): OfferedFrame[] {
  if (pointing.value === null) return [];
  const direction = pointing.value;
  if (frame.value === 'barycentric' || frame.value === 'heliocentric')
    return STANDARDS.map((to) => ({ to, addKmPerS: velocityOfFactor(localStandardFactor(to, direction)) }));
  if ((frame.value !== 'topocentric' && frame.value !== 'geocentric') || midMjdUtc.value === null || site.value === null) return [];
  const from = frame.value;
  const observation = { mjdUtc: midMjdUtc.value, site: site.value, pointing: direction };
  const targets: ReachableFrame[] = ['barycentric', 'heliocentric', ...STANDARDS];
  return targets.map((to) => ({ to, addKmPerS: frameVelocity(from, to, observation) }));
}
