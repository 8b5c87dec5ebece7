import { Button, TextInput } from '@mantine/core';
import type { Reading, ReadingCorrections, TargetSummary } from '@foreveil/shared';
import { useState } from 'react';
import { Pick } from '../../components/Pick.js';
import { counted, fixed, parseNumber } from '../../lib/number.js';
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
      <Pick labelledBy={id} options={columnOptions([place, ...otherPlaces])} value={place} onPick={(value) => correct('place', value)} />
    )}
  </FactRow>
);

function AxisFact({ reading: { wavelengthColumn, columns, axisUnit, firstNm, lastNm }, correct }: PartProps) {
  return (
    <FactRow label="Wavelength" how={howKnown(axisUnit)}>
      {(id) => (
        <>
          <ColumnPick
            label="Wavelength column"
            columns={columns}
            value={wavelengthColumn}
            onPick={(value) => correct('wavelengthColumn', value)}
          />
          <Pick labelledBy={id} options={optionsOf(UNIT_WORD)} value={axisUnit.value} onPick={(value) => correct('axisUnit', value)} />
          <span className={classes.range}>
            {fixed(Math.min(firstNm, lastNm), 2)}–{fixed(Math.max(firstNm, lastNm), 2)} nm
          </span>
        </>
      )}
    </FactRow>
  );
}

interface ColumnProps {
  label: string;
  columns: readonly string[];
  value: string;
  onPick: (column: string) => void;
}

/** A choice among the file's columns; where there is none, the name alone. */
function ColumnPick({ label, columns, value, onPick }: ColumnProps) {
  if (columns.length < 2) return <span>{value}</span>;
  return <Pick label={label} options={columnOptions([value, ...columns])} value={value} onPick={onPick} />;
}

const MediumFact = ({ reading: { medium }, correct }: PartProps) => (
  <FactRow label="Medium" how={howKnown(medium)}>
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

const FrameFact = ({ reading: { frame }, correct }: PartProps) => (
  <FactRow label="Frame" how={howKnown(frame)}>
    {(id) => <Pick labelledBy={id} options={optionsOf(FRAME_WORD)} value={frame.value} onPick={(value) => correct('frame', value)} />}
  </FactRow>
);

function FluxFact({ reading: { fluxColumn, columns, fluxKind, fluxUnit }, correct }: PartProps) {
  const { words, loud } = howKnown(fluxKind);
  const how = { words: fluxKind.value === 'unknown' ? `${words}; taken as per wavelength` : words, loud };
  return (
    <FactRow label="Flux" how={how}>
      {(id) => (
        <>
          <ColumnPick label="Flux column" columns={columns} value={fluxColumn} onPick={(value) => correct('fluxColumn', value)} />
          <Pick labelledBy={id} options={optionsOf(FLUX_WORD)} value={fluxKind.value} onPick={(value) => correct('fluxKind', value)} />
          <span className={classes.range}>{fluxUnit.value || 'no unit'}</span>
        </>
      )}
    </FactRow>
  );
}

const NO_COLUMN = '(none)';

function ErrorFact({ reading: { uncertaintyColumn, uncertaintyKind, columns }, correct }: PartProps) {
  const how = uncertaintyColumn === null ? { words: 'from the scatter', loud: true } : howKnown(uncertaintyKind);
  const names = uncertaintyColumn === null ? columns : [uncertaintyColumn, ...columns];
  return (
    <FactRow label="Error" how={how}>
      {(id) => (
        <>
          <Pick
            labelledBy={id}
            options={[{ value: NO_COLUMN, label: 'none in the file' }, ...columnOptions(names)]}
            value={uncertaintyColumn ?? NO_COLUMN}
            onPick={(value) => correct('uncertaintyColumn', value === NO_COLUMN ? null : value)}
          />
          {uncertaintyColumn !== null && (
            <Pick
              label="Kind of error"
              options={optionsOf(ERROR_WORD)}
              value={uncertaintyKind.value}
              onPick={(value) => correct('uncertaintyKind', value)}
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
  if (!words) return null;
  return (
    <FactRow label="Observed" how={howKnown(observedAt)}>
      {() => <span>{words}</span>}
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
