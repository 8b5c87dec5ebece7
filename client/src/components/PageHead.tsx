import type { ReactNode } from 'react';
import classes from './components.module.css';
import { Simulated } from './Simulated.js';

export interface Fact {
  readonly label: string;
  readonly value: ReactNode;
  /** unit or where it comes from, smaller */
  readonly note?: string;
}

interface Props {
  title: string;
  /** name for the browser's tab when the title is not enough */
  tab?: string;
  simulated?: boolean;
  sub?: ReactNode;
  facts?: readonly Fact[];
  actions?: ReactNode;
}

/** Name, facts and actions of a page. */
export function PageHead({ title, tab = title, simulated = false, sub, facts = [], actions }: Props) {
  return (
    <section className={classes.head}>
      <title>{`${tab} · Foreveil`}</title>
      <div className={classes.name}>
        <h1>
          <span>{title}</span> {simulated && <Simulated />}
        </h1>
        {sub && <p>{sub}</p>}
      </div>
      {facts.length > 0 && <Facts facts={facts} />}
      {actions && <div className={classes.acts}>{actions}</div>}
    </section>
  );
}

export function Facts({ facts }: { facts: readonly Fact[] }) {
  return (
    <dl className={classes.facts}>
      {facts.map(({ label, value, note }) => (
        <div key={label}>
          <dt>{label}</dt>
          <dd>
            {value}
            {note && <small>{note}</small>}
          </dd>
        </div>
      ))}
    </dl>
  );
}
