export { barycentricFactor, geocentricFactor, heliocentricFactor } from './earth.js';
export * from './frame-factor.js';
export { localStandardFactor, solarMotion, type LocalStandard } from './lsr.js';
export { atJ2000, geodeticOf } from './place.js';
export { isoOfMjd, mjdOfIso, taiMinusUtc, utcOf } from './time.js';
export type { GeodeticSite, IcrsDirection, Observation } from './types.js';
