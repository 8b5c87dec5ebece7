export * from './growth.js';
export * from './interstellar.js';
export * from './ionisation.js';
export * from './nebula.js';
export * from './photosphere.js';
