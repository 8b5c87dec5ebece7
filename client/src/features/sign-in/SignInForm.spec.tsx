import { screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { show } from '../../test/show.js';
import { aProblem, answer } from '../../test/things.js';
import { SignInForm } from './SignInForm.js';

const fetched = vi.fn<typeof fetch>();
const signedIn = vi.fn();
const me = { id: 'u1', email: 'ana@example.org', name: 'Ana Weir' };

describe('signing in', () => {
  beforeEach(() => {
    vi.stubGlobal('fetch', fetched.mockReset());
    signedIn.mockReset();
    show(<SignInForm onSignedIn={signedIn} />);
  });
  const fill = async (email: string, password: string) => {
    if (email) await userEvent.type(screen.getByLabelText('E-mail'), email);
    if (password) await userEvent.type(screen.getByLabelText('Password'), password);
    await userEvent.click(screen.getByRole('button', { name: 'Sign in' }));
  };

  it('asks for what is missing in words, at the field, and puts the cursor there', async () => {
    await fill('', 'pass');
    const email = screen.getByLabelText('E-mail');
    expect(email).toHaveAccessibleDescription(/Write your e-mail address/);
    expect(email).toHaveFocus();
    expect(fetched).not.toHaveBeenCalled();
  });

  it('has fields that password managers know', () => {
    expect(screen.getByLabelText('E-mail')).toHaveAttribute('autocomplete', 'username');
    expect(screen.getByLabelText('Password')).toHaveAttribute('autocomplete', 'current-password');
  });

  it('sends what was typed, without blanks around the address, and hands over who came in', async () => {
    fetched.mockResolvedValue(answer(200, me));
    await fill(' ana@example.org ', 'pass word ');
    await vi.waitFor(() => expect(signedIn).toHaveBeenCalled());
    expect(signedIn.mock.calls[0]![0]).toEqual(me);
    expect(JSON.parse(fetched.mock.calls[0]![1]!.body as string)).toEqual({ email: 'ana@example.org', password: 'pass word ' });
  });

  it('says a wrong pair in words and keeps what was typed', async () => {
    fetched.mockResolvedValue(answer(401, aProblem({ code: 'wrong_credentials', status: 401 })));
    await fill('ana@example.org', 'wrong');
    expect(await screen.findByRole('alert')).toHaveTextContent('No account has this e-mail and password together');
    expect(screen.getByLabelText('E-mail')).toHaveValue('ana@example.org');
    expect(signedIn).not.toHaveBeenCalled();
  });
});
