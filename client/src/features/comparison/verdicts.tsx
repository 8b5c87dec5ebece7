import type { ComparedLine, ComparisonDetail, Verdict, VerdictRuling } from '@foreveil/shared';
import { speciesName } from '../../lib/species.js';

export const VERDICT_WORD: Record<Verdict, string> = {
  shared: 'shared',
  'only-a': 'only A',
  'only-b': 'only B',
  telluric: 'telluric',
  'cannot-tell': 'cannot tell',
};

/** A line with the verdict that stands: a person's, or else the computed one. */
export interface JudgedLine extends ComparedLine {
  readonly stands: Verdict;
  readonly ruling: VerdictRuling | null;
}

export function judgedLines({ result, rulings }: ComparisonDetail): JudgedLine[] {
  const byKey = new Map(rulings.map((r) => [r.lineKey, r]));
  return (result?.lines ?? []).map((line) => {
    const ruling = byKey.get(line.key) ?? null;
    return { ...line, ruling, stands: ruling?.verdict ?? line.verdict };
  });
}

/** 'Na I 589.76', vacuum nm. */
export const lineName = ({ species, restNm }: { species: string; restNm: number }): string =>
  `${speciesName(species)} ${restNm.toFixed(2)}`;

/** '120', '> 1000': odds for the verdict against all others. */
export function oddsOf(p: number): string {
  const odds = p / (1 - p);
  if (odds > 1000) return '> 1000';
  return odds >= 10 ? odds.toFixed(0) : odds.toFixed(1);
}

const THREAD: Record<Verdict, string> = {
  shared: 'M7 3v10',
  'only-a': 'M7 3v4.5M4.5 8h5',
  'only-b': 'M7 13v-4.5M4.5 8h5',
  telluric: 'M4 5v6M10 5v6',
  'cannot-tell': 'M7 3v10',
};

/** Two short strips: joined, ended above, ended below, broken, or with the air's two bars. */
export function VerdictSign({ verdict }: { verdict: Verdict }) {
  const colour = verdict === 'telluric' ? 'var(--telluric)' : 'var(--interstellar)';
  return (
    <svg width="14" height="16" viewBox="0 0 14 16" fill="none" stroke={colour} strokeWidth="1.6" aria-hidden="true">
      <path d="M1 2.5h12M1 13.5h12" stroke="var(--ink-3)" strokeWidth="2" />
      <path d={THREAD[verdict]} strokeDasharray={verdict === 'cannot-tell' ? '1.5 2' : undefined} />
    </svg>
  );
}
