export * from './planck.js';
export * from './extinction.js';
export { fitContinuum, type ContinuumFit } from './fit.js';
