import { Button } from '@mantine/core';
import { apiPaths } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { ErrorNote } from '../../components/ErrorNote.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { accountQueries } from '../../lib/queries/account.js';
import { ago, day } from '../../lib/time.js';
import { useAct } from '../../lib/useAct.js';
import { useNow } from '../../lib/useNow.js';
import { deviceName } from './device-name.js';

const CHANGES = [accountQueries.sessions().queryKey];

export function SessionsSection() {
  const list = useQuery(accountQueries.sessions()).data ?? [];
  const now = useNow();
  const end = useAct((id: string) => http.delete(apiPaths.session(id)), { done: 'That session was ended.', changes: CHANGES });
  const endOthers = useAct(() => http.delete(apiPaths.sessions), { done: 'All other sessions were ended.', changes: CHANGES });
  return (
    <Section title="Sessions" about="Where you are signed in. One that you do not know: end it, then change your password.">
      <ul className={sections.rows}>
        {list.map(({ id, device, createdAt, lastSeenAt, current }) => (
          <li key={id}>
            <span>
              <b>{deviceName(device)}</b>
              {current && ' (this one)'}
              <span className={sections.under}>
                since {day(createdAt)}, last seen {ago(lastSeenAt, now)}
              </span>
            </span>
            {!current && (
              <Button
                loading={end.isPending && end.variables === id}
                onClick={() => end.mutate(id)}
                aria-label={`End the session of ${deviceName(device)}`}
              >
                End
              </Button>
            )}
          </li>
        ))}
      </ul>
      {end.isError && <ErrorNote error={end.error} />}
      {endOthers.isError && <ErrorNote error={endOthers.error} />}
      {list.length > 1 && (
        <div className={sections.form}>
          <Button loading={endOthers.isPending} onClick={() => endOthers.mutate()}>
            End all others
          </Button>
        </div>
      )}
    </Section>
  );
}
