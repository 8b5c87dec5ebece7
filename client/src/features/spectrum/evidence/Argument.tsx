import type { Candidate } from '@foreveil/shared';
import { How } from './How.js';
import { barLength, factorLabel, PART_WORD } from './odds.js';
import classes from './evidence.module.css';

const BAR = { width: 96, middle: 44, reach: 50 };

/** One factor on the odds: solid bar to the right for, hollow bar to the left against. */
export function OddsBar({ logOdds }: { logOdds: number }) {
  const isFor = logOdds > -0.05;
  const length = Math.max(1, Math.abs(barLength(logOdds)) * (isFor ? BAR.reach : BAR.middle - 4));
  const label = factorLabel(logOdds);
  return (
    <svg width={BAR.width} height={18} role="img" aria-label={`${isFor ? 'for' : 'against'}, odds ${label}`}>
      <line x1={BAR.middle} x2={BAR.middle} y1={0} y2={18} stroke="var(--control)" />
      {isFor ? (
        <rect x={BAR.middle} y={5} width={length} height={8} fill="var(--ink)" />
      ) : (
        <rect x={BAR.middle - length} y={5.5} width={length - 0.5} height={7} fill="none" stroke="var(--ink)" />
      )}
      <text x={isFor ? BAR.middle - 6 : BAR.middle + 6} y={13} textAnchor={isFor ? 'end' : 'start'} fill="var(--ink)">
        {label}
      </text>
    </svg>
  );
}

const NUMBER = '[+\u2212<>~±≥≤]?\\s?\\d[\\d.,\u202f]*';
const FIRST_FIGURE = new RegExp(`${NUMBER}(?:\\s(?:±|of|to)\\s${NUMBER})?(?:\\s(?:km/s|mÅ|Å|nm|%|σ))?`);

/** The first figure of a sentence stands out, so the column can be read down. */
function Emphasised({ sentence }: { sentence: string }) {
  const match = FIRST_FIGURE.exec(sentence);
  if (!match) return sentence;
  const end = match.index + match[0].length;
  return (
    <>
      {sentence.slice(0, match.index)}
      <b>{match[0]}</b>
      {sentence.slice(end)}
    </>
  );
}

/** The five parts as an argument: factors that multiply to the odds of the stated probability. */
export function Argument({ candidate }: { candidate: Candidate }) {
  return (
    <ol className={classes.parts} tabIndex={0} aria-label="Evidence, as factors on the odds">
      {candidate.evidence.map(({ part, logOdds, sentence }) => (
        <li key={part} className={classes.part}>
          <span className={classes.partName}>
            <How of={part}>{PART_WORD[part]}</How>
          </span>
          <span className={classes.partWords}>
            <Emphasised sentence={sentence} />
          </span>
          <OddsBar logOdds={logOdds} />
        </li>
      ))}
    </ol>
  );
}
