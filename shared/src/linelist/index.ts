export * from './line.js';
