export * from './shapes.js';
export * from './component.js';
export * from './blend.js';
