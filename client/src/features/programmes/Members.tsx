import { MEMBER_ROLES, type Member, type Programme } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { Initials } from '../../components/Initials.js';
import { ROLE_MEANS } from '../../lib/kinds.js';
import { counted } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { accountQueries } from '../../lib/queries/account.js';
import classes from './programmes.module.css';

const strongestFirst = (a: Member, b: Member) =>
  MEMBER_ROLES.indexOf(b.role) - MEMBER_ROLES.indexOf(a.role) || a.name.localeCompare(b.name, 'en');

/** Who works here, and what each may do. */
export function Members({ programme: { id, role: own, members } }: { programme: Programme }) {
  const me = useQuery(accountQueries.me()).data?.id;
  return (
    <section className={classes.members}>
      <h2>
        Members <span>{counted(members.length, 'person', 'people')}</span>
      </h2>
      <p>
        <Link to={pagePaths.members(id)}>{own === 'lead' ? 'Invite, change roles, settings' : 'Members and leaving'}</Link>
      </p>
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
