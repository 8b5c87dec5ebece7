import { UnstyledButton } from '@mantine/core';
import { useQuery } from '@tanstack/react-query';
import type { ReceivedMail } from '@foreveil/shared';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { pagePaths } from '../../lib/paths.js';
import { accountQueries } from '../../lib/queries/account.js';
import { ago } from '../../lib/time.js';
import { useNow } from '../../lib/useNow.js';

/** What the demonstration's mail server received. In production there is no such page's data, and it says so. */
export function MailPage() {
  const received = useQuery({ ...accountQueries.received(), retry: false });
  const [chosen, setChosen] = useState<string | null>(null);
  const mail = useQuery({ ...accountQueries.receivedMail(chosen ?? ''), enabled: chosen !== null }).data;
  const now = useNow();
  return (
    <main className={sections.page}>
      <title>Mail of the demonstration · Foreveil</title>
      <h1 className={sections.title}>Mail of this demonstration</h1>
      <p>
        Nothing leaves this machine: what Foreveil would send arrives here. <Link to={pagePaths.programmes}>To the workbench</Link>
      </p>
      {received.isError && <ErrorNote error={received.error} />}
      <Section title="Received">
        <ul className={sections.rows}>
          {received.data?.map(({ id, subject, to, receivedAt }) => (
            <li key={id}>
              <span>
                <UnstyledButton className={sections.choice} aria-pressed={id === chosen} onClick={() => setChosen(id)}>
                  {subject}
                </UnstyledButton>
                <span className={sections.under}>
                  to {to.join(', ')}, {ago(receivedAt, now)}
                </span>
              </span>
            </li>
          ))}
          {received.data?.length === 0 && <li>Nothing yet. Invite somebody, or ask for a new password.</li>}
        </ul>
      </Section>
      {mail && <Letter mail={mail} />}
    </main>
  );
}

function Letter({ mail: { subject, from, to, text } }: { mail: ReceivedMail }) {
  const parts = text.split(/(https?:\/\/\S+)/);
  return (
    <Section title={subject} about={`From ${from} to ${to.join(', ')}`}>
      <div className={sections.letter}>
        {parts.map((part, i) =>
          /^https?:/.test(part) ? (
            <a key={i} href={here(part)}>
              {part}
            </a>
          ) : (
            part
          ),
        )}
      </div>
    </Section>
  );
}

/** The link on the host that this page was opened on, so that it also works through another name of the same server. */
const here = (address: string): string => {
  const { pathname, search, hash } = new URL(address);
  return `${pathname}${search}${hash}`;
};
