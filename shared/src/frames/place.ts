import type { GeodeticSite, IcrsDirection } from './types.js';

const RAD = Math.PI / 180;
/** WGS 84: equatorial radius, m, and flattening (NIMA TR 8350.2). */
const A = 6_378_137;
const F = 1 / 298.257_223_563;
const E2 = F * (2 - F);

/** Geocentric coordinates, m, as OBSGEO-X, -Y, -Z give them, to a geodetic place; null when they are not near the Earth's surface. */
export function geodeticOf(x: number, y: number, z: number): GeodeticSite | null {
  const radius = Math.hypot(x, y, z);
  if (!(radius > 6.3e6 && radius < 6.5e6)) return null;
  const across = Math.hypot(x, y);
  let latitude = Math.atan2(z, across * (1 - E2));
  // each round gains three digits at the surface
  for (let i = 0; i < 6; i++) latitude = Math.atan2(z + E2 * primeVertical(latitude) * Math.sin(latitude), across);
  const [sin, cos] = [Math.sin(latitude), Math.cos(latitude)];
  const heightM = across * cos + z * sin - A * Math.sqrt(1 - E2 * sin * sin);
  return { latitudeDeg: latitude / RAD, longitudeDegEast: Math.atan2(y, x) / RAD, heightM };
}

const primeVertical = (latitude: number): number => A / Math.sqrt(1 - E2 * Math.sin(latitude) ** 2);

/**
 * A direction of another mean equinox in that of J2000, by the precession of IAU 1976 (Lieske et al. 1977, A&A 58, 1). Good to
 * 2 arcsec, also from FK4 of 1950, where the E-terms of aberration and the equinox correction are left out: 0.3 m/s in a velocity.
 */
export function atJ2000({ raDeg, decDeg }: IcrsDirection, equinoxYear: number): IcrsDirection {
  const t = (equinoxYear - 2000) / 100;
  const arcsec = RAD / 3600;
  const zeta = (2306.2181 * t + 0.301_88 * t * t + 0.017_998 * t ** 3) * arcsec;
  const z = (2306.2181 * t + 1.094_68 * t * t + 0.018_203 * t ** 3) * arcsec;
  const theta = (2004.3109 * t - 0.426_65 * t * t - 0.041_833 * t ** 3) * arcsec;
  // the angles lead from J2000 to the equinox; here the way back
  const [ra, dec] = [raDeg * RAD - z, decDeg * RAD];
  const a = Math.cos(dec) * Math.sin(ra);
  const b = Math.cos(theta) * Math.cos(dec) * Math.cos(ra) + Math.sin(theta) * Math.sin(dec);
  const c = -Math.sin(theta) * Math.cos(dec) * Math.cos(ra) + Math.cos(theta) * Math.sin(dec);
  const back = (Math.atan2(a, b) - zeta) / RAD;
  return { raDeg: ((back % 360) + 360) % 360, decDeg: Math.asin(Math.max(-1, Math.min(1, c))) / RAD };
}
