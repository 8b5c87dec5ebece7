import type { Reading } from '@foreveil/shared';
import type { ReactNode } from 'react';
import { Pick } from '../Pick.js';
import type { FieldProps } from './field.js';
import { AxisFact, ErrorFact, FluxFact, MaskFact } from './ColumnFields.js';
import { FactRow } from './FactRow.js';
import { ExposureFact, ObjectFact, PointingFact, SiteFact, TimeFact } from './ObservingFields.js';
import { PlaceFact } from './PlaceField.js';
import classes from './reading.module.css';
import { ValueBox } from './ValueBox.js';
import { fixed, parseNumber } from '../../lib/number.js';
import { FRAME_WORD, howKnown, MEDIUM_WORD, optionsOf } from './words.js';

/** What was read, how that is known, and the controls that correct it. @param children rows that come before, about what is not of the file */
export function ReadingFields({ reading, correct, children }: FieldProps & { children?: ReactNode }) {
  return (
    <div className={classes.read}>
      <dl>
        {children}
        <PlaceFact reading={reading} correct={correct} />
        <AxisFact reading={reading} correct={correct} />
        <MediumFact reading={reading} correct={correct} />
        <FrameFact reading={reading} correct={correct} />
        <FluxFact reading={reading} correct={correct} />
        <ErrorFact reading={reading} correct={correct} />
        <MaskFact reading={reading} correct={correct} />
        <ResolvingPowerFact reading={reading} correct={correct} />
        <TimeFact reading={reading} correct={correct} />
      </dl>
      <details className={classes.more} open={observedIsCorrected(reading)}>
        <summary>Exposure, site and pointing{frameNeedsThem(reading) ? ', which a frame needs' : ''}</summary>
        <dl>
          <ObjectFact reading={reading} />
          <ExposureFact reading={reading} correct={correct} />
          <SiteFact reading={reading} correct={correct} />
          <PointingFact reading={reading} correct={correct} />
          <ObserverFact reading={reading} />
        </dl>
      </details>
    </div>
  );
}

const observedIsCorrected = ({ exposureS, site, pointing }: Reading) => [exposureS, site, pointing].some(({ how }) => how === 'corrected');
const frameNeedsThem = ({ frame, observerVelocityKmPerS }: Reading) => frame.value !== 'source' && observerVelocityKmPerS.value === null;

const MediumFact = ({ reading: { medium }, correct }: FieldProps) => (
  <FactRow label="Medium" how={howKnown(medium, (value) => MEDIUM_WORD[value])}>
    {(id) => (
      <Pick
        labelledBy={id}
        options={optionsOf(MEDIUM_WORD)}
        value={medium.how === 'not_stated' ? null : medium.value}
        placeholder="choose"
        asks={medium.how === 'not_stated'}
        onPick={(value) => correct('medium', value)}
      />
    )}
  </FactRow>
);

const FrameFact = ({ reading: { frame }, correct }: FieldProps) => (
  <FactRow label="Frame" how={howKnown(frame, (value) => FRAME_WORD[value])}>
    {(id) => <Pick labelledBy={id} options={optionsOf(FRAME_WORD)} value={frame.value} onPick={(value) => correct('frame', value)} />}
  </FactRow>
);

const isResolvingPower = (text: string) => {
  const value = parseNumber(text);
  return value !== null && value >= 1 && value <= 1e7 ? value : null;
};

function ResolvingPowerFact({ reading: { resolvingPower }, correct }: FieldProps) {
  const { value } = resolvingPower;
  const how = value === null ? { words: 'not stated; will be estimated', loud: false } : howKnown(resolvingPower, (r) => fixed(r!, 0));
  return (
    <FactRow label="Resolving power" how={how}>
      {(id) => (
        <ValueBox
          labelledBy={id}
          shown={value === null ? '' : fixed(value, 0)}
          placeholder="λ / FWHM"
          parse={isResolvingPower}
          wrong="A number from 1 to 10 million."
          onSettle={(power) => correct('resolvingPower', power)}
        />
      )}
    </FactRow>
  );
}

/** What follows from time, site and pointing: where lines of our own air stand. */
function ObserverFact({ reading: { observerVelocityKmPerS } }: { reading: Reading }) {
  const { value } = observerVelocityKmPerS;
  return (
    <FactRow
      label="Lines of the air at"
      how={value === null ? { words: 'time, site or pointing is missing', loud: false } : howKnown(observerVelocityKmPerS)}
    >
      {() => <span>{value === null ? 'not known' : `${fixed(value, 2)} km/s`}</span>}
    </FactRow>
  );
}
