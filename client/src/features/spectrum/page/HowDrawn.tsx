import { Popover } from '@mantine/core';
import { Mark } from '../../../plot/Mark.js';
import { FAMILY_WORD, STATE_WORD } from '../../../plot/marks.js';
import { FAMILIES } from '../lines/filters.js';
import classes from './spectrum.module.css';

const NOTES: readonly [what: string, how: string][] = [
  [
    'Light strip',
    'The colour of each wavelength by the CIE 1931 observer, held to what a screen can show. Dips darken by a print curve, f to the power 1.7, so weak lines are darker than their depth. Each column keeps its deepest dip or highest peak. Hatched: the eye sees no light there. Crossed: masked.',
  ],
  [
    'Light taken',
    'The area between continuum and curve in the colour of that light: it is the equivalent width. Emission lines: light given.',
  ],
  ['Curve', 'One step a pixel. Where a screen pixel holds several samples, from the lowest to the highest of them, so nothing is skipped.'],
  ['Fit', 'Continuum times the fitted profiles, each in the colour of the family that claims it.'],
  ['Residual', 'Data less fit, in sigma; the band holds ±2. Points beyond ±6 lie on the edge.'],
  [
    'Staves',
    'One line for each velocity system. A dashed stroke is a line that should show beside the selected one and does not; a short stroke is a line under a clearer one. +7: seven lines without a label.',
  ],
];

/** What the signs and colours of the page mean, and what is done to the numbers before they are drawn. */
export function HowDrawn() {
  return (
    <Popover width={440} position="bottom-end" trapFocus>
      <Popover.Target>
        <button type="button">How drawn</button>
      </Popover.Target>
      <Popover.Dropdown>
        <div className={classes.how}>
          <p className={classes.signs}>
            {FAMILIES.map((family) => (
              <span key={family}>
                <Mark family={family} state="accepted" size={14} /> {FAMILY_WORD[family]}
              </span>
            ))}
          </p>
          <p className={classes.signs}>
            {(['proposed', 'accepted', 'rejected'] as const).map((state) => (
              <span key={state}>
                <Mark family="interstellar" state={state} size={14} /> {STATE_WORD[state]}
              </span>
            ))}
          </p>
          <dl>
            {NOTES.map(([what, how]) => (
              <div key={what}>
                <dt>{what}</dt>
                <dd>{how}</dd>
              </div>
            ))}
          </dl>
        </div>
      </Popover.Dropdown>
    </Popover>
  );
}
