export * from './api.js';
export * from './comparisons.js';
export * from './errors.js';
export * from './line-lists.js';
export * from './paths.js';
export * from './roles.js';
export * from './samples.js';
export * from './mail.js';
