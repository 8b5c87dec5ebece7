import { screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { show } from '../../test/show.js';
import { aProblem, answer, aTarget } from '../../test/things.js';
import { EditTarget } from './EditTarget.js';

const fetched = vi.fn<typeof fetch>();
const close = vi.fn();
const SEEN = aTarget({ version: 3, notes: 'first look' });

const sent = (call: number) => {
  const { headers, body } = fetched.mock.calls[call]![1]!;
  return { ifMatch: (headers as Record<string, string>)['If-Match'], body: JSON.parse(body as string) as unknown };
};
const stale = (theirs: ReturnType<typeof aTarget>) => answer(412, aProblem({ code: 'stale_version', status: 412, current: theirs }));

describe('changing the facts of a target', () => {
  beforeEach(() => {
    vi.stubGlobal('fetch', fetched.mockReset());
    close.mockReset();
    show(<EditTarget programmeId="p" target={SEEN} opened onClose={close} />);
  });
  const write = async (label: string, text: string) => {
    await userEvent.clear(screen.getByLabelText(label));
    await userEvent.type(screen.getByLabelText(label), text);
  };
  const save = () => userEvent.click(screen.getByRole('button', { name: 'Save' }));

  it('sends only what was changed, with the version that was seen', async () => {
    fetched.mockResolvedValue(answer(200, aTarget({ version: 4 })));
    await write('Notes', 'second look');
    await save();
    await vi.waitFor(() => expect(close).toHaveBeenCalled());
    expect(sent(0)).toEqual({ ifMatch: '"3"', body: { notes: 'second look' } });
  });

  it('refuses a position that is none, beside its field, before anything is sent', async () => {
    await write('Right ascension, ICRS', '99 99');
    await save();
    expect(screen.getByLabelText('Right ascension, ICRS')).toHaveAccessibleDescription(/Write hours as 21 14 07.31/);
    expect(fetched).not.toHaveBeenCalled();
  });

  it('merges by itself when a teammate changed another field', async () => {
    fetched.mockResolvedValueOnce(stale(aTarget({ version: 5, kind: 'sightline', notes: 'first look' })));
    fetched.mockResolvedValueOnce(answer(200, aTarget({ version: 6 })));
    await write('Notes', 'mine');
    await save();
    await vi.waitFor(() => expect(close).toHaveBeenCalled());
    expect(sent(1)).toEqual({ ifMatch: '"5"', body: { notes: 'mine' } });
  });

  it('shows before, theirs and mine when the same field was changed, and saves the choice', async () => {
    fetched.mockResolvedValueOnce(stale(aTarget({ version: 5, notes: 'theirs' })));
    fetched.mockResolvedValueOnce(answer(200, aTarget({ version: 6 })));
    await write('Notes', 'mine');
    await save();
    expect(await screen.findByRole('alert')).toHaveTextContent('A teammate changed the same field');
    expect(screen.getByText('Before: first look')).toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Save' })).toBeDisabled();
    await userEvent.click(screen.getByLabelText('Yours: mine'));
    await save();
    await vi.waitFor(() => expect(close).toHaveBeenCalled());
    expect(sent(1)).toEqual({ ifMatch: '"5"', body: { notes: 'mine' } });
  });

  it('says at the name when it is taken', async () => {
    fetched.mockResolvedValue(
      answer(409, aProblem({ code: 'name_taken', status: 409, detail: 'The programme has a target of this name.' })),
    );
    await write('Name', 'Heron 7');
    await save();
    await vi.waitFor(() => expect(screen.getByLabelText('Name')).toHaveAccessibleDescription('The programme has a target of this name.'));
    expect(close).not.toHaveBeenCalled();
  });
});
