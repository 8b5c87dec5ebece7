export * from './air.js';
export * from './constants.js';
export * from './doppler.js';
export * from './flux.js';
export * from './spectral.js';
export * from './types.js';
