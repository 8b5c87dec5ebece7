import { useNetwork } from '@mantine/hooks';
import type { Liveness } from '../../lib/useProgrammeEvents.js';
import classes from './shell.module.css';

/** Says when the page may be behind, and why. */
export function ConnectionNote({ liveness }: { liveness: Liveness }) {
  const { online } = useNetwork();
  const sentence = !online
    ? 'No connection. What you see may be out of date; what you type stays here.'
    : liveness === 'polling'
      ? 'The live connection is down. This page asks for news every 10 seconds until it is back.'
      : null;
  return <div role="status">{sentence && <p className={classes.note}>{sentence}</p>}</div>;
}
