import { apiPaths, type Programme } from '@foreveil/shared';
import { useQuery, useSuspenseQuery } from '@tanstack/react-query';
import { useNavigate, useParams } from 'react-router-dom';
import { Confirm } from '../../components/Confirm.js';
import { PageHead } from '../../components/PageHead.js';
import { Section } from '../../components/Section.js';
import sections from '../../components/sections.module.css';
import { http } from '../../lib/http.js';
import { pagePaths } from '../../lib/paths.js';
import { accountQueries } from '../../lib/queries/account.js';
import { memberQueries, programmeQueries } from '../../lib/queries/programmes.js';
import { useAct } from '../../lib/useAct.js';
import { Invitations } from './Invitations.js';
import { MemberRow } from './MemberRow.js';
import { ProgrammeSettings } from './ProgrammeSettings.js';

/** Who is in the programme; leads also invite, change roles, rename and delete here. */
export function MembersPage() {
  const { programmeId = '' } = useParams();
  const programme = useSuspenseQuery(programmeQueries.detail(programmeId)).data;
  const members = useQuery(memberQueries.list(programmeId)).data ?? [];
  const me = useQuery(accountQueries.me()).data?.id;
  const leads = programme.role === 'lead';
  return (
    <>
      <PageHead title={`Members of ${programme.name}`} sub={`Your role: ${programme.role}`} />
      <div className={sections.page}>
        <Section
          title="Members"
          about={leads ? 'A change of role counts from the next thing that they do.' : 'Leads change roles and invite.'}
        >
          <ul className={sections.rows}>
            {members.map((member) => (
              <MemberRow key={member.userId} programmeId={programmeId} member={member} own={member.userId === me} leads={leads} />
            ))}
          </ul>
          <Leave programme={programme} />
        </Section>
        {leads && <Invitations programmeId={programmeId} />}
        {leads && <ProgrammeSettings key={programme.version} programme={programme} />}
      </div>
    </>
  );
}

function Leave({ programme: { id, name } }: { programme: Programme }) {
  const navigate = useNavigate();
  const leave = useAct(() => http.post<void>(apiPaths.leaveProgramme(id)), {
    done: `You left ${name}.`,
    changes: [programmeQueries.list().queryKey],
  });
  return (
    <div className={sections.form}>
      <Confirm
        label="Leave the programme"
        title={`Leave ${name}?`}
        onConfirm={async () => {
          await leave.mutateAsync();
          await navigate(pagePaths.programmes);
        }}
      >
        You will not see it any more. What you decided stays under your name. A lead can invite you again.
      </Confirm>
    </div>
  );
}
