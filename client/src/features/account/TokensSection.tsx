import { Button, NativeSelect, NumberInput, TextInput } from '@mantine/core';
import { apiPaths, type AccessToken, type MadeAccessToken } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { ActForm } from '../../components/ActForm.js';
import { Confirm } from '../../components/Confirm.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { accountQueries } from '../../lib/queries/account.js';
import { ago, day } from '../../lib/time.js';
import { useAct } from '../../lib/useAct.js';
import { useNow } from '../../lib/useNow.js';

const CHANGES = [accountQueries.tokens().queryKey];
const SCOPES = [
  { value: 'read', label: 'only read' },
  { value: 'write', label: 'read and change' },
];

/** Access tokens for scripts. */
export function TokensSection() {
  const list = useQuery(accountQueries.tokens()).data ?? [];
  const [made, setMade] = useState<MadeAccessToken | null>(null);
  const make = useAct(
    ({ name, scope, days }: Record<string, string>) =>
      http.post<MadeAccessToken>(apiPaths.accessTokens, { name, scope, days: Number(days) }),
    { changes: CHANGES },
  );
  return (
    <Section
      title="Access tokens"
      about="A script sends one as “Authorization: Bearer …” and may then do what you may in your programmes, as far as the token goes. It never reaches your account."
    >
      {made && (
        <>
          <p>This is the only time that the token is shown. Keep it like a password.</p>
          <code className={sections.secret}>{made.token}</code>
          <Button onClick={() => setMade(null)}>I have kept it</Button>
        </>
      )}
      <ul className={sections.rows}>
        {list.map((token) => (
          <TokenRow key={token.id} token={token} />
        ))}
      </ul>
      <ActForm
        act="Make a token"
        busy={make.isPending}
        error={make.error}
        onSend={(fields) => make.mutateAsync(fields).then(setMade)}
        clears
      >
        <TextInput label="What it is for" name="name" maxLength={120} required withAsterisk={false} />
        <NativeSelect label="It may" name="scope" data={SCOPES} />
        <NumberInput label="Days that it works" name="days" defaultValue={90} min={1} max={366} allowDecimal={false} hideControls />
      </ActForm>
    </Section>
  );
}

function TokenRow({ token: { id, name, scope, expiresAt, lastUsedAt } }: { token: AccessToken }) {
  const now = useNow();
  const revoke = useAct(() => http.delete(apiPaths.accessToken(id)), { done: `The token ${name} was revoked.`, changes: CHANGES });
  return (
    <li>
      <span>
        <b>{name}</b>
        <span className={sections.under}>
          may {scope === 'read' ? 'only read' : 'read and change'}; {Date.parse(expiresAt) < now ? 'ran out' : 'works until'}{' '}
          {day(expiresAt)}; {lastUsedAt ? `last used ${ago(lastUsedAt, now)}` : 'never used'}
        </span>
      </span>
      <Confirm label="Revoke" title={`Revoke ${name}?`} onConfirm={() => revoke.mutateAsync()}>
        Scripts that use it are refused from the next request on. It cannot be had back.
      </Confirm>
    </li>
  );
}
