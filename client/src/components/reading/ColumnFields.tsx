import type { Reading } from '@foreveil/shared';
import { fixed, parseNumber } from '../../lib/number.js';
import { Pick } from '../Pick.js';
import { FactRow } from './FactRow.js';
import classes from './reading.module.css';
import type { FieldProps } from './field.js';
import { ValueBox } from './ValueBox.js';
import { ERROR_WORD, FLUX_WORD, howKnown, optionsOf, UNIT_WORD } from './words.js';

/** Columns to choose from, once each; their units stand beside them. */
function columnOptions({ columns }: Reading, present: readonly (string | null)[] = []) {
  const names = [...new Set([...present.filter((name) => name !== null), ...columns])];
  return names.map((name) => ({ value: name, label: name }));
}

interface ColumnProps {
  label: string;
  of: Reading;
  value: string;
  onPick: (column: string) => void;
}

/** A choice among the file's columns; where there is none, the name alone. */
export function ColumnPick({ label, of, value, onPick }: ColumnProps) {
  if (of.columns.length < 2) return <span>{value}</span>;
  return <Pick label={label} options={columnOptions(of, [value])} value={value} onPick={onPick} />;
}

const isWavelength = (text: string) => {
  const value = parseNumber(text);
  return value !== null && value >= 1 && value <= 1e9 ? value : null;
};

export function AxisFact({ reading, correct }: FieldProps) {
  const { wavelengthColumn, axisUnit, firstNm, lastNm } = reading;
  return (
    <FactRow label="Wavelength" how={howKnown(axisUnit, (unit) => UNIT_WORD[unit])}>
      {(id) => (
        <>
          <ColumnPick
            label="Wavelength column"
            of={reading}
            value={wavelengthColumn}
            onPick={(value) => correct('wavelengthColumn', value)}
          />
          <Pick labelledBy={id} options={optionsOf(UNIT_WORD)} value={axisUnit.value} onPick={(value) => correct('axisUnit', value)} />
          {axisUnit.value === 'velocity' && (
            <ValueBox
              label="Rest wavelength, vacuum nm"
              shown=""
              placeholder="rest, nm"
              parse={isWavelength}
              wrong="A vacuum wavelength in nm."
              onSettle={(value) => correct('restWavelengthNm', value)}
            />
          )}
          <span className={classes.range}>
            {fixed(Math.min(firstNm, lastNm), 2)}–{fixed(Math.max(firstNm, lastNm), 2)} nm
          </span>
        </>
      )}
    </FactRow>
  );
}

export function FluxFact({ reading, correct }: FieldProps) {
  const { fluxColumn, fluxKind, fluxUnit } = reading;
  const { words, loud } = howKnown(fluxKind, (kind) => FLUX_WORD[kind]);
  const how = { words: fluxKind.value === 'unknown' ? `${words}; taken as per wavelength` : words, loud };
  return (
    <FactRow label="Flux" how={how}>
      {(id) => (
        <>
          <ColumnPick label="Flux column" of={reading} value={fluxColumn} onPick={(value) => correct('fluxColumn', value)} />
          <Pick labelledBy={id} options={optionsOf(FLUX_WORD)} value={fluxKind.value} onPick={(value) => correct('fluxKind', value)} />
          <ValueBox
            label="Unit of the flux"
            shown={fluxUnit.value}
            placeholder="no unit"
            width="text"
            parse={(text) => (text.trim().length <= 100 ? text.trim() : null)}
            wrong="At most 100 letters."
            onSettle={(value) => correct('fluxUnit', value)}
          />
        </>
      )}
    </FactRow>
  );
}

const NO_COLUMN = '(none)';

export function ErrorFact({ reading, correct }: FieldProps) {
  const { uncertaintyColumn, uncertaintyKind } = reading;
  const how =
    uncertaintyColumn === null ? { words: 'from the scatter', loud: true } : howKnown(uncertaintyKind, (kind) => ERROR_WORD[kind!]);
  return (
    <FactRow label="Error" how={how}>
      {(id) => (
        <>
          <Pick
            labelledBy={id}
            options={[{ value: NO_COLUMN, label: 'none in the file' }, ...columnOptions(reading, [uncertaintyColumn])]}
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

/** Shown where a mask is used, or a column is left that could be one. */
export function MaskFact({ reading, correct }: FieldProps) {
  const { maskColumn, columns } = reading;
  if (maskColumn === null && columns.length < 3) return null;
  const words = maskColumn === null ? 'no mask is used' : 'samples of 1 or more are left out';
  return (
    <FactRow label="Mask" how={{ words, loud: false }}>
      {(id) => (
        <Pick
          labelledBy={id}
          options={[{ value: NO_COLUMN, label: 'none' }, ...columnOptions(reading, [maskColumn])]}
          value={maskColumn ?? NO_COLUMN}
          onPick={(value) => correct('maskColumn', value === NO_COLUMN ? null : value)}
        />
      )}
    </FactRow>
  );
}
