import { apiPaths } from '@foreveil/shared';
import { useState } from 'react';
import { http } from '../../lib/http.js';
import { Door } from './Door.js';
import { DoorForm } from './DoorForm.js';
import { EmailField } from './NewAccountFields.js';

export function ForgotPasswordPage() {
  const [asked, setAsked] = useState(false);
  if (asked)
    return (
      <Door
        title="Look into your mail"
        lead="If this address has an account, a link for a new password is on its way. It works once, for an hour."
      />
    );
  return (
    <Door title="New password" lead="We send a link to the address of your account.">
      <DoorForm
        act="Send the link"
        onSend={async ({ email }) => {
          await http.post(apiPaths.askPasswordReset, { email }, { quiet: true });
          setAsked(true);
        }}
      >
        <EmailField />
      </DoorForm>
    </Door>
  );
}
