import type { ReactNode } from 'react';
import classes from './pages.module.css';

interface Props {
  title: string;
  /** what happened and what can be done, whole sentences */
  children: ReactNode;
  actions: ReactNode;
  /** under which the server logged it */
  trace?: string | null;
}

/** A page that says what is not there, with ways on. The strip above it is empty: no light arrived. */
export function ErrorPage({ title, children, actions, trace = null }: Props) {
  return (
    <section className={classes.page}>
      <title>{`${title} · Foreveil`}</title>
      <div className={classes.strip} aria-hidden="true" />
      <div role="alert">
        <h1>{title}</h1>
        <p>{children}</p>
        {trace && <p className={classes.trace}>The server logged this as {trace}. Quote it when you ask for help.</p>}
      </div>
      <div className={classes.acts}>{actions}</div>
    </section>
  );
}
