import { fixed } from '../lib/number.js';
import { niceTicks, tickDigits } from './ticks.js';

const SUPERSCRIPT: Record<string, string> = {
  '-': '⁻',
  '0': '⁰',
  '1': '¹',
  '2': '²',
  '3': '³',
  '4': '⁴',
  '5': '⁵',
  '6': '⁶',
  '7': '⁷',
  '8': '⁸',
  '9': '⁹',
};
const superscript = (n: number) => [...String(n)].map((c) => SUPERSCRIPT[c] ?? c).join('');

/** '10⁻¹⁵ erg/s/cm²/Å'; the bare unit when the exponent is 0. */
export const scaledUnit = (unit: string, exponent: number) =>
  [exponent === 0 ? '' : `10${superscript(exponent)}`, unit].filter(Boolean).join(' ');

/** Tick values of a value axis, about one per `spacingPx`. */
export const valueTicks = (low: number, high: number, heightPx: number, spacingPx = 34) =>
  niceTicks(low, high, Math.max(2, heightPx / spacingPx));

/** Labels with the power of ten taken out. */
export function valueLabels(ticks: readonly number[], exponent: number): string[] {
  const scaled = ticks.map((t) => t / 10 ** exponent);
  const digits = tickDigits(scaled);
  return scaled.map((t) => fixed(t, digits));
}

/** Writes out powers in a FITS unit string: 'erg/s/cm2/Angstrom' becomes 'erg/s/cm²/Å'. */
export const typesetUnit = (unit: string) =>
  unit
    .replace(/Angstroms?/gi, 'Å')
    .replace(/(?<=[a-zÅ])\*{0,2}\^?(-?\d+)/gi, (_, power: string) => superscript(Number(power)))
    .replace(/\*/g, ' ');
