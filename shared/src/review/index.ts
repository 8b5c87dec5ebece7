export * from './transitions.js';
