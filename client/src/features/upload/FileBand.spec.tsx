import { signatureOf, type Medium, type ReadingRecipe } from '@foreveil/shared';
import { screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { ApiError } from '../../lib/api-error.js';
import { show } from '../../test/show.js';
import { aFace, aReading, aSpectrumDetail, aTargetSummary } from '../../test/things.js';
import type { FileRead } from '../../workers/protocol.js';
import { freshEntry, NO_CORRECTIONS } from './entries.js';
import type { Entry } from './entry.js';
import { FileBand } from './FileBand.js';

const acts = {
  ...{ onCorrectSimilar: vi.fn(), onRecipe: vi.fn() },
  ...{ onCorrect: vi.fn(), onRetarget: vi.fn(), onRelabel: vi.fn(), onSend: vi.fn(), onCancel: vi.fn(), onLeaveOut: vi.fn() },
};
beforeEach(() => Object.values(acts).forEach((act) => act.mockReset()));

const good: FileRead = { ok: true, reading: aReading(), face: aFace(), hint: null };
const noMedium: FileRead = {
  ...good,
  reading: aReading({ medium: { value: 'vacuum', how: 'not_stated', where: '' } }),
  hint: { name: 'Hα', restNm: 656.461, velocityKmPerS: 38.5 },
};

function band(parts: Partial<Entry> = {}, { recipes = [], similar = 0 }: { recipes?: ReadingRecipe[]; similar?: number } = {}) {
  const entry: Entry = {
    ...freshEntry(new File(['x'.repeat(1_100_000)], 'heron4a.fits'), 1),
    ...{ target: { name: 'Heron 4 A', kind: 'star', why: 'object' }, read: good },
    ...parts,
  };
  show(<FileBand programmeId="p" targets={[aTargetSummary()]} recipes={recipes} similar={similar} entry={entry} {...acts} />);
  return screen.getByRole('region', { name: 'heron4a.fits' });
}

describe('the band of a file', () => {
  it('says what was read and where the file says it', () => {
    const region = band();
    expect(region).toHaveTextContent(/1\.1 MB, 61\s262 samples/);
    expect(region).toHaveTextContent('stated, SPECSYS');
    expect(screen.getByRole('combobox', { name: 'Medium' })).toHaveValue('vacuum');
    expect(screen.getByRole('heading', { name: 'Ready' })).toBeInTheDocument();
  });

  it('asks air or vacuum when nothing in the file says, with what either answer means', async () => {
    band({ read: noMedium });
    expect(screen.getByRole('heading', { name: 'Air or vacuum?' })).toBeInTheDocument();
    // (n - 1) c at 656.461 nm is 82.7 km/s (n by Morton 2000)
    expect(screen.getByText(/moves every velocity by 83 km\/s/)).toBeInTheDocument();
    expect(screen.getByLabelText('vacuum: Hα at +39 km/s')).toBeInTheDocument();
    expect(screen.queryByRole('button', { name: 'Add this one' })).toBeNull();
    await userEvent.click(screen.getByLabelText('air: Hα at +121 km/s'));
    expect(acts.onCorrect).toHaveBeenCalledWith({ medium: 'air' });
  });

  it('re-reads with each correction, and takes them back', async () => {
    band({ corrections: { medium: 'air' } });
    await userEvent.selectOptions(screen.getByRole('combobox', { name: 'Wavelength' }), 'nm');
    expect(acts.onCorrect).toHaveBeenLastCalledWith({ medium: 'air', axisUnit: 'nm' });
    await userEvent.selectOptions(screen.getByRole('combobox', { name: 'Error' }), 'none in the file');
    expect(acts.onCorrect).toHaveBeenLastCalledWith({ medium: 'air', uncertaintyColumn: null });
    await userEvent.click(screen.getByRole('button', { name: 'Take back 1 correction' }));
    expect(acts.onCorrect).toHaveBeenLastCalledWith({});
  });

  it('takes a resolving power when it is one', async () => {
    band();
    const field = screen.getByRole('textbox', { name: 'Resolving power' });
    await userEvent.clear(field);
    await userEvent.type(field, 'forty{Enter}');
    expect(acts.onCorrect).not.toHaveBeenCalled();
    expect(field).toHaveAccessibleDescription(/A number from 1/);
    await userEvent.clear(field);
    await userEvent.type(field, '48 000{Enter}');
    expect(acts.onCorrect).toHaveBeenCalledWith({ resolvingPower: 48_000 });
  });

  it('shows the lines at fault of a file that cannot be read, and offers to take corrections back', async () => {
    const read: FileRead = {
      ok: false,
      problem: { code: 'not_a_number', sentence: 'At line 4118 the flux is not a number.', row: 4118 },
      lines: [{ number: 4118, text: '393.4681 abc', atFault: true }],
    };
    band({ read, corrections: { fluxColumn: 'name' } });
    expect(screen.getByRole('alert')).toHaveTextContent('At line 4118 the flux is not a number.');
    expect(screen.getByLabelText('The lines at fault')).toHaveTextContent('4118393.4681 abc ← here');
    await userEvent.click(screen.getByRole('button', { name: 'Take back the corrections' }));
    expect(acts.onCorrect).toHaveBeenCalledWith(NO_CORRECTIONS);
  });

  it('shows how far the upload is, and cancels it', async () => {
    band({ sending: { at: 'sending', sent: 0.4 } });
    expect(screen.getByRole('heading', { name: 'Sending, 40 %' })).toBeInTheDocument();
    expect(screen.getByRole('progressbar', { name: 'Upload of heron4a.fits' })).toHaveAttribute('aria-valuenow', '40');
    expect(screen.getByRole('combobox', { name: 'Medium' })).toBeDisabled();
    await userEvent.click(screen.getByRole('button', { name: 'Cancel' }));
    expect(acts.onCancel).toHaveBeenCalled();
  });

  it('links to the spectrum once it is added, and announces it', () => {
    band({ sending: { at: 'added', spectrum: aSpectrumDetail({ id: 'new-1' }) } });
    expect(within(screen.getByRole('status')).getByRole('link')).toHaveAttribute('href', '/programmes/p/spectra/new-1');
  });

  it('links to the spectrum that has these bytes already', () => {
    band({ sending: { at: 'duplicate', existing: aSpectrumDetail({ id: 'old-1', label: 'échelle' }) } });
    expect(screen.getByRole('link', { name: 'échelle' })).toHaveAttribute('href', '/programmes/p/spectra/old-1');
    expect(screen.getByRole('status')).toHaveTextContent('of Heron 4 A. Nothing was added.');
  });

  it('says a refusal in words and tries again', async () => {
    band({ sending: { at: 'refused', error: new ApiError('no_connection', 0) } });
    expect(screen.getByRole('alert')).toHaveTextContent('The server cannot be reached.');
    await userEvent.click(screen.getByRole('button', { name: 'Try again' }));
    expect(acts.onSend).toHaveBeenCalled();
  });

  it('offers the corrections that answer a refusal, in its place', async () => {
    const read: FileRead = {
      ok: false,
      problem: { code: 'unknown_axis_unit', sentence: 'Say which unit it is.', answers: ['axisUnit'] },
      lines: [],
    };
    band({ read });
    await userEvent.selectOptions(screen.getByRole('combobox', { name: 'Unit of the axis' }), 'Å');
    expect(acts.onCorrect).toHaveBeenCalledWith({ axisUnit: 'angstrom' });
  });

  it('puts its corrections on similar files, and keeps them as a recipe', async () => {
    const corrected = { corrections: { medium: 'air' }, signature: signatureOf(aReading()) } as const;
    band(corrected, { similar: 2 });
    await userEvent.click(screen.getByRole('button', { name: 'Apply to all 2 similar files' }));
    expect(acts.onCorrectSimilar).toHaveBeenCalled();
    await userEvent.click(screen.getByRole('button', { name: 'Save as recipe' }));
    const dialog = await screen.findByRole('dialog', { name: 'Save as a reading recipe' });
    expect(dialog).toHaveTextContent('For FITS tables with the columns WAVE, FLUX, ERR: air.');
    expect(within(dialog).getByRole('button', { name: 'Save it' })).toBeDisabled();
  });

  it('keeps to itself what belongs to one exposure', () => {
    const time = { iso: '2031-03-04', scale: 'utc', marks: 'start' } as const;
    band({ corrections: { time }, signature: signatureOf(aReading()) }, { similar: 2 });
    expect(screen.queryByRole('button', { name: /similar/ })).toBeNull();
    expect(screen.queryByRole('button', { name: 'Save as recipe' })).toBeNull();
  });

  it('says which recipe was applied, takes it back, and offers the others', async () => {
    const signature = signatureOf(aReading());
    const recipe = (name: string, medium: Medium = 'air'): ReadingRecipe => ({
      ...{ id: name, name, signature, corrections: { medium }, createdBy: 'Ana Weir', createdAt: '2031-03-04T00:00:00Z' },
      ...{ changedBy: 'Ana Weir', changedAt: '2031-03-04T00:00:00Z', version: 1 },
    });
    const applied = { corrections: { medium: 'air' }, recipe: { name: 'Plates', before: NO_CORRECTIONS }, signature } as const;
    band(applied, { recipes: [recipe('Plates'), recipe('Films', 'vacuum'), recipe('The same by another name')] });
    expect(screen.getByText(/Recipe/)).toHaveTextContent('Recipe Plates applied: air.');
    await userEvent.click(screen.getByRole('button', { name: 'Undo' }));
    expect(acts.onCorrect).toHaveBeenCalledWith(NO_CORRECTIONS);
    await userEvent.click(screen.getByRole('button', { name: 'Films instead' }));
    expect(acts.onRecipe).toHaveBeenCalledWith(recipe('Films', 'vacuum'));
    expect(screen.queryByRole('button', { name: /another name/ })).toBeNull(); // it would change nothing
  });

  it('offers the target that lies where the file points, with how far away it lies, and says nothing silently', async () => {
    const near = aTargetSummary({ raDeg: 318.53, decDeg: 48.2142 });
    const pointing = { value: { raDeg: near.raDeg!, decDeg: near.decDeg! + 3 / 3600 }, how: 'stated', where: 'RA, DEC' } as const;
    band({ read: { ...good, reading: aReading({ pointing }) }, target: { name: 'HV 12', kind: 'star', why: 'object' } });
    // aTargetSummary lies at 318.5304583 +48.2143333
    await userEvent.click(screen.getByRole('button', { name: /^Use Heron 4 A, \d\.\d″ away$/ }));
    expect(acts.onRetarget).toHaveBeenCalledWith({ name: 'Heron 4 A', kind: 'star', why: 'position' });
  });

  it('is not sent when the programme has it, or when it stands on the page twice', () => {
    const known = { sha256: 'ab', spectrumId: 's-9', label: 'night 1', targetId: 't', targetName: 'Tern' };
    band({ known });
    expect(screen.getByRole('link', { name: 'night 1' })).toHaveAttribute('href', '/programmes/p/spectra/s-9');
    expect(screen.queryByRole('button', { name: 'Add this one' })).toBeNull();
  });

  it('shows what the file said beside a correction', () => {
    const said = { value: 'vacuum', how: 'stated', where: 'TUNIT1' } as const;
    const medium = { value: 'air', how: 'corrected', where: 'correction', said } as const;
    expect(band({ read: { ...good, reading: aReading({ medium }) } })).toHaveTextContent('said by you; the file: vacuum');
  });

  it('takes a site when all three numbers are there', async () => {
    band();
    await userEvent.click(screen.getByText(/^Exposure, site and pointing/));
    await userEvent.type(screen.getByRole('textbox', { name: 'Latitude, degrees north' }), '-24.6{Enter}');
    await userEvent.type(screen.getByRole('textbox', { name: 'Longitude, degrees east' }), '-70.4{Enter}');
    expect(acts.onCorrect).not.toHaveBeenCalled();
    await userEvent.type(screen.getByRole('textbox', { name: 'Height, m' }), '2635{Enter}');
    expect(acts.onCorrect).toHaveBeenCalledWith({ site: { latitudeDeg: -24.6, longitudeDegEast: -70.4, heightM: 2635 } });
  });

  it('takes a time as people write it', async () => {
    band();
    const field = screen.getByRole('textbox', { name: 'Observed' });
    await userEvent.type(field, 'last night{Enter}');
    expect(acts.onCorrect).not.toHaveBeenCalled();
    await userEvent.clear(field);
    await userEvent.type(field, '2031-03-04 05:06{Enter}');
    expect(acts.onCorrect).toHaveBeenCalledWith({ time: { iso: '2031-03-04T05:06', scale: 'utc', marks: 'start' } });
  });

  it('finds a card of the header', async () => {
    band({ read: { ...good, reading: aReading({ header: ['SIMPLE  =   T', "OBJECT  = 'Heron'", "OBSERVER= 'Weir'"] }) } });
    await userEvent.click(screen.getByText('Header, 3 lines'));
    await userEvent.type(screen.getByRole('textbox', { name: 'Search the header' }), 'obs');
    expect(screen.getByText('1 of 3 lines')).toBeInTheDocument();
    expect(screen.getByLabelText('Header of the file')).toHaveTextContent("3OBSERVER= 'Weir'");
  });
});
