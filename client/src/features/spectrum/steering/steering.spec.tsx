import {
  completeSettings,
  DEFAULT_SETTINGS,
  encodeSamples,
  type AnalysisRecipe,
  type AnalysisRun,
  type AnalysisSettings,
  type MemberRole,
  type UnplacedDecision,
} from '@foreveil/shared';
import { MantineProvider } from '@mantine/core';
import { Notifications, notifications } from '@mantine/notifications';
import { QueryClientProvider } from '@tanstack/react-query';
import { configure, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { quietClient } from '../../../test/show.js';
import { anAnalysis, anIdentification, answer, aProblem, aSpectrumDetail } from '../../../test/things.js';
import SpectrumPage from '../SpectrumPage.js';
import { aFeature, anAnalysisDetail, aResult, FEATURES, someSamples } from '../test/a-result.js';
import { parseSpecies } from './SpeciesSection.js';

configure({ asyncUtilTimeout: 8000 });
vi.setConfig({ testTimeout: 40_000 });

const OLD: Partial<AnalysisSettings> = { maskedRegions: [{ fromNm: 590.2, toNm: 590.4 }] };
const runOf = (id: string, settings: Partial<AnalysisSettings> = {}, requestedAt = '2031-03-14T10:00:00.000Z'): AnalysisRun => ({
  ...anAnalysis({ id, requestedAt }),
  settings: completeSettings(settings),
});

interface World {
  role: MemberRole;
  runs: AnalysisRun[];
  recipes: AnalysisRecipe[];
  unplaced: UnplacedDecision[];
  sent: { method: string; path: string; body: unknown }[];
}

const bytes = () => {
  const { wavelength, flux, sigma, bad } = someSamples();
  return encodeSamples({ wavelength, flux: Float64Array.from(flux), sigma: Float64Array.from(sigma!), bad });
};

function serve(parts: Partial<World> = {}): World {
  const runs = [runOf('analysis-1', OLD), runOf('analysis-0', {}, '2031-03-13T10:00:00.000Z')];
  const world: World = { role: 'reviewer', runs, recipes: [], unplaced: [], sent: [], ...parts };
  const recipe: AnalysisRecipe = {
    ...{ id: 'r1', name: 'Red arm', settings: {}, version: 1, createdBy: 'Ana', changedBy: 'Ana', changedAt: '2031-01-01T00:00:00.000Z' },
  };
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    const end = path.replace('/api/programmes/programme-1', '');
    const reply = (value: unknown, status = 200) => Promise.resolve(answer(status, value));
    const method = init.method ?? 'GET';
    if (method !== 'GET') {
      const body = init.body ? (JSON.parse(init.body as string) as never) : undefined;
      world.sent.push({ method, path: end, body });
      if (end === '/analysis-recipes') {
        world.recipes = [{ ...recipe, ...(body as object | undefined) }];
        return reply(world.recipes[0], 201);
      }
      if (end.startsWith('/identifications/')) {
        world.unplaced = [];
        return reply(anIdentification());
      }
      return reply(runOf('analysis-2'), 201);
    }
    if (path === '/api/auth/me') return reply({ id: 'u', email: 'a@example.org', name: 'Ana Weir' });
    if (end === '') return reply({ id: 'programme-1', name: 'Gas', role: world.role, members: [] });
    if (end === '/spectra/spectrum-1') return reply(aSpectrumDetail({ analysis: world.runs[0] ?? null }));
    if (end === '/spectra/spectrum-1/samples') return Promise.resolve(new Response(bytes() as BodyInit));
    if (end === '/spectra/spectrum-1/analyses') return reply(world.runs);
    if (end === '/spectra/spectrum-1/identifications') return reply([]);
    if (end === '/spectra/spectrum-1/unplaced-decisions') return reply(world.unplaced);
    if (end === '/analysis-recipes') return reply(world.recipes);
    if (end === '/analyses/analysis-1') return reply(anAnalysisDetail({ settings: completeSettings(OLD) }));
    if (end === '/analyses/analysis-0') {
      const features = [...FEATURES.slice(1), aFeature({ index: 9, wavelengthNm: 590.6 })];
      return reply(anAnalysisDetail({ id: 'analysis-0', result: aResult({ features }) }));
    }
    return reply(aProblem({ status: 404, code: 'not_found' }), 404);
  });
  return world;
}

async function open(parts: Partial<World> = {}) {
  const world = serve(parts);
  const router = createMemoryRouter([{ path: '/programmes/:programmeId/spectra/:spectrumId', element: <SpectrumPage /> }], {
    initialEntries: ['/programmes/programme-1/spectra/spectrum-1'],
  });
  render(
    <MantineProvider env="test">
      <QueryClientProvider client={quietClient()}>
        <Notifications />
        <RouterProvider router={router} />
      </QueryClientProvider>
    </MantineProvider>,
  );
  await screen.findByRole('grid', { name: 'Lines' });
  return world;
}

