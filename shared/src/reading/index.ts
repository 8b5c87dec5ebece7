export { DEFAULT_READ_LIMITS, type ReadLimits } from './limits.js';
export { readSpectrum } from './read-spectrum.js';
export * from './types.js';
