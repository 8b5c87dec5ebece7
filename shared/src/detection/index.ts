export * from './threshold.js';
export * from './scale-space.js';
export * from './model.js';
export * from './detect.js';
export * from './by-hand.js';
export { thin } from './thin.js';
