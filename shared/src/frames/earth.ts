import { BaryState, Body, HelioState, MakeTime, Observer, ObserverState, type StateVector } from 'astronomy-engine';
import { C_KM_PER_S } from '../units/index.js';
import { dot, unitVector, type Observation, type Vector3 } from './types.js';

/** Exact by resolution B2 of the IAU 2012. */
const KM_PER_AU = 149_597_870.7;
const KM_PER_S = KM_PER_AU / 86_400;
const MJD_OF_J2000 = 51_544.5;

/** Nominal mass parameters of Sun and Earth, km^3 s^-2: IAU 2015 resolution B3. */
const GM_SUN = 1.327_124_4e11;
const GM_EARTH = 3.986_004e5;

type Origin = 'barycentre' | 'sun';

/**
 * Motion of the observer: of the Earth's centre about the origin and of the site about the centre, in km and km/s on the axes
 * of the ICRS (the ephemeris is on those of J2000, 0.02 arcsec away).
 */
function motion({ mjdUtc, site }: Observation, origin: Origin) {
  const time = MakeTime(mjdUtc - MJD_OF_J2000);
  const earth = origin === 'sun' ? HelioState(Body.Earth, time) : BaryState(Body.Earth, time);
  const place = ObserverState(time, new Observer(site.latitudeDeg, site.longitudeDegEast, site.heightM), false);
  return {
    orbit: velocityOf(earth),
    spin: velocityOf(place),
    fromSunKm: distanceOf(HelioState(Body.Earth, time)),
    fromCentreKm: distanceOf(place),
  };
}

const velocityOf = ({ vx, vy, vz }: StateVector): Vector3 => [vx * KM_PER_S, vy * KM_PER_S, vz * KM_PER_S];
const distanceOf = ({ x, y, z }: StateVector): number => Math.hypot(x, y, z) * KM_PER_AU;
const plus = (a: Vector3, b: Vector3): Vector3 => [a[0] + b[0], a[1] + b[1], a[2] + b[2]];

/**
 * Factor that turns wavelengths seen by the observer into those seen at rest at the barycentre of the solar system, beyond its
 * gravity: multiply. With the observer's motion go time dilation and the potentials of Sun and Earth, 4.7 m/s together.
 * Source: Wright & Eastman 2014, PASP 126, 838, eq. 28, without the motion of the star and Shapiro's delay.
 */
export function barycentricFactor(observation: Observation): number {
  const { orbit, spin, fromSunKm, fromCentreKm } = motion(observation, 'barycentre');
  const velocity = plus(orbit, spin);
  const beta = dot(velocity, unitVector(observation.pointing)) / C_KM_PER_S;
  const gamma = 1 / Math.sqrt(1 - dot(velocity, velocity) / C_KM_PER_S ** 2);
  const potential = (GM_SUN / fromSunKm + GM_EARTH / fromCentreKm) / C_KM_PER_S ** 2;
  return gamma * (1 + beta) * (1 + potential);
}

/** The same to the Sun's centre, as the trade computes it: the projected motion alone. */
export function heliocentricFactor(observation: Observation): number {
  const { orbit, spin } = motion(observation, 'sun');
  return 1 + dot(plus(orbit, spin), unitVector(observation.pointing)) / C_KM_PER_S;
}

/** The same to the Earth's centre: its rotation alone, at most 465 m/s. */
export function geocentricFactor(observation: Observation): number {
  return 1 + dot(motion(observation, 'sun').spin, unitVector(observation.pointing)) / C_KM_PER_S;
}
