import type { Medium } from '../../units/index.js';
import type { Frame } from '../../spectrum/index.js';
import type { Stated } from '../types.js';

/** Codes of SPECSYS, FITS Standard 4.0 table 27; a code without a counterpart here stays unknown. */
const SPECSYS: Record<string, Frame> = {
  TOPOCENT: 'topocentric',
  GEOCENTR: 'geocentric',
  BARYCENT: 'barycentric',
  HELIOCEN: 'heliocentric',
  LSRK: 'lsrk',
  LSRD: 'lsrd',
  SOURCE: 'source',
};
const FRAME_STARTS: [string, Frame][] = [
  ['topo', 'topocentric'],
  ['observatory', 'topocentric'],
  ['geo', 'geocentric'],
  ['bary', 'barycentric'],
  ['helio', 'heliocentric'],
  ['lsrd', 'lsrd'],
  ['lsr', 'lsrk'],
  ['rest', 'source'],
  ['source', 'source'],
  ['stellar rest', 'source'],
];

/** A velocity frame in the words of a file: 'BARYCENT', 'heliocentric', 'LSRK'; null when it is none of ours. */
export function parseFrame(text: string): Frame | null {
  const code = SPECSYS[text.trim().toUpperCase()];
  if (code) return code;
  const lower = text.trim().toLowerCase();
  return FRAME_STARTS.find(([start]) => lower.startsWith(start))?.[1] ?? null;
}

export const stated = <T>(value: T, where: string): Stated<T> => ({ value, how: 'stated', where });
export const notStated = <T>(value: T): Stated<T> => ({ value, how: 'not_stated', where: '' });
export const assumed = <T>(value: T, where: string): Stated<T> => ({ value, how: 'assumed', where });

/** Medium of a UCD of the spectral axis: 'em.wl;obs.atmos' is air, 'em.wl' vacuum (IVOA Spectrum DM 1.2); null for another. */
export function mediumOfUcd(ucd: string, where: string): Stated<Medium> | null {
  const parts = ucd.trim().toLowerCase().split(';');
  if (!/^em\.wl(?:\.|$)/.test(parts[0] ?? '')) return null;
  return stated(parts.includes('obs.atmos') ? 'air' : 'vacuum', where);
}