async function steer(parts: Partial<World> = {}) {
  const world = await open(parts);
  await userEvent.click(screen.getByRole('button', { name: 'Steer' }));
  const panel = within(await screen.findByRole('dialog', { name: 'Steer the analysis' }));
  return { world, panel };
}
const press = (name: string | RegExp) => userEvent.click(screen.getByRole('button', { name }));
const runBody = ({ sent }: World) => sent.find(({ path }) => path === '/spectra/spectrum-1/analyses')?.body;

beforeEach(() => {
  localStorage.clear();
  vi.spyOn(Element.prototype, 'clientHeight', 'get').mockReturnValue(400);
  vi.spyOn(Element.prototype, 'clientWidth', 'get').mockReturnValue(700);
});
afterEach(() => {
  notifications.clean();
  vi.unstubAllGlobals();
  vi.restoreAllMocks();
});

describe('steering', () => {
  it('says what differs from the defaults, what is new, and takes it back', async () => {
    const { panel } = await steer();
    const settings = within(panel.getByRole('region', { name: 'Settings for the next run' }));
    expect(settings.getByText(/590.200 nm to 590.400 nm is masked/)).toBeInTheDocument();
    await userEvent.click(panel.getByRole('button', { name: 'Keep cloud at −3.98 km/s' }));
    expect(settings.getByText(/interstellar gas is set at −3.98 ± 0.5 km\/s/)).toHaveTextContent(/new$/);
    expect(panel.getByText(/Will change: 1 new setting/)).toBeInTheDocument();
    await userEvent.click(settings.getByRole('button', { name: /^Take back: 590.200/ }));
    expect(settings.getByText(/590.200/).tagName).toBe('S');
    await userEvent.click(panel.getByRole('button', { name: 'Undo' }));
    await userEvent.click(panel.getByRole('button', { name: 'Undo' }));
    expect(panel.getByText('The next run would be like the one on the page.')).toBeInTheDocument();
    expect(panel.getByRole('button', { name: 'Undo' })).toBeDisabled();
  });

  it('runs with exactly what differs from the defaults', async () => {
    const { world, panel } = await steer();
    await userEvent.click(panel.getByRole('button', { name: 'Forbid star at +8.94 km/s' }));
    await userEvent.type(panel.getByLabelText('Temperature'), '12 500{Enter}');
    await userEvent.type(panel.getByLabelText('or E(B−V)'), '0,31{Enter}');
    await userEvent.type(panel.getByLabelText('Without, parted by commas'), 'fe i; Ti II{Enter}');
    await press('Run with these settings');
    await waitFor(() => expect(runBody(world)).toBeDefined());
    expect(runBody(world)).toEqual({
      settings: {
        ...OLD,
        forbiddenSystems: [{ family: 'stellar', fromKmPerS: 4.94, toKmPerS: 12.94 }],
        temperatureK: 12_500,
        extinctionAv: 0.961,
        withoutSpecies: ['Fe I', 'Ti II'],
      },
    });
  });

  it('masks a region typed as numbers, and splits or takes out the chosen line', async () => {
    const { world } = await steer();
    const curve = screen.getByRole('application');
    curve.focus();
    await userEvent.keyboard('{ArrowRight}s{ArrowRight}e');
    const bar = within(screen.getByRole('region', { name: 'Marked region' }));
    for (const [label, value] of [
      ['from', '588.1'],
      ['to', '588.6'],
    ] as const) {
      await userEvent.clear(bar.getByLabelText(label));
      await userEvent.type(bar.getByLabelText(label), `${value}{Enter}`);
    }
    expect(bar.getByText('0.5000 nm')).toBeInTheDocument();
    await userEvent.click(bar.getByRole('button', { name: 'Mask this' }));
    await userEvent.type(bar.getByLabelText('Move the continuum by'), '−3{Enter}');
    await userEvent.click(bar.getByRole('button', { name: 'Move' }));
    await userEvent.click(bar.getByRole('button', { name: 'Split in two' }));
    expect(bar.getByRole('button', { name: 'Take out' })).toBeDisabled(); // it is to be split already
    await press('Run with these settings');
    await waitFor(() => expect(runBody(world)).toBeDefined());
    const { settings } = runBody(world) as { settings: AnalysisSettings };
    const ends = { fromNm: 588.1, toNm: 588.6 };
    expect(settings.maskedRegions).toEqual([...OLD.maskedRegions!, ends]);
    expect(settings.continuumMoves).toEqual([{ ...ends, factor: 0.97 }]);
    expect(settings.splitFeatures).toHaveLength(1);
  });

  it('refuses what contradicts itself before it is sent, and says why', async () => {
    const { panel } = await steer();
    await userEvent.type(panel.getByLabelText('Only these, parted by commas'), 'Na I{Enter}');
    await userEvent.type(panel.getByLabelText('Without, parted by commas'), 'Na I{Enter}');
    expect(panel.getByRole('alert')).toHaveTextContent('is also among the species that alone are considered');
    expect(panel.getByRole('button', { name: 'Run with these settings' })).toBeDisabled();
    await userEvent.type(panel.getByLabelText('R_V'), 'much{Enter}');
    expect(panel.getByText('Write a number, as in 12.5')).toBeInTheDocument();
  });

  it('keeps settings as a recipe and applies one', async () => {
    const { world, panel } = await steer();
    await userEvent.type(panel.getByLabelText('Name of a new recipe'), 'Red arm{Enter}');
    await waitFor(() => expect(world.sent).toMatchObject([{ path: '/analysis-recipes', body: { name: 'Red arm', settings: OLD } }]));
    await userEvent.click(panel.getByRole('button', { name: 'Defaults' }));
    expect(panel.getByText(/Nothing: the next run decides everything/)).toBeInTheDocument();
    await userEvent.selectOptions(await panel.findByLabelText('Recipe'), 'Red arm');
    await userEvent.click(panel.getByRole('button', { name: 'Apply' }));
    expect(panel.getByText(/590.200 nm to 590.400 nm is masked/)).toBeInTheDocument();
  });

  it('lets a reader look but not run', async () => {
    const { world, panel } = await steer({ role: 'reader' });
    await userEvent.click(panel.getByRole('button', { name: 'Run with these settings' }));
    expect(panel.getAllByText(/This needs the role analyst/).length).toBeGreaterThan(0);
    expect(world.sent).toEqual([]);
  });
});

