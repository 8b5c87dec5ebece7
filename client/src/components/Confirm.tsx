import { Button, Modal } from '@mantine/core';
import { useState, type ReactNode } from 'react';
import { ErrorNote } from './ErrorNote.js';
import classes from './sections.module.css';

interface Props {
  /** on the button that opens it, and on the one that does it */
  label: string;
  title: string;
  /** what will happen, and what is lost */
  children: ReactNode;
  onConfirm: () => Promise<unknown>;
  disabled?: boolean;
}

/** A button for what cannot simply be taken back: says what will happen before it does. */
export function Confirm({ label, title, children, onConfirm, disabled = false }: Props) {
  const [opened, setOpened] = useState(false);
  const [busy, setBusy] = useState(false);
  const [error, setError] = useState<unknown>(null);
  const close = () => {
    setOpened(false);
    setError(null);
  };
  const act = () => {
    setBusy(true);
    setError(null);
    onConfirm()
      .then(close, setError)
      .finally(() => setBusy(false));
  };
  return (
    <>
      <Button disabled={disabled} onClick={() => setOpened(true)}>
        {label}
      </Button>
      <Modal opened={opened} onClose={close} title={title}>
        <div>{children}</div>
        {error !== null && <ErrorNote error={error} />}
        <div className={classes.form}>
          <Button onClick={close} data-autofocus>
            Cancel
          </Button>
          <Button variant="filled" loading={busy} onClick={act}>
            {label}
          </Button>
        </div>
      </Modal>
    </>
  );
}
