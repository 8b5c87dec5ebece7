import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { pagePaths } from '../../lib/paths.js';
import classes from './sign-in.module.css';

/** A page for people who are not signed in: one thing to do, and the way to the front door. */
export function Door({ title, lead, children }: { title: string; lead: ReactNode; children?: ReactNode }) {
  return (
    <main className={classes.page}>
      <title>{`${title} · Foreveil`}</title>
      <div className={classes.motif} />
      <div className={classes.door}>
        <h1>{title}</h1>
        <p className={classes.lead}>{lead}</p>
        {children}
        <p className={classes.more}>
          <Link to={pagePaths.signIn}>To the sign-in page</Link>
        </p>
      </div>
    </main>
  );
}

/** The secret of the link that led here; it stands behind #, where no server sees it. */
export const secretOfLink = (): string => window.location.hash.slice(1);
