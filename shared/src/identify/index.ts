export * from './analysis.js';
export * from './settings-check.js';
export * from './settings-words.js';
