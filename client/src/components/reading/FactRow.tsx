import { useId, type ReactNode } from 'react';
import classes from './reading.module.css';

interface FactProps {
  label: string;
  how?: { words: string; loud: boolean };
  children: (labelId: string) => ReactNode;
}

/** One row: the fact, its value or control, how it is known. */
export function FactRow({ label, how, children }: FactProps) {
  const id = useId();
  return (
    <div>
      <dt id={id}>{label}</dt>
      <dd>{children(id)}</dd>
      <dd className={classes.how} data-loud={how?.loud || undefined}>
        {how?.words}
      </dd>
    </div>
  );
}
