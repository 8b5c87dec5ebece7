import { Button } from '@mantine/core';
import { apiPaths, type AccountRow } from '@foreveil/shared';
import { Confirm } from '../../components/Confirm.js';
import { ErrorNote } from '../../components/ErrorNote.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { counted } from '../../lib/number.js';
import { ago } from '../../lib/time.js';
import { useAct } from '../../lib/useAct.js';
import { useNow } from '../../lib/useNow.js';

type Change = Partial<Pick<AccountRow, 'active' | 'administrator'>>;

export function AccountItem({
  account: { id, name, email, active, administrator, secondFactor, lastSeenAt, programmes },
}: {
  account: AccountRow;
}) {
  const now = useNow();
  const change = useAct((wanted: Change) => http.patch<AccountRow>(apiPaths.adminAccount(id), wanted), {
    done: 'Saved.',
    changes: [['admin']],
  });
  return (
    <li>
      <span>
        <b>{name}</b>
        {administrator && ', administrator'}
        {!active && ', closed'}
        <span className={sections.under}>
          {email}; {counted(programmes, 'programme')}; {secondFactor ? 'second factor' : 'password only'};{' '}
          {lastSeenAt ? `last seen ${ago(lastSeenAt, now)}` : 'not signed in'}
        </span>
      </span>
      {active ? (
        <Confirm label="Close" title={`Close the account of ${name}?`} onConfirm={() => change.mutateAsync({ active: false })}>
          {name} is signed out everywhere and cannot sign in until it is opened again. Programmes that only they lead pass to their
          strongest member.
        </Confirm>
      ) : (
        <Button onClick={() => change.mutate({ active: true })} aria-label={`Open the account of ${name}`}>
          Open again
        </Button>
      )}
      <Confirm
        label={administrator ? 'Take administration' : 'Make administrator'}
        title={administrator ? `${name} no longer administers?` : `Make ${name} administrator?`}
        onConfirm={() => change.mutateAsync({ administrator: !administrator })}
      >
        {name} is signed out and told by mail.
      </Confirm>
      {change.isError && change.variables?.active && <ErrorNote error={change.error} />}
    </li>
  );
}
