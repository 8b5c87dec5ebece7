export * from './transitions.js';
export * from './reading-in-words.js';
