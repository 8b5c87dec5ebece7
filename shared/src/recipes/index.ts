export * from './corrections.js';
export * from './signature.js';
