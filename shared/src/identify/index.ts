export * from './analysis.js';
export * from './settings-check.js';
export * from './settings-words.js';
export * from './reliability.js';
export * from './reliability-data.js';
export * from './compare-runs.js';
