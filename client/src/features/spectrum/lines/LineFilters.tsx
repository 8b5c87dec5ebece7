import { REVIEW_STATES, type ReviewState } from '@foreveil/shared';
import { NativeSelect, TextInput } from '@mantine/core';
import { useState } from 'react';
import { counted } from '../../../lib/number.js';
import { STATE_WORD, type MarkFamily } from '../../../plot/marks.js';
import { FAMILIES, type LineFilter } from './filters.js';
import classes from './lines.module.css';

interface Props {
  filter: LineFilter;
  shown: number;
  inView: number;
  all: number;
  onFilter: (change: Partial<LineFilter>) => void;
  /** copies the rows that are shown; resolves when they are on the clipboard */
  onCopy: () => Promise<void>;
}

const FAMILY_PLURAL: Record<MarkFamily, string> = {
  stellar: 'star',
  interstellar: 'clouds',
  nebular: 'nebula',
  telluric: 'air',
  unidentified: 'unidentified',
};

/** What stands above the table: counts, search, filters, copy. */
export function LineFilters({ filter, shown, inView, all, onFilter, onCopy }: Props) {
  const [copied, setCopied] = useState(false);
  const isFiltered = filter.family || filter.state || filter.system || filter.text || filter.inView;
  const copy = async () => {
    await onCopy();
    setCopied(true);
    setTimeout(() => setCopied(false), 2000);
  };
  return (
    <div className={classes.top}>
      <h2 className={classes.title}>Lines</h2>
      <span className={classes.counts} role="status">
        {isFiltered ? `${shown} shown, ${all} in all` : `${inView} in view, ${all} in all`}
      </span>
      <div className={classes.controls}>
        <TextInput
          size="xs"
          w={112}
          type="search"
          aria-label="Find in the lines"
          placeholder="Find"
          value={filter.text}
          onChange={(event) => onFilter({ text: event.currentTarget.value })}
        />
        <NativeSelect
          size="xs"
          variant="unstyled"
          aria-label="Family"
          value={filter.family ?? ''}
          onChange={(event) => onFilter({ family: (event.currentTarget.value || null) as MarkFamily | null })}
          data={[{ value: '', label: 'All families' }, ...FAMILIES.map((f) => ({ value: f, label: FAMILY_PLURAL[f] }))]}
        />
        <NativeSelect
          size="xs"
          variant="unstyled"
          aria-label="State"
          value={filter.state ?? ''}
          onChange={(event) => onFilter({ state: (event.currentTarget.value || null) as ReviewState | null })}
          data={[{ value: '', label: 'All states' }, ...REVIEW_STATES.map((s) => ({ value: s, label: STATE_WORD[s] }))]}
        />
        <button type="button" className={classes.toggle} aria-pressed={filter.inView} onClick={() => onFilter({ inView: !filter.inView })}>
          In view
        </button>
        <button
          type="button"
          className={classes.toggle}
          title={`Copy ${counted(shown, 'line')} as a table, with units`}
          onClick={() => void copy()}
        >
          {copied ? 'Copied' : 'Copy'}
        </button>
      </div>
    </div>
  );
}
