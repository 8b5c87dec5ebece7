import { signed } from '../lib/number.js';
import { Mark } from './Mark.js';
import type { Stave } from './plot-feature.js';
import { STAVE_HEIGHT, STAVES_TOP } from './stave-parts.js';
import classes from './plot.module.css';

interface Props {
  staves: readonly Stave[];
  /** the only system shown; null: all are */
  alone: string | null;
  /** short form: mark and whole km/s */
  short: boolean;
  onAlone: (staveId: string | null) => void;
}

const spoken = ({ word, velocityKmPerS }: Stave) => (velocityKmPerS === null ? word : `${word} at ${signed(velocityKmPerS, 2)} km/s`);

/** Names and velocities of the systems, left of their staves. Pressing one shows only its lines, pressing again all. */
export function StaveHeads({ staves, alone, short, onAlone }: Props) {
  return (
    <div className={classes.heads} style={{ paddingTop: STAVES_TOP }} role="group" aria-label="Velocity systems">
      {staves.map((stave) => (
        <button
          key={stave.id}
          type="button"
          className={classes.head}
          style={{ height: STAVE_HEIGHT }}
          aria-pressed={alone === stave.id}
          aria-label={`Only ${spoken(stave)}`}
          title={alone === stave.id ? 'Show all systems' : `Show only ${spoken(stave)}`}
          data-dim={alone !== null && alone !== stave.id ? true : undefined}
          onClick={() => onAlone(alone === stave.id ? null : stave.id)}
        >
          <Mark family={stave.family} state="accepted" size={13} />
          {!short && <span className={classes.headWord}>{stave.word}</span>}
          {stave.velocityKmPerS !== null && <span className={classes.headVelocity}>{signed(stave.velocityKmPerS, short ? 0 : 2)}</span>}
        </button>
      ))}
    </div>
  );
}
