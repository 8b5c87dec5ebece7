import type { Reliability } from './reliability.js';
export const RELIABILITY: Reliability = { programVersion: '', lineListVersion: '', seed: 0, spectra: {}, families: [] };
