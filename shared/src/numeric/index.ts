export * from './select.js';
export * from './chebyshev.js';
export * from './linear.js';
