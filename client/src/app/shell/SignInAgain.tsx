import { Modal } from '@mantine/core';
import type { Me } from '@foreveil/shared';
import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { SignInForm } from '../../features/sign-in/SignInForm.js';
import { pagePaths } from '../../lib/paths.js';
import { accountQueries } from '../../lib/queries/account.js';
import { onSignedOut } from '../../lib/session.js';

/** When the session has ended under a request: sign in over the page, and the request goes on. Nothing typed is lost. */
export function SignInAgain() {
  const client = useQueryClient();
  const [opened, setOpened] = useState(false);
  const answer = useRef<((signedIn: boolean) => void) | null>(null);
  const before = client.getQueryData<Me>(accountQueries.me().queryKey);

  useEffect(
    () =>
      onSignedOut(
        () =>
          new Promise<boolean>((resolve) => {
            answer.current = resolve;
            setOpened(true);
          }),
      ),
    [],
  );

  const end = (signedIn: boolean) => {
    setOpened(false);
    answer.current?.(signedIn);
    answer.current = null;
  };
  const onSignedIn = (me: Me) => {
    // someone else at the same desk must not act on what was loaded for the first
    if (before && before.id !== me.id) return window.location.assign(pagePaths.programmes);
    client.setQueryData(accountQueries.me().queryKey, me);
    end(true);
  };
  return (
    <Modal opened={opened} onClose={() => end(false)} title="You are signed out" size={368} closeOnClickOutside={false}>
      <p style={{ marginBottom: 16, color: 'var(--ink-2)' }}>Sign in to go on where you were. Nothing on this page is lost.</p>
      <SignInForm email={before?.email ?? ''} onSignedIn={onSignedIn} />
    </Modal>
  );
}
