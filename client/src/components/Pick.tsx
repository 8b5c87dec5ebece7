import { NativeSelect } from '@mantine/core';
import classes from './components.module.css';

interface Props<V extends string> {
  /** ids of the words that name it, or its name */
  labelledBy?: string;
  label?: string;
  options: readonly { readonly value: V; readonly label: string }[];
  /** null: nothing chosen yet, said by `placeholder` */
  value: V | null;
  placeholder?: string;
  /** stands out until answered */
  asks?: boolean;
  onPick: (value: V) => void;
}

/** A choice within a line of text: as wide as what is chosen, the system's own list on a phone. */
export function Pick<V extends string>({ labelledBy, label, options, value, placeholder, asks = false, onPick }: Props<V>) {
  return (
    <NativeSelect
      className={classes.pick}
      data-asks={asks || undefined}
      aria-labelledby={labelledBy}
      aria-label={label}
      value={value ?? ''}
      onChange={(event) => event.currentTarget.value && onPick(event.currentTarget.value as V)}
    >
      {value === null && (
        <option value="" disabled>
          {placeholder}
        </option>
      )}
      {options.map((option) => (
        <option key={option.value} value={option.value}>
          {option.label}
        </option>
      ))}
    </NativeSelect>
  );
}
