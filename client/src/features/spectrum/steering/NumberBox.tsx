import { useId, useState } from 'react';
import { parseNumber } from '../../../lib/number.js';
import classes from './steering.module.css';

interface Props {
  label: string;
  unit: string;
  /** null: left empty, which means what `empty` says */
  value: number | null;
  empty?: string;
  /** how the value is written; the person's own text stays while it is edited */
  print?: (value: number) => string;
  onCommit: (value: number | null) => void;
}

/** A number with its unit. Takes decimal commas and exponents; what is no number is said beside the box and changes nothing. */
export function NumberBox({ label, unit, value, empty, print = String, onCommit }: Props) {
  const id = useId();
  const [text, setText] = useState<string | null>(null);
  const parsed = text === null ? value : text.trim() === '' ? null : parseNumber(text);
  const isWrong = text !== null && text.trim() !== '' && parsed === null;
  const mustBe = text !== null && text.trim() === '' && empty === undefined;
  const commit = () => {
    if (text !== null && !isWrong && !mustBe && parsed !== value) onCommit(parsed);
    if (!isWrong) setText(null);
  };
  return (
    <span className={classes.number}>
      <label htmlFor={id}>{label}</label>
      <input
        id={id}
        inputMode="decimal"
        autoComplete="off"
        placeholder={empty}
        aria-invalid={isWrong || undefined}
        aria-describedby={isWrong ? `${id}-why` : undefined}
        value={text ?? (value === null ? '' : print(value))}
        onChange={(event) => setText(event.currentTarget.value)}
        onBlur={commit}
        onKeyDown={(event) => {
          if (event.key === 'Enter') commit();
          if (event.key === 'Escape' && text !== null) {
            event.stopPropagation();
            setText(null);
          }
        }}
      />
      <span className={classes.unit}>{unit}</span>
      {isWrong && (
        <span id={`${id}-why`} className={classes.wrong} role="alert">
          Write a number, as in 12.5
        </span>
      )}
    </span>
  );
}
