import { screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MEMBER_ROLES, roleAllows } from '@foreveil/shared';
import { describe, expect, it, vi } from 'vitest';
import { show } from '../test/show.js';
import { RoleButton } from './RoleButton.js';

describe('a button that needs a role', () => {
  it.each(MEMBER_ROLES)('as %s does what the role allows, and nothing else', async (have) => {
    const act = vi.fn();
    show(
      <RoleButton have={have} need="reviewer" onClick={act}>
        Accept
      </RoleButton>,
    );
    await userEvent.click(screen.getByRole('button', { name: 'Accept' }));
    expect(act).toHaveBeenCalledTimes(roleAllows(have, 'reviewer') ? 1 : 0);
  });

  it('that is closed stays reachable by keyboard and says why', async () => {
    const act = vi.fn();
    show(
      <RoleButton have="reader" need="analyst" onClick={act}>
        Add spectra
      </RoleButton>,
    );
    const button = screen.getByRole('button', { name: 'Add spectra' });
    await userEvent.tab();
    expect(button).toHaveFocus();
    expect(button).toHaveAttribute('aria-disabled', 'true');
    expect(button).toHaveAccessibleDescription(/needs the role analyst; yours is reader/);
    await userEvent.keyboard('{Enter}');
    expect(act).not.toHaveBeenCalled();
  });

  it('that leads to a page is a link for those who may, a closed button for others', () => {
    show(
      <>
        <RoleButton have="analyst" need="analyst" to="/add">
          Add spectra
        </RoleButton>
        <RoleButton have="reader" need="analyst" to="/add">
          Add more
        </RoleButton>
      </>,
    );
    expect(screen.getByRole('link', { name: 'Add spectra' })).toHaveAttribute('href', '/add');
    expect(screen.queryByRole('link', { name: 'Add more' })).toBeNull();
  });
});
