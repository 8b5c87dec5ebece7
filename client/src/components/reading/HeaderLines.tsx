import { TextInput } from '@mantine/core';
import { IconSearch } from '@tabler/icons-react';
import { useMemo, useState } from 'react';
import { count, counted } from '../../lib/number.js';
import classes from './reading.module.css';

/** A line of a million is enough for the eye; the search goes through all of them. */
const MOST_LINES = 2000;

/** Every header card or comment line of the file as it stands there, and a search through them. */
export function HeaderLines({ lines, open = false }: { lines: readonly string[]; open?: boolean }) {
  if (!lines.length) return <p className={classes.none}>The file has no header and no comment lines.</p>;
  return (
    <details className={classes.header} open={open}>
      <summary>Header, {counted(lines.length, 'line')}</summary>
      <Searched lines={lines} />
    </details>
  );
}

function Searched({ lines }: { lines: readonly string[] }) {
  const [sought, setSought] = useState('');
  const found = useMemo(() => {
    const word = sought.trim().toLowerCase();
    return lines.map((text, i) => ({ text, number: i + 1 })).filter(({ text }) => !word || text.toLowerCase().includes(word));
  }, [lines, sought]);
  return (
    <>
      <div className={classes.search}>
        <TextInput
          aria-label="Search the header"
          placeholder="Search"
          leftSection={<IconSearch size={14} aria-hidden />}
          value={sought}
          onChange={(event) => setSought(event.currentTarget.value)}
        />
        <span role="status">{sought.trim() ? `${count(found.length)} of ${counted(lines.length, 'line')}` : ''}</span>
      </div>
      <pre tabIndex={0} aria-label="Header of the file">
        {found.slice(0, MOST_LINES).map(({ text, number }) => (
          <span key={number}>
            <i>{number}</i>
            {text}
            {'\n'}
          </span>
        ))}
        {found.length > MOST_LINES && `… ${counted(found.length - MOST_LINES, 'more line')}; search for what you need.`}
      </pre>
    </>
  );
}
