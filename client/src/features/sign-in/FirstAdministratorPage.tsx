import { apiPaths } from '@foreveil/shared';
import { useState } from 'react';
import { http } from '../../lib/http.js';
import { Door, secretOfLink } from './Door.js';
import { DoorForm } from './DoorForm.js';
import { EmailField, NameField, NewPasswordField } from './NewAccountFields.js';

/** Reached from the address that the server printed at its first start. */
export function FirstAdministratorPage() {
  const [secret] = useState(secretOfLink);
  const [done, setDone] = useState(false);
  if (done) return <Door title="The site is open" lead="Your account manages the accounts of this site. Sign in to begin." />;
  return (
    <Door title="First account" lead="It manages the accounts of this site. The link works once.">
      <DoorForm
        act="Open the account"
        onSend={async (fields) => {
          await http.post(apiPaths.claimSite, { secret, ...fields }, { quiet: true });
          setDone(true);
        }}
      >
        <NameField />
        <EmailField />
        <NewPasswordField />
      </DoorForm>
    </Door>
  );
}
