import { settingsDifference, settingsInWords } from '@foreveil/shared';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import type { Steering } from './use-steering.js';
import { printerFor } from './words.js';
import classes from './steering.module.css';

/** What differs from an analysis left to itself, each with its way back; what the run on the page does not have yet says so. */
export function DraftList({ steering, display }: { steering: Steering; display: WavelengthDisplay }) {
  const print = printerFor(display);
  const words = settingsInWords(steering.draft, print);
  const { fresh, gone } = settingsDifference(steering.run, steering.draft, print);
  return (
    <section className={classes.section} aria-label="Settings for the next run">
      <h3>Differs from the defaults</h3>
      {words.length === 0 && <p className={classes.quiet}>Nothing: the next run decides everything from the data.</p>}
      <ul className={classes.words}>
        {words.map(({ key, index, sentence }) => (
          <li key={`${key} ${index}`}>
            <span>
              {sentence} {fresh.includes(sentence) && <b className={classes.fresh}>new</b>}
            </span>
            <button type="button" aria-label={`Take back: ${sentence}`} title="Take back" onClick={() => steering.takeBack(key, index)}>
              ×
            </button>
          </li>
        ))}
      </ul>
      {gone.length > 0 && (
        <>
          <h4>No longer in the next run</h4>
          <ul className={classes.words}>
            {gone.map((sentence) => (
              <li key={sentence}>
                <s>{sentence}</s>
              </li>
            ))}
          </ul>
        </>
      )}
      {steering.problems.map(({ pointer, detail }) => (
        <p key={pointer} role="alert" className={classes.wrong}>
          {pointer.slice(1).split('/').join(' ')} {detail}.
        </p>
      ))}
    </section>
  );
}
