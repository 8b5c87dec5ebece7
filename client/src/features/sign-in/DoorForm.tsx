import { Button } from '@mantine/core';
import { useMutation } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { typed } from './NewAccountFields.js';
import classes from './sign-in.module.css';

interface Props {
  act: string;
  children?: ReactNode;
  onSend: (fields: Record<string, string>) => Promise<unknown>;
}

/** Plain fields, as password managers know them; a refusal stands above the button and nothing typed is lost. */
export function DoorForm({ act, children, onSend }: Props) {
  const send = useMutation({ mutationFn: onSend });
  return (
    <form
      className={classes.form}
      onSubmit={(event) => {
        event.preventDefault();
        send.mutate(typed(event.currentTarget));
      }}
    >
      {children}
      {send.isError && <ErrorNote error={send.error} />}
      <Button type="submit" variant="filled" loading={send.isPending} className={classes.act}>
        {act}
      </Button>
    </form>
  );
}
