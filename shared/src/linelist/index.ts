export * from './line.js';
export * from './parse-default.js';
export * from './upload/index.js';
