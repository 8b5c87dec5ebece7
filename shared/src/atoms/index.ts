export * from './ionisation.js';
export * from './photosphere.js';
