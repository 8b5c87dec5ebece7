export * from './planck.js';
export * from './extinction.js';
export * from './planck-fit.js';
export { fitContinuum } from './fit.js';
export type { ContinuumFit } from './model.js';
export { moveAt, moveContinuum } from './by-hand.js';
