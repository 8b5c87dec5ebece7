import { Button, Tooltip, type ButtonProps } from '@mantine/core';
import { roleAllows, type MemberRole } from '@foreveil/shared';
import { useId, type ReactNode } from 'react';
import { Link } from 'react-router-dom';
import classes from './components.module.css';

/** Why a control is closed, in words. */
export const roleReason = (have: MemberRole, need: MemberRole) =>
  `This needs the role ${need}; yours is ${have}. A lead of the programme can change it.`;

interface Props extends ButtonProps {
  have: MemberRole;
  need: MemberRole;
  /** why it is closed to every role now */
  closed?: string;
  /** a page to go to, instead of onClick */
  to?: string;
  onClick?: () => void;
  children: ReactNode;
}

/** A button that a role may not use stays in its place, can be reached by keyboard, does nothing, and says why. */
export function RoleButton({ have, need, closed, to, onClick, children, ...look }: Props) {
  const id = useId();
  const reason = roleAllows(have, need) ? closed : roleReason(have, need);
  if (reason === undefined) {
    return to === undefined ? (
      <Button {...look} onClick={onClick}>
        {children}
      </Button>
    ) : (
      <Button {...look} component={Link} to={to}>
        {children}
      </Button>
    );
  }
  return (
    <>
      <Tooltip label={reason}>
        <Button {...look} data-disabled aria-disabled aria-describedby={id} onClick={(event) => event.preventDefault()}>
          {children}
        </Button>
      </Tooltip>
      <span id={id} className={classes.unseen}>
        {reason}
      </span>
    </>
  );
}
