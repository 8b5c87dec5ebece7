export * from './smear.js';
export * from './shapes.js';
export * from './damped.js';
export * from './component.js';
export * from './samples.js';
export * from './blend.js';
