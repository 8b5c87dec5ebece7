import { shareInterval, type FamilyReliability } from '@foreveil/shared';
import { MarkBody } from '../../plot/Mark.js';
import { FAMILY_WORD } from '../../plot/marks.js';
import classes from './probabilities.module.css';

const SIDE = 220;
const LEFT = 34;
const BELOW = 34;
const ROOM = 10; // for marks at the edges
const ABOVE = 18; // for the name of the axis
const TICKS = [0, 0.25, 0.5, 0.75, 1];
const x = (share: number) => LEFT + ROOM + share * (SIDE - 2 * ROOM);
const y = (share: number) => SIDE - ROOM - share * (SIDE - 2 * ROOM);

/** What was said against what was so: on the diagonal, probabilities are true. Bars are 68 % intervals. The table beside it has the numbers. */
export function ReliabilityDiagram({ family, first }: FamilyReliability) {
  const bins = first.filter(({ count }) => count > 0);
  return (
    <svg
      className={classes.diagram}
      viewBox={`0 ${-ABOVE} ${LEFT + SIDE} ${SIDE + BELOW + ABOVE}`}
      role="img"
      aria-label={`Stated probability against the share that was right, ${FAMILY_WORD[family]}; numbers in the table`}
    >
      {TICKS.map((tick) => (
        <g key={tick}>
          <line x1={x(tick)} x2={x(tick)} y1={y(0) + ROOM} y2={y(1) - ROOM} className={classes.grid} />
          <line x1={x(0) - ROOM} x2={x(1) + ROOM} y1={y(tick)} y2={y(tick)} className={classes.grid} />
          <text x={x(tick)} y={SIDE + 14} textAnchor="middle">
            {tick}
          </text>
          <text x={LEFT - 6} y={y(tick) + 4} textAnchor="end">
            {tick}
          </text>
        </g>
      ))}
      <line x1={x(0)} y1={y(0)} x2={x(1)} y2={y(1)} className={classes.diagonal} />
      <text x={x(0.5)} y={SIDE + 30} textAnchor="middle">
        stated probability
      </text>
      <text x={LEFT} y={-6}>
        share right
      </text>
      {bins.map(({ from, count, right, mean }) => {
        const { low, high } = shareInterval(right, count);
        return (
          <g key={from}>
            <line x1={x(mean)} x2={x(mean)} y1={y(low)} y2={y(high)} stroke={`var(--${family})`} strokeWidth={1.5} />
            <MarkBody family={family} state="proposed" x={x(mean)} y={y(right / count)} r={4.5} />
          </g>
        );
      })}
    </svg>
  );
}
