export * from './model.js';
export * from './der-snr.js';
export * from './estimate.js';
