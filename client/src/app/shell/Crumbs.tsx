import { ActionIcon, Menu } from '@mantine/core';
import { IconChevronDown } from '@tabler/icons-react';
import { Link, useParams } from 'react-router-dom';
import classes from './shell.module.css';
import { useTrail, type Crumb } from './useTrail.js';

/** Where one is, and for each step the way to its neighbours. */
export function Crumbs() {
  const trail = useTrail(useParams());
  if (!trail.length) return <div className={classes.crumbs} />;
  return (
    <nav aria-label="Where you are" className={classes.crumbs}>
      <ol>
        {trail.map((crumb, i) => (
          <li key={crumb.to} data-last={i === trail.length - 1 || undefined}>
            <CrumbStep crumb={crumb} parents={trail.slice(0, i)} current={i === trail.length - 1} />
          </li>
        ))}
      </ol>
    </nav>
  );
}

interface StepProps {
  crumb: Crumb;
  /** steps before it, which a narrow bar does not show */
  parents: readonly Crumb[];
  current: boolean;
}

function CrumbStep({ crumb: { label, to, what, others }, parents, current }: StepProps) {
  return (
    <>
      <Link to={to} className={classes.crumb} aria-current={current ? 'page' : undefined}>
        {label}
      </Link>
      {others.length + parents.length > 0 && (
        <Menu>
          <Menu.Target>
            <ActionIcon
              size={24}
              aria-label={what ? `Other ${what}` : 'Up from here'}
              className={classes.others}
              data-alone={!others.length || undefined}
            >
              <IconChevronDown size={14} aria-hidden />
            </ActionIcon>
          </Menu.Target>
          <Menu.Dropdown className={classes.neighbours}>
            {parents.map((parent) => (
              <Menu.Item key={parent.to} component={Link} to={parent.to} className={classes.up}>
                Up to {parent.label}
              </Menu.Item>
            ))}
            {others.length > 0 && <Menu.Label>Other {what}</Menu.Label>}
            {others.map((other) => (
              <Menu.Item key={other.to} component={Link} to={other.to}>
                {other.label}
              </Menu.Item>
            ))}
          </Menu.Dropdown>
        </Menu>
      )}
    </>
  );
}
