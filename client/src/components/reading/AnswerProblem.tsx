import type { ReadingCorrections, ReadProblem } from '@foreveil/shared';
import type { ReactNode } from 'react';
import { parseNumber } from '../../lib/number.js';
import { Pick } from '../Pick.js';
import { FactRow } from './FactRow.js';
import { placeOption } from './PlaceField.js';
import type { Correct } from './field.js';
import { ValueBox } from './ValueBox.js';
import { ERROR_WORD, FLUX_WORD, MEDIUM_WORD, optionsOf, UNIT_WORD } from './words.js';

interface Props {
  problem: ReadProblem;
  corrections: ReadingCorrections;
  correct: Correct;
}

/** Corrections that answer a refusal, in its place: the rows of a list. None where no correction can help. */
export function AnswerProblem({ problem, corrections, correct }: Props) {
  const answers = (problem.answers ?? []).filter((field) => field in FIELDS);
  return (
    <>
      {answers.map((field) => {
        const { label, control } = FIELDS[field]!;
        return (
          <FactRow
            key={field}
            label={label}
            how={{ words: field in corrections ? 'said by you' : 'asked for', loud: !(field in corrections) }}
          >
            {(id) => control({ id, problem, corrections, correct })}
          </FactRow>
        );
      })}
    </>
  );
}

interface ControlProps extends Props {
  id: string;
}
interface Field {
  readonly label: string;
  readonly control: (props: ControlProps) => ReactNode;
}
type ByColumn = 'wavelengthColumn' | 'fluxColumn' | 'uncertaintyColumn' | 'maskColumn';

const columnField = (field: ByColumn, label: string): Field => ({
  label,
  control: ({ id, problem, corrections, correct }) => {
    const options = (problem.columnFacts ?? [])
      .filter(({ numeric }) => numeric)
      .map(({ name, unit }) => ({ value: name, label: unit ? `${name}, ${unit}` : name }));
    return options.length ? (
      <Pick
        labelledBy={id}
        options={options}
        value={corrections[field] ?? null}
        placeholder="choose"
        asks
        onPick={(value) => correct(field, value)}
      />
    ) : (
      <ValueBox
        labelledBy={id}
        shown={corrections[field] ?? ''}
        placeholder="name of the column"
        width="text"
        parse={(text) => text.trim()}
        wrong=""
        onSettle={(value) => correct(field, value)}
      />
    );
  },
});

type ByWord = 'axisUnit' | 'medium' | 'fluxKind' | 'uncertaintyKind';
const wordField = <F extends ByWord>(field: F, label: string, words: Record<NonNullable<ReadingCorrections[F]>, string>): Field => ({
  label,
  control: ({ id, corrections, correct }) => (
    <Pick
      labelledBy={id}
      options={optionsOf<NonNullable<ReadingCorrections[F]>>(words)}
      value={corrections[field] ?? null}
      placeholder="choose"
      asks
      onPick={(value) => correct(field, value)}
    />
  ),
});

const DELIMITER_WORD = { ',': 'comma', ';': 'semicolon', '\t': 'tab', '|': 'bar', ' ': 'blanks' } as const;

const FIELDS: Partial<Record<keyof ReadingCorrections, Field>> = {
  place: {
    label: 'Part of the file',
    control: ({ id, problem, corrections, correct }) => (
      <Pick
        labelledBy={id}
        options={(problem.places ?? []).map(placeOption)}
        value={corrections.place ?? null}
        placeholder="choose"
        asks
        onPick={(value) => correct('place', value)}
      />
    ),
  },
  wavelengthColumn: columnField('wavelengthColumn', 'Wavelength'),
  fluxColumn: columnField('fluxColumn', 'Flux'),
  uncertaintyColumn: columnField('uncertaintyColumn', 'Error'),
  maskColumn: columnField('maskColumn', 'Mask'),
  axisUnit: wordField('axisUnit', 'Unit of the axis', UNIT_WORD),
  medium: wordField('medium', 'Medium', MEDIUM_WORD),
  fluxKind: wordField('fluxKind', 'Kind of flux', FLUX_WORD),
  uncertaintyKind: wordField('uncertaintyKind', 'Kind of error', ERROR_WORD),
  restWavelengthNm: {
    label: 'Rest wavelength, nm',
    control: ({ id, corrections, correct }) => (
      <ValueBox
        labelledBy={id}
        shown={corrections.restWavelengthNm === undefined ? '' : String(corrections.restWavelengthNm)}
        placeholder="vacuum nm"
        parse={(text) => {
          const value = parseNumber(text);
          return value !== null && value >= 1 && value <= 1e9 ? value : null;
        }}
        wrong="A vacuum wavelength in nm."
        onSettle={(value) => correct('restWavelengthNm', value)}
      />
    ),
  },
  delimiter: {
    label: 'Cells parted by',
    control: ({ id, corrections, correct }) => (
      <Pick
        labelledBy={id}
        options={optionsOf(DELIMITER_WORD)}
        value={corrections.delimiter ?? null}
        placeholder="choose"
        asks
        onPick={(value) => correct('delimiter', value)}
      />
    ),
  },
  decimalComma: {
    label: 'Decimal mark',
    control: ({ id, corrections, correct }) => (
      <Pick
        labelledBy={id}
        options={[
          { value: 'comma', label: 'comma' },
          { value: 'point', label: 'point' },
        ]}
        value={corrections.decimalComma === undefined ? null : corrections.decimalComma ? 'comma' : 'point'}
        placeholder="choose"
        asks
        onPick={(value) => correct('decimalComma', value === 'comma')}
      />
    ),
  },
};
