import { apiPaths } from '@foreveil/shared';
import { useState } from 'react';
import { http } from '../../lib/http.js';
import { Door, secretOfLink } from './Door.js';
import { DoorForm } from './DoorForm.js';
import { NewPasswordField } from './NewAccountFields.js';

export function ResetPasswordPage() {
  const [secret] = useState(secretOfLink);
  const [done, setDone] = useState(false);
  if (done) return <Door title="Password set" lead="Every session of your account was ended. Sign in with the new password." />;
  return (
    <Door title="Set a new password" lead="The link that led you here works once.">
      <DoorForm
        act="Set the password"
        onSend={async ({ password }) => {
          await http.post(apiPaths.resetPassword, { secret, password }, { quiet: true });
          setDone(true);
        }}
      >
        <NewPasswordField label="New password" />
      </DoorForm>
    </Door>
  );
}
