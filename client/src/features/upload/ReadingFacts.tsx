import { Button, Select, TextInput } from '@mantine/core';
import type { Reading, ReadingCorrections, TargetSummary } from '@foreveil/shared';
import { useState } from 'react';
import { counted, fixed, NO_NUMBER, parseNumber } from '../../lib/number.js';
import { day } from '../../lib/time.js';
import { NO_CORRECTIONS } from './entries.js';
import type { Entry, TargetChoice } from './entry.js';
import { FactRow } from './FactRow.js';
import { LabelField, TargetField } from './TargetField.js';
import classes from './upload.module.css';
import { ERROR_WORD, FLUX_WORD, FRAME_WORD, howKnown, MEDIUM_WORD, optionsOf, UNIT_WORD, withCorrection } from './words.js';

interface Props {
  entry: Entry;
  reading: Reading;
  targets: readonly TargetSummary[];
  onCorrect: (corrections: ReadingCorrections) => void;
  onRetarget: (target: TargetChoice) => void;
  onRelabel: (label: string) => void;
}

/** What was read, how that is known, and the controls that correct it; every correction reads the file again at once. */
export function ReadingFacts({ entry, reading, targets, onCorrect, onRetarget, onRelabel }: Props) {
  const { corrections } = entry;
  const correct = <K extends keyof ReadingCorrections>(field: K, value: ReadingCorrections[K] | undefined) =>
    onCorrect(withCorrection(corrections, field, value));
  const n = Object.keys(corrections).length;
  return (
    <div className={classes.read}>
      <dl>
        <TargetField entry={entry} targets={targets} onRetarget={onRetarget} />
        <LabelField label={entry.label} onRelabel={onRelabel} />
        {reading.otherPlaces.length > 0 && <PlaceFact reading={reading} correct={correct} />}
        <AxisFact reading={reading} correct={correct} />
        <MediumFact reading={reading} correct={correct} />
        <FrameFact reading={reading} correct={correct} />
        <FluxFact reading={reading} correct={correct} />
        <ErrorFact reading={reading} correct={correct} />
        <ResolvingPowerFact reading={reading} correct={correct} />
        <ObservedFact reading={reading} />
      </dl>
      <div className={classes.under}>
        {n > 0 && (
          <Button variant="subtle" onClick={() => onCorrect(NO_CORRECTIONS)}>
            Take back {counted(n, 'correction')}
          </Button>
        )}
        <Header lines={reading.header} />
      </div>
    </div>
  );
}

interface PartProps {
  reading: Reading;
  correct: <K extends keyof ReadingCorrections>(field: K, value: ReadingCorrections[K] | undefined) => void;
}

const columnOptions = (columns: readonly string[]) => [...new Set(columns)].map((name) => ({ value: name, label: name }));

const PlaceFact = ({ reading: { place, otherPlaces }, correct }: PartProps) => (
  <FactRow label="Part of the file" how={{ words: counted(otherPlaces.length, 'more part'), loud: false }}>
    {(id) => (
      <Select
        aria-labelledby={id}
        data={columnOptions([place, ...otherPlaces])}
        value={place}
        onChange={(value) => correct('place', value ?? undefined)}
      />
    )}
  </FactRow>
);

function AxisFact({ reading: { wavelengthColumn, columns, axisUnit, firstNm, lastNm }, correct }: PartProps) {
  return (
    <FactRow label="Wavelength" how={howKnown(axisUnit)}>
      {(id) => (
        <>
          {columns.length > 1 ? (
            <Select
              aria-label="Wavelength column"
              data={columnOptions(columns.includes(wavelengthColumn) ? columns : [wavelengthColumn, ...columns])}
              value={wavelengthColumn}
              onChange={(value) => correct('wavelengthColumn', value ?? undefined)}
            />
          ) : (
            <span>{wavelengthColumn}</span>
          )}
          <Select
            aria-labelledby={id}
            className={classes.short}
            data={optionsOf(UNIT_WORD)}
            value={axisUnit.value}
            onChange={(value) => correct('axisUnit', value ?? undefined)}
          />
          <span className={classes.range}>
            {fixed(Math.min(firstNm, lastNm), 2)}–{fixed(Math.max(firstNm, lastNm), 2)} nm
          </span>
        </>
      )}
    </FactRow>
  );
}

const MediumFact = ({ reading: { medium }, correct }: PartProps) => (
  <FactRow label="Medium" how={howKnown(medium)}>
    {(id) => (
      <Select
        aria-labelledby={id}
        className={classes.medium}
        data-ask={medium.how === 'not_stated' || undefined}
        placeholder="choose"
        data={optionsOf(MEDIUM_WORD)}
        value={medium.how === 'not_stated' ? null : medium.value}
        onChange={(value) => correct('medium', value ?? undefined)}
      />
    )}
  </FactRow>
);

