import { Button } from '@mantine/core';
import { apiPaths, type InvitationLook } from '@foreveil/shared';
import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { ErrorNote } from '../../components/ErrorNote.js';
import { http } from '../../lib/http.js';
import { pagePaths } from '../../lib/paths.js';
import { accountQueries } from '../../lib/queries/account.js';
import { Door, secretOfLink } from './Door.js';
import { DoorForm } from './DoorForm.js';
import { NameField, NewPasswordField } from './NewAccountFields.js';
import { SignInForm } from './SignInForm.js';
import classes from './sign-in.module.css';

const whereTo = ({ programmeName, role, invitedBy }: InvitationLook): string =>
  programmeName ? `${invitedBy} invites you to ${programmeName}, as ${role}.` : `${invitedBy} invites you to open an account.`;

/** An invitation: open an account with the invited address, or join with the account one has. */
export function JoinPage() {
  const [secret] = useState(secretOfLink);
  const look = useQuery({ ...accountQueries.invitation(secret), retry: false });
  const me = useQuery({ ...accountQueries.me(), retry: false });
  const enter = useEnter(secret);
  const [signingIn, setSigningIn] = useState(false);
  if (look.isError) {
    return (
      <Door title="Invitation" lead="This link cannot be used.">
        <ErrorNote error={look.error} />
      </Door>
    );
  }
  if (!look.data || me.isPending) return <Door title="Invitation" lead="Looking at it …" />;
  if (me.data) {
    return (
      <Door title="Invitation" lead={whereTo(look.data)}>
        <DoorForm act={`Accept as ${me.data.name}`} onSend={enter.withAccount} />
      </Door>
    );
  }
  if (signingIn || look.data.hasAccount) {
    return (
      <Door title="Invitation" lead={`${whereTo(look.data)} Sign in to accept.`}>
        <SignInForm email={look.data.hasAccount ? look.data.email : ''} onSignedIn={() => void me.refetch()} />
      </Door>
    );
  }
  return (
    <Door title="Invitation" lead={`${whereTo(look.data)} Your account will have the address ${look.data.email}.`}>
      <DoorForm act="Open the account and join" onSend={(fields) => enter.withNewAccount(fields, look.data)}>
        <NameField />
        <NewPasswordField />
      </DoorForm>
      <p className={classes.more}>
        <Button variant="subtle" onClick={() => setSigningIn(true)}>
          I have an account already
        </Button>
      </p>
    </Door>
  );
}

function useEnter(secret: string) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const go = async (programmeId: string | null) => {
    client.clear(); // what was known of nobody, or of who was signed in before
    await navigate(programmeId ? pagePaths.programme(programmeId) : pagePaths.programmes, { replace: true });
  };
  return {
    withAccount: async () => {
      const { programmeId } = await http.post<{ programmeId: string | null }>(apiPaths.acceptInvitation, { secret }, { quiet: true });
      await go(programmeId);
    },
    withNewAccount: async (fields: Record<string, string>, { programmeId }: InvitationLook) => {
      await http.post(apiPaths.joinWithNewAccount, { secret, ...fields }, { quiet: true });
      await go(programmeId);
    },
  };
}
