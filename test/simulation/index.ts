export * from './chance.js';
export * from './files.js';
export * from './matter.js';
export * from './recipes.js';
export * from './simulate.js';
export type { Truth, TrueSystem } from './truth.js';
