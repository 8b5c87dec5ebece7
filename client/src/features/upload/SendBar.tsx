import { Button } from '@mantine/core';
import { count, counted } from '../../lib/number.js';
import { verdict, type Entry, type Verdict } from './entry.js';
import classes from './upload.module.css';

interface Props {
  entries: readonly Entry[];
  programmeName: string;
  onSend: (ready: readonly Entry[]) => void;
  onCancel: (busy: readonly Entry[]) => void;
}

/** Sends what can go; good files never wait for bad ones. Says how it stands, also to those who do not see it. */
export function SendBar({ entries, programmeName, onSend, onCancel }: Props) {
  const ready = entries.filter((entry) => verdict(entry) === 'ready');
  const busy = entries.filter((entry) => verdict(entry) === 'sending');
  const refused = entries.filter((entry) => verdict(entry) === 'refused');
  return (
    <div className={classes.send}>
      <span role="status">{standing(entries)}</span>
      <span className={classes.into}>Into {programmeName}</span>
      {busy.length > 0 && <Button onClick={() => onCancel(busy)}>Cancel {counted(busy.length, 'upload')}</Button>}
      {refused.length > 1 && <Button onClick={() => onSend(refused)}>Try {counted(refused.length, 'file')} again</Button>}
      <Button variant="filled" disabled={!ready.length} onClick={() => onSend(ready)}>
        {ready.length ? `Add ${counted(ready.length, 'spectrum', 'spectra')}` : 'Nothing to add'}
      </Button>
    </div>
  );
}

/** The bar's sentence. */
export function standing(entries: readonly Entry[]): string {
  const of = (...states: Verdict[]) => entries.filter((entry) => states.includes(verdict(entry))).length;
  const [ready, busy, added, reading, stay] = [of('ready'), of('sending'), of('added'), of('reading'), of('asks', 'unreadable', 'refused')];
  if (busy) return `${count(busy)} on ${busy === 1 ? 'its' : 'their'} way, ${count(added)} added.`;
  if (reading) return `Reading ${counted(reading, 'file')}.`;
  if (ready) return `${count(ready)} of ${count(entries.length)} can go now${stay ? '; the others stay on this page' : ''}.`;
  if (stay) return `${added ? `${count(added)} added; ` : ''}${counted(stay, 'file needs', 'files need')} a look.`;
  return added ? 'All are added; their analyses run.' : 'Nothing is left to add.';
}
