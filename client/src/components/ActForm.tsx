import { Button } from '@mantine/core';
import { useRef, type ReactNode } from 'react';
import { ErrorNote } from './ErrorNote.js';
import classes from './sections.module.css';

interface Props {
  act: string;
  children?: ReactNode;
  busy: boolean;
  error: unknown;
  onSend: (fields: Record<string, string>) => Promise<unknown>;
  /** empties the fields when it is done */
  clears?: boolean;
}

/** Plain fields in a row with their button; a refusal stands below and nothing typed is lost. */
export function ActForm({ act, children, busy, error, onSend, clears = false }: Props) {
  const form = useRef<HTMLFormElement>(null);
  return (
    <form
      ref={form}
      className={classes.form}
      onSubmit={(event) => {
        event.preventDefault();
        const fields = [...new FormData(event.currentTarget)].map(([name, value]) => [name, typeof value === 'string' ? value : '']);
        onSend(Object.fromEntries(fields) as Record<string, string>).then(
          () => clears && form.current?.reset(),
          () => undefined, // shown from `error`
        );
      }}
    >
      {children}
      <Button type="submit" loading={busy}>
        {act}
      </Button>
      {error ? <ErrorNote error={error} /> : null}
    </form>
  );
}
