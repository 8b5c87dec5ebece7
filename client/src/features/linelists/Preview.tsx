import type { LineListChanges, LineListPreview } from '@foreveil/shared';
import { count, counted } from '../../lib/number.js';
import { LinesTable } from './LinesTable.js';
import classes from './linelists.module.css';

/** What a file would make, before it is stored. */
export function Preview({ preview }: { preview: LineListPreview }) {
  const { lines, first, problems, problemCount, notes, diff } = preview;
  if (problemCount > 0) {
    return (
      <section className={classes.preview} aria-label="What is wrong with the file">
        <p role="alert">
          <b>{counted(problemCount, 'row')} cannot be taken, so nothing would be stored.</b> Correct the file and choose it again.
        </p>
        <ul className={classes.problems}>
          {problems.map(({ row, column, sentence }, i) => (
            <li key={i}>
              Row {count(row)}
              {column && `, ${column}`}: {sentence}
            </li>
          ))}
        </ul>
        {problemCount > problems.length && <p>and {counted(problemCount - problems.length, 'more row', 'more rows')}</p>}
      </section>
    );
  }
  return (
    <section className={classes.preview} aria-label="What would be stored">
      <p role="status">
        <b>{counted(lines, 'line')}</b>
        {diff && `: ${changesInWords(diff)}`}
      </p>
      <ul className={classes.notes}>
        {notes.map((note) => (
          <li key={note}>{note}</li>
        ))}
      </ul>
      <LinesTable lines={first} caption="The first lines of the file" />
    </section>
  );
}

export function changesInWords({ counts }: LineListChanges): string {
  const { added, removed, changed, unchanged } = counts;
  return `${count(added)} added, ${count(changed)} changed, ${count(removed)} left out, ${count(unchanged)} as before`;
}
