import type { VelocitySystem } from '@foreveil/shared';
import { probability, signed } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { Mark } from '../../../plot/Mark.js';
import { FAMILY_WORD } from '../../../plot/marks.js';
import { sameReading, type Reading } from '../lines/reading.js';
import { readingName } from './claim-text.js';
import classes from './evidence.module.css';

interface Props {
  /** listed candidates best first, 'unidentified' last */
  choices: readonly Reading[];
  chosen: Reading;
  systems: readonly VelocitySystem[];
  display: WavelengthDisplay;
  onChoose: (reading: Reading) => void;
}

/** The key that chooses a reading. */
export const keyOf = (reading: Reading, place: number) => (reading.lineId === null ? 'u' : String(place + 1));

/** Ranked readings of the feature, each with the key that chooses it. Choosing shows its argument; deciding is another act. */
export function Candidates({ choices, chosen, systems, display, onChoose }: Props) {
  return (
    <ol className={classes.candidates} aria-label="Candidates, best first">
      {choices.map((reading, place) => {
        const system = systems.find((s) => s.id === reading.systemId);
        const share = reading.candidate?.share;
        return (
          <li key={`${reading.lineId} ${reading.systemId}`}>
            <button
              type="button"
              className={classes.candidate}
              aria-pressed={sameReading(reading, chosen)}
              onClick={() => onChoose(reading)}
            >
              <kbd className={classes.key}>{keyOf(reading, place)}</kbd>
              <Mark family={reading.family} state="proposed" size={14} />
              <span className={classes.candidateName}>{reading.lineId === null ? 'not in the list' : readingName(reading, display)}</span>
              <span className={classes.candidateSystem}>
                {system ? `${FAMILY_WORD[system.family]} ${signed(system.velocityKmPerS, 2)}` : ''}
              </span>
              <span className={classes.candidateShare}>
                {share !== undefined && share < 0.95 && share >= 0.05 ? `${Math.round(share * 100)} % of W` : ''}
              </span>
              <span className={classes.candidateP}>{probability(reading.probability)}</span>
            </button>
          </li>
        );
      })}
    </ol>
  );
}
