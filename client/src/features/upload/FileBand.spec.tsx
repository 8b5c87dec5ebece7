import { screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { ApiError } from '../../lib/api-error.js';
import { show } from '../../test/show.js';
import { aFace, aReading, aSpectrumDetail, aTargetSummary } from '../../test/things.js';
import type { FileRead } from '../../workers/protocol.js';
import { NO_CORRECTIONS } from './entries.js';
import type { Entry } from './entry.js';
import { FileBand } from './FileBand.js';

const acts = { onCorrect: vi.fn(), onRetarget: vi.fn(), onRelabel: vi.fn(), onSend: vi.fn(), onCancel: vi.fn(), onLeaveOut: vi.fn() };
beforeEach(() => Object.values(acts).forEach((act) => act.mockReset()));

const good: FileRead = { ok: true, reading: aReading(), face: aFace(), hint: null };
const noMedium: FileRead = {
  ...good,
  reading: aReading({ medium: { value: 'vacuum', how: 'not_stated', where: '' } }),
  hint: { name: 'Hα', restNm: 656.461, velocityKmPerS: 38.5 },
};

function band(parts: Partial<Entry> = {}) {
  const entry: Entry = {
    ...{ id: 1, file: new File(['x'.repeat(1_100_000)], 'heron4a.fits'), label: 'heron4a', corrections: NO_CORRECTIONS },
    ...{ target: { name: 'Heron 4 A', kind: 'star', why: 'object' }, read: good, rereading: false, sending: { at: 'not_sent' } },
    ...parts,
  };
  show(<FileBand programmeId="p" targets={[aTargetSummary()]} entry={entry} {...acts} />);
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
});
