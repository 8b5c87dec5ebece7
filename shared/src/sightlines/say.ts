import type { LineMeasure, Verdict } from './comparison.js';

/** Numbers in sentences: a width in picometres would be nobody's unit, so milliangstrom. */
export const milliangstrom = (nm: number): string => {
  const mA = nm * 1e4;
  return `${Math.abs(mA) < 10 ? mA.toFixed(2) : mA.toFixed(1)} mÅ`;
};
export const kmPerS = (v: number): string => `${v < 0 ? '−' : '+'}${Math.abs(v).toFixed(2)} km/s`;

const width = (side: string, m: LineMeasure | null): string => {
  if (!m) return `not covered in ${side}`;
  if (m.equivalentWidthNm > 3 * m.equivalentWidthSigmaNm)
    return `${milliangstrom(m.equivalentWidthNm)} ± ${milliangstrom(m.equivalentWidthSigmaNm)} in ${side}`;
  return `below ${milliangstrom(m.limitNm)} in ${side} (2σ)`;
};

const ENDS: Record<Verdict, string> = {
  shared: 'both sightlines show it',
  'only-a': 'B would have shown it',
  'only-b': 'A would have shown it',
  telluric: 'it stands still with the Earth’s air',
  'cannot-tell': 'that does not decide',
};

/** Why a line has its verdict. */
export function lineSentence(verdict: Verdict, a: LineMeasure | null, b: LineMeasure | null): string {
  const foreign = [a, b].some((m) => m && m.foreignNm > 0.5 * Math.max(m.equivalentWidthNm, m.limitNm));
  const start = `${width('A', a)}, ${width('B', b)}: ${ENDS[verdict]}`;
  return `${start[0]!.toUpperCase()}${start.slice(1)}${foreign ? '; star or air take light at the same place' : ''}.`;
}
