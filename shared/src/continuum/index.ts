export * from './planck.js';
export * from './extinction.js';
export * from './planck-fit.js';
export { fitContinuum, type ContinuumFit } from './fit.js';