const FrameFact = ({ reading: { frame }, correct }: PartProps) => (
  <FactRow label="Frame" how={howKnown(frame)}>
    {(id) => (
      <Select
        aria-labelledby={id}
        data={optionsOf(FRAME_WORD)}
        value={frame.value}
        onChange={(value) => correct('frame', value ?? undefined)}
      />
    )}
  </FactRow>
);

function FluxFact({ reading: { fluxColumn, columns, fluxKind, fluxUnit }, correct }: PartProps) {
  const unit = fluxUnit.value || 'no unit';
  return (
    <FactRow label="Flux" how={howKnown(fluxKind)}>
      {(id) => (
        <>
          {columns.length > 1 && (
            <Select
              aria-label="Flux column"
              data={columnOptions([fluxColumn, ...columns])}
              value={fluxColumn}
              onChange={(value) => correct('fluxColumn', value ?? undefined)}
            />
          )}
          <Select
            aria-labelledby={id}
            data={optionsOf(FLUX_WORD)}
            value={fluxKind.value}
            onChange={(value) => correct('fluxKind', value ?? undefined)}
          />
          <span className={classes.range}>{unit}</span>
        </>
      )}
    </FactRow>
  );
}

const NO_COLUMN = '(none)';

function ErrorFact({ reading: { uncertaintyColumn, uncertaintyKind, columns }, correct }: PartProps) {
  const how = uncertaintyColumn === null ? { words: 'from the scatter', loud: true } : howKnown(uncertaintyKind);
  return (
    <FactRow label="Error" how={how}>
      {(id) => (
        <>
          <Select
            aria-labelledby={id}
            data={[
              { value: NO_COLUMN, label: 'none in the file' },
              ...columnOptions(uncertaintyColumn === null ? columns : [uncertaintyColumn, ...columns]),
            ]}
            value={uncertaintyColumn ?? NO_COLUMN}
            onChange={(value) => correct('uncertaintyColumn', value === NO_COLUMN ? null : (value ?? undefined))}
          />
          {uncertaintyColumn !== null && (
            <Select
              aria-label="Kind of error"
              data={optionsOf(ERROR_WORD)}
              value={uncertaintyKind.value}
              onChange={(value) => correct('uncertaintyKind', value ?? undefined)}
            />
          )}
        </>
      )}
    </FactRow>
  );
}

function ResolvingPowerFact({ reading: { resolvingPower }, correct }: PartProps) {
  const shown = resolvingPower.value === null ? '' : fixed(resolvingPower.value, 0);
  const [typed, setTyped] = useState<string | null>(null);
  const value = typed === null || !typed.trim() ? null : parseNumber(typed);
  const wrong = typed !== null && typed.trim() !== '' && !(value !== null && value >= 1 && value <= 1e7);
  const settle = () => {
    if (typed === null || wrong) return;
    if (typed !== shown) correct('resolvingPower', value ?? undefined);
    setTyped(null);
  };
  const how = resolvingPower.value === null ? { words: 'not stated; will be estimated', loud: false } : howKnown(resolvingPower);
  return (
    <FactRow label="Resolving power" how={how}>
      {(id) => (
        <TextInput
          aria-labelledby={id}
          className={classes.short}
          inputMode="numeric"
          placeholder="λ / FWHM"
          value={typed ?? shown}
          error={wrong && 'A number from 1 to 10 million.'}
          onChange={(event) => setTyped(event.currentTarget.value)}
          onBlur={settle}
          onKeyDown={(event) => event.key === 'Enter' && settle()}
        />
      )}
    </FactRow>
  );
}

function ObservedFact({ reading: { observedAt, instrument, telescope } }: { reading: Reading }) {
  const words = [observedAt.value && day(observedAt.value), instrument, telescope].filter(Boolean).join(', ');
  return (
    <FactRow label="Observed" {...(words ? { how: howKnown(observedAt) } : {})}>
      {() => <span>{words || NO_NUMBER}</span>}
    </FactRow>
  );
}

/** Every card or remark of the file, as it stands there. */
function Header({ lines }: { lines: readonly string[] }) {
  if (!lines.length) return null;
  return (
    <details className={classes.header}>
      <summary>Header, {counted(lines.length, 'line')}</summary>
      <pre tabIndex={0} aria-label="Header of the file">
        {lines.join('\n')}
      </pre>
    </details>
  );
}
