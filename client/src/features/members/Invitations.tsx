import { Button, NativeSelect, TextInput } from '@mantine/core';
import { apiPaths, MEMBER_ROLES, type Invitation, type NewInvitation } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { ActForm } from '../../components/ActForm.js';
import { ErrorNote } from '../../components/ErrorNote.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { ROLE_MEANS } from '../../lib/kinds.js';
import { memberQueries } from '../../lib/queries/programmes.js';
import { day } from '../../lib/time.js';
import { useAct } from '../../lib/useAct.js';

const ROLES = MEMBER_ROLES.map((role) => ({ value: role, label: `${role}: ${ROLE_MEANS[role]}` }));

export function Invitations({ programmeId }: { programmeId: string }) {
  const open = useQuery(memberQueries.invitations(programmeId)).data ?? [];
  const changes = [memberQueries.invitations(programmeId).queryKey];
  const invite = useAct((wanted: NewInvitation) => http.post<Invitation>(apiPaths.invitations(programmeId), wanted), {
    done: 'The invitation is on its way.',
    changes,
  });
  const revoke = useAct((id: string) => http.delete(apiPaths.invitation(programmeId, id)), {
    done: 'The invitation was taken back.',
    changes,
  });
  return (
    <Section title="Invite by mail" about="The link works once, for two weeks; who has no account opens one with it.">
      <ActForm
        act="Invite"
        busy={invite.isPending}
        error={invite.error}
        onSend={({ email = '', role }) => invite.mutateAsync({ email, role: role as NewInvitation['role'] })}
        clears
      >
        <TextInput label="E-mail address" name="email" type="email" autoComplete="off" required withAsterisk={false} />
        <NativeSelect label="Role" name="role" data={ROLES} defaultValue="analyst" />
      </ActForm>
      {revoke.isError && <ErrorNote error={revoke.error} />}
      <ul className={sections.rows} aria-label="Invitations that wait">
        {open.map(({ id, email, role, invitedBy, createdAt, expiresAt, expired }) => (
          <li key={id}>
            <span>
              <b>{email}</b>
              <span className={sections.under}>
                as {role}, by {invitedBy} on {day(createdAt)}; {expired ? 'ran out' : 'good until'} {day(expiresAt)}
              </span>
            </span>
            <Button onClick={() => invite.mutate({ email, role: role! })} aria-label={`Send ${email} another link`}>
              Send again
            </Button>
            <Button onClick={() => revoke.mutate(id)} aria-label={`Take the invitation of ${email} back`}>
              Take back
            </Button>
          </li>
        ))}
      </ul>
    </Section>
  );
}
