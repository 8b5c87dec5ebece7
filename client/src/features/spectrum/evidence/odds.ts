import type { EvidencePart } from '@foreveil/shared';

export const PART_WORD: Record<EvidencePart['part'], string> = {
  position: 'Position',
  strength: 'Strength',
  companions: 'Companions',
  width: 'Width',
  chance: 'Chance',
};

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';
const power = (n: number) => `10${[...String(n)].map((d) => SUPERSCRIPTS[Number(d)]).join('')}`;

/** A number above one in at most two figures: 1.4, 13, 130, 10⁵. */
function twoFigures(v: number): string {
  if (v < 1.95) return v.toFixed(1);
  if (v < 9.5) return String(Number(v.toPrecision(v < 3 ? 2 : 1)));
  if (v < 9_500) return String(Number(v.toPrecision(2)));
  return power(Math.round(Math.log10(v)));
}

/** A factor on the odds: '×20' speaks for the reading, '÷4' against it. */
export function factorLabel(logOdds: number): string {
  if (Math.abs(logOdds) < 0.05) return '×1';
  return logOdds > 0 ? `×${twoFigures(Math.exp(logOdds))}` : `÷${twoFigures(Math.exp(-logOdds))}`;
}

/** Odds in words: '36 to 1', '1 to 4'. */
export const oddsLabel = (logOdds: number) =>
  logOdds >= 0 ? `${twoFigures(Math.exp(logOdds))} to 1` : `1 to ${twoFigures(Math.exp(-logOdds))}`;

/** Factors beyond this fill the bar. */
const FULL = Math.log(150);

/** Length of a bar, -1 (against) to 1 (for). */
export const barLength = (logOdds: number) => Math.max(-1, Math.min(1, logOdds / FULL));

/** The factors multiply: their logarithms add to the odds that the stated probability means. */
export const together = (evidence: readonly EvidencePart[]) => evidence.reduce((sum, e) => sum + e.logOdds, 0);
