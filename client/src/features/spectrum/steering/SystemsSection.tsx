import { Button } from '@mantine/core';
import type { Family, VelocitySystem } from '@foreveil/shared';
import { useState } from 'react';
import { Pick } from '../../../components/Pick.js';
import { signed, withError } from '../../../lib/number.js';
import { Mark } from '../../../plot/Mark.js';
import { FAMILY_WORD } from '../../../plot/marks.js';
import { NumberBox } from './NumberBox.js';
import type { Steering } from './use-steering.js';
import classes from './steering.module.css';

const FAMILIES: readonly Family[] = ['stellar', 'interstellar', 'nebular', 'telluric'];
const OPTIONS = FAMILIES.map((value) => ({ value, label: FAMILY_WORD[value] }));
/** Half of the range around a system that is forbidden with it, in widths of its lines, and at least this many km/s. */
const LEAST_BERTH = 3;

const berthOf = ({ fwhmKmPerS }: VelocitySystem) => Math.max(LEAST_BERTH, Math.round(fwhmKmPerS / 2));

/** Systems of the run on the page, to be kept or forbidden, and velocities known from elsewhere, by number. */
export function SystemsSection({ steering, systems }: { steering: Steering; systems: readonly VelocitySystem[] }) {
  const { draft } = steering;
  const isSet = (s: VelocitySystem) =>
    draft.setSystems.some((w) => w.family === s.family && Math.abs(w.velocityKmPerS - s.velocityKmPerS) <= w.toleranceKmPerS + 0.01);
  const isForbidden = (s: VelocitySystem) =>
    draft.forbiddenSystems.some((f) => f.family === s.family && f.fromKmPerS <= s.velocityKmPerS && f.toKmPerS >= s.velocityKmPerS);
  const keep = (s: VelocitySystem) =>
    steering.add('setSystems', {
      family: s.family,
      velocityKmPerS: Number(s.velocityKmPerS.toFixed(2)),
      toleranceKmPerS: Number(Math.max(0.5, 3 * s.velocitySigmaKmPerS).toFixed(2)),
    });
  const forbid = (s: VelocitySystem) =>
    steering.add('forbiddenSystems', {
      family: s.family,
      fromKmPerS: Number((s.velocityKmPerS - berthOf(s)).toFixed(2)),
      toKmPerS: Number((s.velocityKmPerS + berthOf(s)).toFixed(2)),
    });
  return (
    <section className={classes.section} aria-label="Velocity systems">
      <h3>Velocity systems</h3>
      <ul className={classes.systems}>
        {systems.map((s) => (
          <li key={s.id}>
            <Mark family={s.family} state="accepted" size={14} />
            <span>
              {FAMILY_WORD[s.family]} <b>{withError(s.velocityKmPerS, s.velocitySigmaKmPerS, true)}</b> km/s{s.set && ', set'}
            </span>
            <Button
              size="compact-xs"
              disabled={isSet(s) || isForbidden(s)}
              aria-label={`Keep ${FAMILY_WORD[s.family]} at ${signed(s.velocityKmPerS, 2)} km/s`}
              onClick={() => keep(s)}
            >
              {isSet(s) ? 'Kept' : 'Keep'}
            </Button>
            <Button
              size="compact-xs"
              disabled={isSet(s) || isForbidden(s)}
              aria-label={`Forbid ${FAMILY_WORD[s.family]} at ${signed(s.velocityKmPerS, 2)} km/s`}
              onClick={() => forbid(s)}
            >
              {isForbidden(s) ? 'Forbidden' : 'Forbid'}
            </Button>
          </li>
        ))}
      </ul>
      {systems.length === 0 && <p className={classes.quiet}>The run on the page found none.</p>}
      <ByNumber steering={steering} />
    </section>
  );
}

/** A velocity that is known, or known to be wrong, whatever the run found. */
function ByNumber({ steering }: { steering: Steering }) {
  const [family, setFamily] = useState<Family>('interstellar');
  const [velocity, setVelocity] = useState<number | null>(null);
  const [half, setHalf] = useState(2);
  return (
    <div className={classes.line} role="group" aria-label="A system by numbers">
      <Pick label="Family" options={OPTIONS} value={family} onPick={setFamily} />
      <NumberBox label="at" unit="km/s" value={velocity} empty="velocity" onCommit={setVelocity} />
      <NumberBox label="±" unit="km/s" value={half} onCommit={(value) => value !== null && setHalf(Math.abs(value))} />
      <Button
        size="compact-xs"
        disabled={velocity === null}
        onClick={() => velocity !== null && steering.add('setSystems', { family, velocityKmPerS: velocity, toleranceKmPerS: half })}
      >
        Set
      </Button>
      <Button
        size="compact-xs"
        disabled={velocity === null || half === 0}
        onClick={() =>
          velocity !== null && steering.add('forbiddenSystems', { family, fromKmPerS: velocity - half, toKmPerS: velocity + half })
        }
      >
        Forbid
      </Button>
    </div>
  );
}
