export { DEFAULT_READ_LIMITS, type ReadLimits } from './limits.js';
export { offeredFrames, type OfferedFrame } from './offered.js';
export { readSpectrum } from './read-spectrum.js';
export * from './types.js';
