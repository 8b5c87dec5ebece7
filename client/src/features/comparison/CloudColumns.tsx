import type { Column, ComparedCloud, SpeciesColumns } from '@foreveil/shared';
import { errorParts, fixed, NO_NUMBER, withError } from '../../lib/number.js';
import { speciesName } from '../../lib/species.js';
import classes from './comparison.module.css';

/** Columns of one cloud towards both stars, with their difference drawn around zero. */
export function CloudColumns({ cloud }: { cloud: ComparedCloud }) {
  return (
    <section aria-label="Columns of the cloud">
      <p className={classes.note}>{cloud.sentence}</p>
      <div className={classes.scroll} tabIndex={0} role="group" aria-label="Columns">
        <table>
          <thead>
            <tr>
              <th scope="col">log N, cm⁻²</th>
              <th scope="col">in A</th>
              <th scope="col">in B</th>
              <th scope="col">B − A, dex</th>
              <th scope="col">−0.5 to +0.5 dex</th>
            </tr>
          </thead>
          <tbody>
            {cloud.columns.map((s) => (
              <tr key={s.species}>
                <th scope="row">{speciesName(s.species)}</th>
                <ColumnCell column={s.a} />
                <ColumnCell column={s.b} />
                <td className={classes.num}>{withError(s.difference, s.differenceSigma, true)}</td>
                <td>
                  <Difference columns={s} />
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {cloud.columns.length === 0 && <p className={classes.note}>No line of it is strong enough for a column.</p>}
      {remarks(cloud).map((r) => (
        <p key={r} className={classes.note}>
          {r}
        </p>
      ))}
      <p className={classes.note}>&lt; is a 2σ upper limit, &gt; a lower limit of a saturated line; errors are 1σ.</p>
    </section>
  );
}

function ColumnCell({ column }: { column: Column | null }) {
  if (!column) return <td className={classes.num}>{NO_NUMBER}</td>;
  if (column.method === 'limit') return <td className={classes.num}>&lt; {fixed(column.logN, 2)}</td>;
  if (column.saturated) return <td className={classes.num}>&gt; {fixed(column.logN, 2)}</td>;
  const { value, sigma } = errorParts(column.logN, column.logNSigma);
  return (
    <td className={classes.num} title={column.method === 'apparent-depth' ? 'apparent optical depth' : 'curve of growth'}>
      {value}
      {sigma && <span className={classes.error}> ± {sigma}</span>}
    </td>
  );
}

const HALF = 80;

function Difference({ columns: { difference, differenceSigma } }: { columns: SpeciesColumns }) {
  const x = (dex: number) => HALF + Math.max(-1, Math.min(1, dex / 0.5)) * (HALF - 6);
  return (
    <svg width={2 * HALF} height={20} aria-hidden="true">
      <line x1={HALF} x2={HALF} y1={0} y2={20} stroke="var(--control)" />
      {difference !== null && differenceSigma !== null && (
        <>
          <line
            x1={x(difference - differenceSigma)}
            x2={x(difference + differenceSigma)}
            y1={10}
            y2={10}
            stroke="var(--ink)"
            strokeWidth={1.4}
          />
          <circle cx={x(difference)} cy={10} r={3.4} fill="var(--ink)" />
        </>
      )}
    </svg>
  );
}

const remarks = (cloud: ComparedCloud): string[] =>
  cloud.columns.flatMap((s) =>
    (['a', 'b'] as const).flatMap((side) =>
      s[side]?.sentence ? [`${speciesName(s.species)} in ${side.toUpperCase()}: ${s[side]!.sentence}`] : [],
    ),
  );
