import { MEMBER_ROLES, type Member, type Programme } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { Initials } from '../../components/Initials.js';
import { ROLE_MEANS } from '../../lib/kinds.js';
import { counted } from '../../lib/number.js';
import { accountQueries } from '../../lib/queries/account.js';
import classes from './programmes.module.css';

const strongestFirst = (a: Member, b: Member) =>
  MEMBER_ROLES.indexOf(b.role) - MEMBER_ROLES.indexOf(a.role) || a.name.localeCompare(b.name, 'en');

/** Who works here, and what each may do. */
export function Members({ programme: { members } }: { programme: Programme }) {
  const me = useQuery(accountQueries.me()).data?.id;
  return (
    <section className={classes.members}>
      <h2>
        Members <span>{counted(members.length, 'person', 'people')}</span>
      </h2>
      <ul>
        {[...members].sort(strongestFirst).map(({ userId, name, role }) => (
          <li key={userId}>
            <Initials name={name} self={userId === me} />
            <span>
              {name}
              {userId === me && ' (you)'}
              <span className={classes.under}>
                {role}: {ROLE_MEANS[role]}
              </span>
            </span>
          </li>
        ))}
      </ul>
    </section>
  );
}
