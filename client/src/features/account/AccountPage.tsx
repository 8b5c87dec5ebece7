import { PasswordInput, TextInput } from '@mantine/core';
import { apiPaths, type Account } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { ActForm } from '../../components/ActForm.js';
import { PageHead } from '../../components/PageHead.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { accountQueries } from '../../lib/queries/account.js';
import { useAct } from '../../lib/useAct.js';
import { MailChoicesSection } from './MailChoicesSection.js';
import { SecondFactorSection } from './SecondFactorSection.js';
import { SessionsSection } from './SessionsSection.js';
import { TokensSection } from './TokensSection.js';

const ACCOUNT = accountQueries.account().queryKey;
const reveal = { 'aria-label': 'Show the password' };

export function AccountPage() {
  const account = useQuery(accountQueries.account()).data;
  return (
    <>
      <PageHead title="Your account" sub={account?.email} />
      {account && (
        <div className={sections.page}>
          <NameSection account={account} />
          <EmailSection account={account} />
          <PasswordSection />
          <SecondFactorSection account={account} />
          <SessionsSection />
          <TokensSection />
          <MailChoicesSection />
        </div>
      )}
    </>
  );
}

function NameSection({ account }: { account: Account }) {
  const change = useAct((name: string) => http.patch<Account>(apiPaths.account, { name }), {
    done: 'Your name was changed.',
    changes: [ACCOUNT, accountQueries.me().queryKey],
  });
  return (
    <Section title="Name" about="What teammates see beside your decisions.">
      <ActForm act="Change name" busy={change.isPending} error={change.error} onSend={({ name = '' }) => change.mutateAsync(name)}>
        <TextInput
          label="Your name"
          name="name"
          autoComplete="name"
          defaultValue={account.name}
          maxLength={120}
          required
          withAsterisk={false}
        />
      </ActForm>
    </Section>
  );
}

function EmailSection({ account }: { account: Account }) {
  const ask = useAct((fields: Record<string, string>) => http.post<void>(apiPaths.ownEmail, fields), {
    done: 'A link was sent to the new address. The address changes when it is followed.',
    changes: [],
  });
  return (
    <Section
      title="E-mail address"
      about={`It is ${account.email}. A new one counts once the link sent there was followed; both are told.`}
    >
      <ActForm act="Send the link" busy={ask.isPending} error={ask.error} onSend={(fields) => ask.mutateAsync(fields)} clears>
        <TextInput label="New address" name="email" type="email" autoComplete="email" required withAsterisk={false} />
        <PasswordInput
          label="Your password, for the address"
          name="password"
          autoComplete="current-password"
          required
          withAsterisk={false}
          visibilityToggleButtonProps={reveal}
        />
      </ActForm>
    </Section>
  );
}

function PasswordSection() {
  const change = useAct((fields: Record<string, string>) => http.post<void>(apiPaths.ownPassword, fields), {
    done: 'Your password was changed; other sessions were ended.',
    changes: [accountQueries.sessions().queryKey],
  });
  return (
    <Section title="Password" about="At least 15 characters; a sentence works well. Changing it ends your other sessions.">
      <ActForm act="Change password" busy={change.isPending} error={change.error} onSend={(fields) => change.mutateAsync(fields)} clears>
        <PasswordInput
          label="Present password"
          name="current"
          autoComplete="current-password"
          required
          withAsterisk={false}
          visibilityToggleButtonProps={reveal}
        />
        <PasswordInput
          label="New password"
          name="password"
          autoComplete="new-password"
          required
          withAsterisk={false}
          visibilityToggleButtonProps={reveal}
        />
      </ActForm>
    </Section>
  );
}
