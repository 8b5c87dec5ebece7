import { TextInput } from '@mantine/core';
import { useDebouncedValue } from '@mantine/hooks';
import { apiPaths, type Invitation } from '@foreveil/shared';
import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { ActForm } from '../../components/ActForm.js';
import { ErrorNote } from '../../components/ErrorNote.js';
import { PageHead } from '../../components/PageHead.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { accountQueries } from '../../lib/queries/account.js';
import { useAct } from '../../lib/useAct.js';
import { AccountItem } from './AccountItem.js';

/** For administrators of the site: accounts, and whether mail leaves. */
export function AdminPage() {
  const [find, setFind] = useState('');
  const [settled] = useDebouncedValue(find, 200);
  const accounts = useQuery({ ...accountQueries.accounts(settled), placeholderData: keepPreviousData });
  const outbox = useQuery({ ...accountQueries.outbox(), enabled: accounts.isSuccess }).data;
  const invite = useAct((email: string) => http.post<Invitation>(apiPaths.adminInvitations, { email }), {
    done: 'The invitation is on its way.',
    changes: [],
  });
  return (
    <>
      <PageHead title="Accounts of this site" sub="Administrators manage accounts; programmes they see only as their members" />
      <div className={sections.page}>
        {accounts.isError && <ErrorNote error={accounts.error} />}
        {accounts.data && (
          <>
            <Section title="Accounts">
              <TextInput
                label="Part of a name or an address"
                value={find}
                onChange={(event) => setFind(event.currentTarget.value)}
                maw={320}
              />
              <ul className={sections.rows}>
                {accounts.data.rows.map((account) => (
                  <AccountItem key={account.id} account={account} />
                ))}
              </ul>
              {accounts.data.next && <p>More accounts than are shown: narrow the search.</p>}
              {accounts.data.rows.length === 0 && <p>No account has this in its name or address.</p>}
            </Section>
            <Section
              title="Invite to the site"
              about="For people who will start a programme of their own. Into a programme its leads invite."
            >
              <ActForm
                act="Invite"
                busy={invite.isPending}
                error={invite.error}
                onSend={({ email = '' }) => invite.mutateAsync(email)}
                clears
              >
                <TextInput label="E-mail address" name="email" type="email" autoComplete="off" required withAsterisk={false} />
              </ActForm>
            </Section>
            {outbox && (
              <Section
                title="Mail"
                about={`${outbox.waiting} waiting, ${outbox.failed} refused by the mail server, ${outbox.unconfirmed} sent without its answer: those are not sent again.`}
              >
                {null}
              </Section>
            )}
          </>
        )}
      </div>
    </>
  );
}