describe('the runs of a spectrum', () => {
  it('say what each set, how two differ, and open an older one to be read only', async () => {
    const { world, panel } = await steer();
    await userEvent.click(panel.getByRole('tab', { name: 'Runs' }));
    const list = within(panel.getByRole('region', { name: 'Runs of this spectrum' }));
    expect(list.getByText(/590.200 nm to 590.400 nm is masked/)).toBeInTheDocument();
    expect(list.getByText('Default settings.')).toBeInTheDocument();
    await userEvent.click(list.getByRole('button', { name: 'What changed' }));
    const changes = await list.findByRole('region', { name: /What changed/ });
    expect(changes).toHaveTextContent('1 gained, 1 lost, 0 read otherwise, 4 as they were.');
    await userEvent.click(list.getByRole('button', { name: 'Open' }));
    expect(await screen.findByText(/An older run, of/)).toBeInTheDocument();
    const run = panel.getByRole('button', { name: 'Run with these settings' });
    expect(run).toHaveAccessibleDescription('This is an older run: go back to the newest run first.');
    await userEvent.click(run);
    expect(world.sent).toEqual([]);
    await press('Back to the newest run');
    await waitFor(() => expect(screen.queryByText(/An older run, of/)).toBeNull());
  });
});

describe('decisions without a feature', () => {
  const one: UnplacedDecision = { identification: anIdentification({ featureIndex: null, wavelengthNm: 588.3 }), kept: null };

  it('are listed, and kept or put on the chosen line', async () => {
    const world = await open({ unplaced: [one] });
    expect(await screen.findByText('1 decision has no feature in this run')).toBeInTheDocument();
    await press('Put on the chosen line');
    await waitFor(() => expect(world.sent).toHaveLength(1));
    expect(world.sent[0]).toMatchObject({ path: `/identifications/${one.identification.id}/place`, body: { analysisId: 'analysis-1' } });
    await waitFor(() => expect(screen.queryByText(/has no feature in this run/)).toBeNull());
  });

  it('that were kept say by whom', async () => {
    await open({ unplaced: [{ ...one, kept: { by: 'Tom Rill', at: '2031-03-14T10:00:00.000Z' } }] });
    expect(await screen.findByText('1 kept without a feature in this run')).toBeInTheDocument();
    expect(screen.getByText(/kept by Tom Rill/)).toBeInTheDocument();
    expect(screen.queryByRole('button', { name: 'Keep' })).toBeNull();
  });
});

it('reads species as people write them', () => {
  expect(parseSpecies(' ca ii, CH+ ;  Na   I,, ca II')).toEqual(['Ca II', 'CH+', 'Na I']);
  expect(parseSpecies('')).toEqual([]);
  expect(DEFAULT_SETTINGS.onlySpecies).toEqual(parseSpecies(' , '));
});
