import type { Family } from '@foreveil/shared';
import { counted, errorParts } from '../../lib/number.js';
import { Mark } from '../../plot/Mark.js';
import type { AgreedSystem } from './systems.js';
import classes from './targets.module.css';

export const SYSTEM_WORD: Record<Family, string> = { stellar: 'Star', interstellar: 'Cloud', nebular: 'Nebula', telluric: 'Air' };

interface Props {
  systems: readonly AgreedSystem[];
  /** key of the one whose lines alone are shown */
  chosen: string | null;
  onChoose: (key: string | null) => void;
}

/** Velocity systems of the agreed lines; pressing one shows only its lines, pressing again shows all. */
export function SystemList({ systems, chosen, onChoose }: Props) {
  return (
    <ul className={classes.systems}>
      {systems.map(({ key, family, velocityKmPerS, sigmaKmPerS, lines, seenIn }) => {
        const { value, sigma } = errorParts(velocityKmPerS, sigmaKmPerS, true);
        return (
          <li key={key}>
            <button type="button" aria-pressed={key === chosen} onClick={() => onChoose(key === chosen ? null : key)}>
              <Mark family={family ?? 'unidentified'} state="accepted" />
              <span>
                {family ? SYSTEM_WORD[family] : 'In no list'}
                <small>
                  {counted(lines.length, 'line')}
                  {seenIn.length > 1 ? ` in ${seenIn.length} spectra` : ''}
                </small>
              </span>
              {velocityKmPerS !== null && (
                <span className={classes.velocity}>
                  {value} {sigma && <small>± {sigma}</small>}
                </span>
              )}
            </button>
          </li>
        );
      })}
    </ul>
  );
}
