import { Button, PasswordInput, TextInput } from '@mantine/core';
import { apiPaths, type Account, type RecoveryCodes, type SecondFactorOffer } from '@foreveil/shared';
import { toDataURL } from 'qrcode';
import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { ActForm } from '../../components/ActForm.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { accountQueries } from '../../lib/queries/account.js';
import { useAct } from '../../lib/useAct.js';

const CHANGES = { changes: [accountQueries.account().queryKey] };

/** A code of the phone besides the password: begun, shown to work, then on; recovery codes are shown once. */
export function SecondFactorSection({ account: { secondFactor } }: { account: Account }) {
  const [offer, setOffer] = useState<SecondFactorOffer | null>(null);
  const [codes, setCodes] = useState<readonly string[] | null>(null);
  const about = secondFactor.on
    ? `On. Signing in asks for a code of your authenticator app. ${secondFactor.recoveryCodesLeft} recovery codes are left.`
    : 'Off. With it, signing in also asks for a code of an authenticator app on your phone.';
  const show = (fresh: RecoveryCodes) => {
    setOffer(null);
    setCodes(fresh.codes);
  };
  return (
    <Section title="Second factor" about={about}>
      {codes && <Codes codes={codes} onKept={() => setCodes(null)} />}
      {!codes && offer && <Confirming offer={offer} onConfirmed={show} onCancel={() => setOffer(null)} />}
      {!codes && !offer && (secondFactor.on ? <WhileOn onRenewed={show} /> : <Begin onOffered={setOffer} />)}
    </Section>
  );
}

const OwnPassword = () => (
  <PasswordInput
    label="Your password, for the second factor"
    name="password"
    autoComplete="current-password"
    required
    withAsterisk={false}
    visibilityToggleButtonProps={{ 'aria-label': 'Show the password' }}
  />
);

function Begin({ onOffered }: { onOffered: (offer: SecondFactorOffer) => void }) {
  const begin = useAct((fields: Record<string, string>) => http.post<SecondFactorOffer>(apiPaths.secondFactor, fields), CHANGES);
  return (
    <ActForm act="Set it up" busy={begin.isPending} error={begin.error} onSend={(fields) => begin.mutateAsync(fields).then(onOffered)}>
      <OwnPassword />
    </ActForm>
  );
}

interface ConfirmingProps {
  offer: SecondFactorOffer;
  onConfirmed: (codes: RecoveryCodes) => void;
  onCancel: () => void;
}

function Confirming({ offer: { secret, uri }, onConfirmed, onCancel }: ConfirmingProps) {
  const picture = useQuery({
    queryKey: ['qr', uri],
    queryFn: () => toDataURL(uri, { width: 400, margin: 2 }),
    staleTime: Infinity,
    gcTime: 0,
  });
  const confirm = useAct((code: string) => http.post<RecoveryCodes>(apiPaths.confirmSecondFactor, { code }, { quiet: true }), CHANGES);
  return (
    <>
      <p>Scan this with your authenticator app, or type the secret into it, then type the code that it shows.</p>
      {picture.data && (
        <img className={sections.qr} src={picture.data} alt="QR code for an authenticator app; the secret below says the same" />
      )}
      <code className={sections.secret}>{secret}</code>
      <ActForm
        act="Turn it on"
        busy={confirm.isPending}
        error={confirm.error}
        onSend={({ code = '' }) => confirm.mutateAsync(code).then(onConfirmed)}
      >
        <TextInput label="Code" name="code" inputMode="numeric" autoComplete="one-time-code" required withAsterisk={false} />
        <Button onClick={onCancel}>Cancel</Button>
      </ActForm>
    </>
  );
}

function Codes({ codes, onKept }: { codes: readonly string[]; onKept: () => void }) {
  return (
    <>
      <p>Keep these recovery codes where you will find them without your phone. Each works once; they are not shown again.</p>
      <ul className={sections.codes} aria-label="Recovery codes">
        {codes.map((code) => (
          <li key={code}>{code}</li>
        ))}
      </ul>
      <Button variant="filled" onClick={onKept}>
        I have kept them
      </Button>
    </>
  );
}

function WhileOn({ onRenewed }: { onRenewed: (codes: RecoveryCodes) => void }) {
  const renew = useAct((fields: Record<string, string>) => http.post<RecoveryCodes>(apiPaths.recoveryCodes, fields), CHANGES);
  const end = useAct((fields: Record<string, string>) => http.post<void>(apiPaths.endSecondFactor, fields), {
    ...CHANGES,
    done: 'The second factor is off.',
  });
  const [ending, setEnding] = useState(false);
  return (
    <>
      <ActForm
        act={ending ? 'Turn it off' : 'Make new recovery codes'}
        busy={renew.isPending || end.isPending}
        error={ending ? end.error : renew.error}
        onSend={(fields) => (ending ? end.mutateAsync(fields) : renew.mutateAsync(fields).then(onRenewed))}
      >
        <OwnPassword />
      </ActForm>
      <Button variant="subtle" onClick={() => setEnding(!ending)}>
        {ending ? 'Make new recovery codes instead' : 'Turn it off instead'}
      </Button>
    </>
  );
}
