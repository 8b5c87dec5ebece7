import { Button } from '@mantine/core';
import { IconAlertTriangle } from '@tabler/icons-react';
import { errorSentence, traceOf } from '../lib/error-sentences.js';
import classes from './components.module.css';

interface Props {
  error: unknown;
  onRetry?: () => void;
}

/** A refusal or failure beside the thing that failed: what happened and what to do. Spoken once. */
export function ErrorNote({ error, onRetry }: Props) {
  const trace = traceOf(error);
  return (
    <div role="alert" className={classes.note}>
      <IconAlertTriangle size={16} aria-hidden />
      <p>
        {errorSentence(error)}
        {trace && <small> Logged as {trace}.</small>}
      </p>
      {onRetry && <Button onClick={onRetry}>Try again</Button>}
    </div>
  );
}
