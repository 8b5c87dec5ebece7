import type { ReadingEvent } from '@foreveil/shared';
import { correctionWords } from '../../components/reading/words.js';
import { count, fixed } from '../../lib/number.js';
import { day } from '../../lib/time.js';
import classes from './file.module.css';

/** Every way in which the file was read, the one that holds first. */
export function ReadingHistory({ readings }: { readings: readonly ReadingEvent[] }) {
  return (
    <section className={classes.part}>
      <h2>How it was read</h2>
      <ol className={classes.history}>
        {[...readings].reverse().map(({ revision, at, by, corrections, recipe, points, fromNm, toNm }, i) => (
          <li key={revision}>
            <b>{i === 0 ? 'Now' : `Reading ${revision}`}</b>
            <span>
              {correctionWords(corrections).join(', ') || 'as it stands'}
              {recipe && `, by the recipe ${recipe}`}
            </span>
            <span className={classes.quiet}>
              {count(points)} samples, {fixed(fromNm, 2)}–{fixed(toNm, 2)} nm in vacuum; {by}, {day(at)}
            </span>
          </li>
        ))}
      </ol>
    </section>
  );
}
