export * from './select.js';
export * from './chebyshev.js';
export * from './linear.js';
export * from './faddeeva.js';
export * from './normal.js';
export * from './running-quantile.js';
