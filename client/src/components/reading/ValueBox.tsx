import { TextInput } from '@mantine/core';
import { useState } from 'react';
import classes from './reading.module.css';

interface Props<T> {
  labelledBy?: string;
  label?: string;
  /** what stands there; '' for nothing */
  shown: string;
  placeholder?: string;
  width?: 'short' | 'text';
  /** null: it is none */
  parse: (text: string) => T | null;
  /** what it must be, said where it is none */
  wrong: string;
  /** undefined: emptied */
  onSettle: (value: T | undefined) => void;
}

/** A value in a line of text: taken when one leaves it or presses Enter, never while it is typed. */
export function ValueBox<T>({ labelledBy, label, shown, placeholder, width = 'short', parse, wrong, onSettle }: Props<T>) {
  const [typed, setTyped] = useState<string | null>(null);
  const value = typed === null || !typed.trim() ? null : parse(typed);
  const isWrong = typed !== null && typed.trim() !== '' && value === null;
  const settle = () => {
    if (typed === null || isWrong) return;
    if (typed !== shown) onSettle(value ?? undefined);
    setTyped(null);
  };
  return (
    <TextInput
      aria-labelledby={labelledBy}
      aria-label={label}
      className={classes[width]}
      placeholder={placeholder}
      value={typed ?? shown}
      error={isWrong && wrong}
      onChange={(event) => setTyped(event.currentTarget.value)}
      onBlur={settle}
      onKeyDown={(event) => event.key === 'Enter' && settle()}
    />
  );
}
