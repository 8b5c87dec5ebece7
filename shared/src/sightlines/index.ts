export * from './comparison.js';
export * from './absorber.js';
export * from './growth-fit.js';
export type { Sightline } from './light.js';
