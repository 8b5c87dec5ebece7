import { apiPaths } from '@foreveil/shared';
import { useState } from 'react';
import { useLocation } from 'react-router-dom';
import { http } from '../../lib/http.js';
import { Door, secretOfLink } from './Door.js';
import { DoorForm } from './DoorForm.js';

const MAIL = {
  path: apiPaths.stopMail,
  title: 'Turn off mail',
  lead: 'Mail of the kind that led you here will not come any more. Your account page turns it on again.',
  act: 'Turn it off',
  done: 'It is off. Other kinds of mail are as they were.',
};
const EMAIL = {
  path: apiPaths.confirmEmail,
  title: 'Your new address',
  lead: 'From now on you sign in with the address that this link was sent to.',
  act: 'Use this address',
  done: 'The address was changed. Both addresses were told.',
};

/** Links that need one press: looking at a link, as mail programs do, must not use it. */
export function UseLinkPage() {
  const what = useLocation().pathname === '/mail-choice' ? MAIL : EMAIL;
  const [secret] = useState(secretOfLink);
  const [done, setDone] = useState(false);
  if (done) return <Door title="Done" lead={what.done} />;
  return (
    <Door title={what.title} lead={what.lead}>
      <DoorForm
        act={what.act}
        onSend={async () => {
          await http.post(what.path, { secret }, { quiet: true });
          setDone(true);
        }}
      />
    </Door>
  );
}
