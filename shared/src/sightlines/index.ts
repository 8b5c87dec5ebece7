export * from './comparison.js';
