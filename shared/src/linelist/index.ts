export * from './line.js';
export * from './parse-default.js';
