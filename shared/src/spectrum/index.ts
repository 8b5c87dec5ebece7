export * from './spectrum.js';
