import { DEFAULT_SETTINGS, encodeSamples, type AnalysisSummary, type Identification, type MemberRole } from '@foreveil/shared';
import { MantineProvider } from '@mantine/core';
import { Notifications, notifications } from '@mantine/notifications';
import { QueryClientProvider } from '@tanstack/react-query';
import { configure, fireEvent, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { quietClient } from '../../test/show.js';
import { anAnalysis, anIdentification, answer, aProblem, aSpectrumDetail } from '../../test/things.js';
import SpectrumPage from './SpectrumPage.js';
import { anAnalysisDetail, someSamples } from './test/a-result.js';

// a whole page with its drawing takes its time on a busy machine
configure({ asyncUtilTimeout: 8000 });
vi.setConfig({ testTimeout: 30_000 });

interface World {
  role: MemberRole;
  run: AnalysisSummary | null;
  identifications: Identification[];
  decide: (featureIndex: number, body: { action: string; lineId: string | null }, ifMatch: string) => Response;
  spectrum: () => Response;
}

const bytes = () => {
  const { wavelength, flux, sigma, bad } = someSamples();
  return encodeSamples({ wavelength, flux: Float64Array.from(flux), sigma: Float64Array.from(sigma!), bad });
};

function serve(parts: Partial<World> = {}): World {
  const world: World = {
    role: 'reviewer',
    run: anAnalysis(),
    identifications: [],
    spectrum: () => answer(200, aSpectrumDetail({ analysis: world.run })),
    decide: (featureIndex, { action, lineId }) => {
      const state = { accept: 'accepted', reject: 'rejected' }[action] ?? 'proposed';
      const row = anIdentification({
        id: `i${featureIndex}`,
        featureIndex,
        lineId,
        systemId: 'cloud',
        state: state as 'accepted',
        version: 1,
      });
      world.identifications = [...world.identifications.filter((i) => i.featureIndex !== featureIndex), row];
      return answer(200, row);
    },
    ...parts,
  };
  vi.stubGlobal('fetch', (path: string, init: RequestInit) => {
    const end = path.replace('/api/programmes/programme-1', '');
    if (path === '/api/auth/me') return Promise.resolve(answer(200, { id: 'u', email: 'a@example.org', name: 'Ana Weir' }));
    if (end === '') return Promise.resolve(answer(200, { id: 'programme-1', name: 'Gas', role: world.role, members: [] }));
    if (end === '/spectra/spectrum-1') return Promise.resolve(world.spectrum());
    if (end === '/spectra/spectrum-1/samples') return Promise.resolve(new Response(bytes() as BodyInit));
    if (end === '/spectra/spectrum-1/analyses')
      return Promise.resolve(answer(200, world.run ? [{ ...world.run, settings: DEFAULT_SETTINGS }] : []));
    if (end === '/spectra/spectrum-1/unplaced-decisions') return Promise.resolve(answer(200, []));
    if (end === '/spectra/spectrum-1/identifications') return Promise.resolve(answer(200, world.identifications));
    if (end === '/analyses/analysis-1') return Promise.resolve(answer(200, anAnalysisDetail()));
    const [, feature] = /features\/(\d+)\/decision/.exec(end) ?? [];
    const ifMatch = (init.headers as Record<string, string>)['If-Match'] ?? '';
    return Promise.resolve(
      world.decide(Number(feature), JSON.parse(init.body as string) as { action: string; lineId: string | null }, ifMatch),
    );
  });
  return world;
}

function open(query = '') {
  const router = createMemoryRouter([{ path: '/programmes/:programmeId/spectra/:spectrumId', element: <SpectrumPage /> }], {
    initialEntries: [`/programmes/programme-1/spectra/spectrum-1${query}`],
  });
  return render(
    <MantineProvider env="test">
      <QueryClientProvider client={quietClient()}>
        <Notifications />
        <RouterProvider router={router} />
      </QueryClientProvider>
    </MantineProvider>,
  );
}

const table = () => screen.findByRole('grid', { name: 'Lines' });
const claim = () => screen.getByRole('heading', { level: 2, name: /: [<>0]/ }).textContent;
const stateOf = (row: HTMLElement) => within(row).getByText(/^(proposed|accepted|rejected)$/).textContent;
const selectedRow = () => screen.getByRole('row', { selected: true });

beforeEach(() => {
  localStorage.clear();
  // a table of no height draws no rows
  vi.spyOn(Element.prototype, 'clientHeight', 'get').mockReturnValue(400);
  vi.spyOn(Element.prototype, 'clientWidth', 'get').mockReturnValue(700);
});
afterEach(() => {
  notifications.clean();
  vi.unstubAllGlobals();
  vi.restoreAllMocks();
});

describe('the page of a spectrum', () => {
  it('says what one must know before reading a number, and that the temperature is not constrained', async () => {
    serve();
    open();
    const grid = await table();
    expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent('Heron 4 A simulated');
    const facts = screen.getAllByRole('definition').map((e) => e.textContent.replace(/\u202f/g, ' '));
    expect(facts).toEqual([
      '380.00–680.00nm vac',
      'vacuum, barycentricstated',
      '60 000stated',
      '200median',
      '≥ 14 500 K not constrained',
      '0 of 5',
    ]);
    expect(screen.getByRole('button', { name: 'not constrained' })).toBeInTheDocument();
    expect(screen.getAllByText('Water lines of the air lie among the Na I lines.').length).toBeGreaterThan(0);
    expect(grid).toHaveAttribute('aria-rowcount', '6');
    expect(screen.getByRole('application')).toHaveAccessibleName(/Flux between .* lines?, .* to be decided/);
  });

  it('opens with the line and the filters of its address', async () => {
    serve();
    open('?line=589.748&family=interstellar&from=589.6&to=589.9');
    const grid = await table();
    expect(grid).toHaveAttribute('aria-rowcount', '3');
    expect(claim()).toMatch(/^Na I 589\.7558 nm in the cloud/);
    expect(screen.getByRole('textbox', { name: 'From, nm' })).toHaveValue('589.600');
  });

  it('decides by keys, moves on, says so, and undoes with Ctrl+Z', async () => {
    const world = serve();
    open();
    const grid = await table();
    grid.focus();
    expect(claim()).toMatch(/^Na I 589\.1583/);
    await userEvent.keyboard('a');
    expect(claim()).toMatch(/^H₂O 589\.3293/); // the next one to be decided
    await waitFor(() => expect(world.identifications).toMatchObject([{ featureIndex: 2, state: 'accepted' }]));
    await waitFor(() => expect(screen.getByText(/^Accepted Na I 589\.1583\. Line 4 of 5/)).toBeInTheDocument());
    expect(await screen.findByRole('button', { name: 'Undo' })).toBeInTheDocument();
    grid.focus();
    await userEvent.keyboard('{Control>}z{/Control}');
    await waitFor(() => expect(world.identifications).toMatchObject([{ featureIndex: 2, state: 'proposed' }]));
    await waitFor(() => expect(claim()).toMatch(/^Na I 589\.1583/));
  });

  it('chooses a candidate by its key, shows its argument, and decides on that one', async () => {
    const world = serve();
    open();
    (await table()).focus();
    await userEvent.keyboard('2');
    expect(claim()).toMatch(/^H₂O 589\.1269 nm in the air/);
    expect(within(selectedRow()).getByText('Na I 589.1583')).toBeInTheDocument(); // choosing is not deciding
    await userEvent.keyboard('u');
    expect(claim()).toMatch(/^Not a line of the list/);
    await userEvent.keyboard('1x');
    await waitFor(() => expect(world.identifications).toMatchObject([{ lineId: 'NaI-589.158', state: 'rejected' }]));
  });

  it('sends a remark with the decision and keeps it when the server refuses', async () => {
    const sent: unknown[] = [];
    const world = serve();
    const { decide } = world;
    world.decide = (index, body, ifMatch) => {
      sent.push(body);
      return sent.length === 1 ? answer(503, aProblem({ status: 503, code: 'unavailable' })) : decide(index, body, ifMatch);
    };
    open();
    (await table()).focus();
    await userEvent.keyboard('r');
    const remark = screen.getByRole('textbox', { name: /Remark/ });
    expect(remark).toHaveFocus();
    await userEvent.keyboard('clear doublet{Enter}');
    expect(await table()).toHaveFocus();
    await userEvent.keyboard('a');
    await waitFor(() => expect(screen.getByRole('textbox', { name: /Remark/ })).toHaveValue('clear doublet'));
    expect(claim()).toMatch(/^Na I 589\.1583/);
    expect(stateOf(selectedRow())).toBe('proposed');
    await userEvent.keyboard('a');
    await waitFor(() => expect(sent).toHaveLength(2));
    expect(sent[1]).toMatchObject({ action: 'accept', remark: 'clear doublet' });
  });

  it('shows both versions when a teammate was faster, and lets the person choose', async () => {
    const theirs = anIdentification({
      featureIndex: 2,
      lineId: 'H2O-589.127',
      species: 'H2O',
      restNm: 589.1269,
      family: 'telluric',
      systemId: 'air',
      state: 'rejected',
      version: 3,
      decidedBy: 'Ben Foss',
    });
    const world = serve();
    world.decide = () => {
      world.identifications = [theirs];
      return answer(412, aProblem({ status: 412, code: 'stale_version', current: theirs }));
    };
    open();
    (await table()).focus();
    await userEvent.keyboard('a');
    const dialog = await screen.findByRole('dialog', { name: 'A teammate decided on this line first' });
    expect(within(dialog).getByRole('region', { name: 'Their version' })).toHaveTextContent(/Ben Foss, now.*rejected H₂O 589\.1269/);
    expect(within(dialog).getByRole('region', { name: 'Your version' })).toHaveTextContent(/You, not saved.*accept Na I 589\.1583/);
    expect(within(dialog).getByRole('button', { name: 'Reopen and apply mine' })).toBeEnabled();
    await userEvent.click(within(dialog).getByRole('button', { name: 'Keep theirs' }));
    await waitFor(() => expect(stateOf(selectedRow())).toBe('rejected'));
  });

  it('lets a reader look, not decide', async () => {
    const world = serve({ role: 'reader' });
    open();
    (await table()).focus();
    await userEvent.keyboard('a');
    expect(world.identifications).toEqual([]);
    expect(screen.queryByRole('button', { name: 'Run again' })).toBeNull();
    expect((await screen.findAllByText(/needs the role reviewer; yours is reader/)).length).toBeGreaterThan(0);
  });

  it('filters, says how many are left, and finds the way back', async () => {
    serve();
    open();
    await table();
    await userEvent.type(screen.getByRole('searchbox', { name: 'Find in the lines' }), 'na 589.7');
    expect(screen.getByText('1 shown, 5 in all')).toBeInTheDocument();
    await userEvent.type(screen.getByRole('searchbox', { name: 'Find in the lines' }), 'zzz');
    expect(screen.getByText('No line passes these filters.')).toBeInTheDocument();
    await userEvent.click(screen.getByRole('button', { name: 'Show all lines' }));
    expect(await table()).toHaveAttribute('aria-rowcount', '6');
  });

  it('shows the same page after a hundred changes of unit and medium', async () => {
    serve();
    const { container } = open('?from=588.5&to=589.8');
    await table();
    const select = screen.getByRole('combobox', { name: 'Wavelengths shown in' });
    const put = (value: string) => fireEvent.change(select, { target: { value } });
    const page = () => container.innerHTML;
    const before = page();
    const address = window.location.search;
    const kinds = ['angstrom air', 'wavenumber vacuum', 'micron air', 'nm air', 'angstrom vacuum'];
    for (let i = 0; i < 100; i++) put(kinds[i % kinds.length]!);
    expect(page()).not.toBe(before);
    put('nm vacuum');
    expect(page()).toBe(before);
    expect(window.location.search).toBe(address);
  });

  it('shows how far a first analysis is, and draws what it has', async () => {
    serve({ run: anAnalysis({ phase: 'EXECUTING', progress: 0.46, step: 'measurement', endedAt: null }) });
    open();
    expect(await screen.findByRole('progressbar', { name: 'Analysis' })).toHaveAttribute('aria-valuenow', '46');
    expect(screen.getByRole('button', { name: 'Cancel' })).toBeInTheDocument();
    expect(await screen.findByRole('application')).toBeInTheDocument();
    expect(screen.queryByRole('grid')).toBeNull();
  });

  it('says why an analysis failed and offers to run it again', async () => {
    serve({ run: anAnalysis({ phase: 'ERROR', error: 'The continuum did not converge.' }) });
    open();
    expect(await screen.findByText(/The continuum did not converge/)).toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Run again' })).toBeInTheDocument();
  });

  it('says when there is no such spectrum', async () => {
    serve({ spectrum: () => answer(404, aProblem({ status: 404, code: 'not_found' })) });
    open();
    expect(await screen.findByRole('alert')).toHaveTextContent(/does not exist, or you are not a member/);
  });
});
