import { apiPaths, MEMBER_ROLES, type MemberDetail, type MemberRole } from '@foreveil/shared';
import { Confirm } from '../../components/Confirm.js';
import { ErrorNote } from '../../components/ErrorNote.js';
import { Pick } from '../../components/Pick.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { ROLE_MEANS } from '../../lib/kinds.js';
import { programmeQueries } from '../../lib/queries/programmes.js';
import { day } from '../../lib/time.js';
import { useAct } from '../../lib/useAct.js';

interface Props {
  programmeId: string;
  member: MemberDetail;
  own: boolean;
  leads: boolean;
}

const OPTIONS = MEMBER_ROLES.map((value) => ({ value, label: value }));

export function MemberRow({ programmeId, member: { userId, name, role, version, since, closed, email }, own, leads }: Props) {
  const path = apiPaths.member(programmeId, userId);
  const changes = [programmeQueries.within(programmeId)];
  const change = useAct((wanted: MemberRole) => http.patch<MemberDetail>(path, { role: wanted }, { ifMatch: version }), {
    done: `The role of ${name} was changed.`,
    changes,
  });
  const remove = useAct(() => http.delete(path, { ifMatch: version }), { done: `${name} was removed.`, changes });
  return (
    <li>
      <span>
        <b>{name}</b>
        {own && ' (you)'}
        <span className={sections.under}>
          {email && `${email}; `}
          {ROLE_MEANS[role]}; since {day(since)}
          {closed && '; account closed'}
        </span>
      </span>
      {leads ? (
        <Pick label={`Role of ${name}`} options={OPTIONS} value={role} onPick={(wanted) => change.mutate(wanted)} />
      ) : (
        <span>{role}</span>
      )}
      {leads && !own && (
        <Confirm label="Remove" title={`Remove ${name}?`} onConfirm={() => remove.mutateAsync()}>
          {name} will not see the programme any more. What they decided stays under their name, analyses they asked for run on, and
          invitations they sent are taken back.
        </Confirm>
      )}
      {change.isError && <ErrorNote error={change.error} />}
    </li>
  );
}
