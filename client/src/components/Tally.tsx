import { counted } from '../lib/number.js';
import classes from './components.module.css';

interface Props {
  accepted: number;
  rejected: number;
  open: number;
}

const WIDTH = 134;
const HEIGHT = 12;
const GAP = 2;

/** How far a review is: solid accepted, crossed rejected, hollow open. The words for it are its label. */
export function Tally({ accepted, rejected, open }: Props) {
  const total = accepted + rejected + open;
  const label = total ? `${counted(accepted, 'line')} accepted, ${rejected} rejected, ${open} open` : 'nothing to review yet';
  const parts = (
    [
      ['accepted', accepted],
      ['rejected', rejected],
      ['open', open],
    ] as const
  ).filter(([, n]) => n > 0);
  const room = WIDTH - GAP * Math.max(0, parts.length - 1);
  let x = 0;
  return (
    <svg width={WIDTH} height={HEIGHT} role="img" aria-label={label} className={classes.tally}>
      {!total && <rect x={0.6} y={1.6} width={WIDTH - 1.2} height={HEIGHT - 3.2} className={classes.none} />}
      {parts.map(([part, n]) => {
        const width = Math.max(4, (n / total) * room);
        const from = Math.min(x, WIDTH - width);
        x = from + width + GAP;
        return <TallyPart key={part} part={part} x={from} width={width} />;
      })}
    </svg>
  );
}

function TallyPart({ part, x, width }: { part: 'accepted' | 'rejected' | 'open'; x: number; width: number }) {
  if (part === 'accepted') return <rect x={x} y={1} width={width} height={HEIGHT - 2} fill="var(--ink)" />;
  return (
    <>
      <rect x={x + 0.6} y={1.6} width={width - 1.2} height={HEIGHT - 3.2} fill="none" stroke="var(--ink)" strokeWidth={1.2} />
      {part === 'rejected' && <path d={`M${x + 1},${HEIGHT - 2}L${x + width - 1},2`} stroke="var(--ink)" strokeWidth={1.2} />}
    </>
  );
}

const KEY = ['accepted', 'rejected', 'open'] as const;

/** What the bodies of the tally mean. */
export const TallyKey = () => (
  <span className={classes.key}>
    {KEY.map((part) => (
      <span key={part}>
        <svg width={18} height={HEIGHT} aria-hidden="true">
          <TallyPart part={part} x={0} width={18} />
        </svg>
        {part}
      </span>
    ))}
  </span>
);
