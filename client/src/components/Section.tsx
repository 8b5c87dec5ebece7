import { useId, type ReactNode } from 'react';
import classes from './sections.module.css';

/** A part of a page with its heading and one sentence on what it is for. */
export function Section({ title, about, children }: { title: string; about?: ReactNode; children: ReactNode }) {
  const id = useId();
  return (
    <section className={classes.section} aria-labelledby={id}>
      <h2 id={id}>{title}</h2>
      {about && <p>{about}</p>}
      {children}
    </section>
  );
}
