import { randomUUID } from 'node:crypto';
import { apiPaths, type NewCloud } from '@foreveil/shared';
import type { Browser, Page } from 'playwright-core';
import { startFleet, type Fleet } from '../support/browser/fleet.js';
import { analysedDemonstration, signIn, type Demonstration } from '../support/browser/people.js';
import { accessibilityFaults, launch, shoot, visit, type Look, type Visit } from '../support/browser/visit.js';
import { csvOfUnstatedMedium, HOT_STAR_BEHIND_A_CLOUD } from '../support/simulated-spectrum.js';

const LOOKS: Look[] = (['light', 'dark'] as const).flatMap((scheme) => [1440, 390].map((width) => ({ scheme, width })));

interface Subject {
  readonly page: string;
  readonly path: (demo: Demonstration, page: Page) => string | Promise<string>;
  /** what stands there once the page is all there */
  readonly heading: RegExp;
  /** brings the page into the state to be looked at */
  readonly prepare?: (page: Page) => Promise<void>;
}

const spectrumOf = ({ programme, targets }: Demonstration, name: string) =>
  `/programmes/${programme.id}/spectra/${targets.find((target) => target.name === name)!.spectra[0]!.id}`;

const SUBJECTS: Subject[] = [
  { page: 'programmes', path: () => '/', heading: /Your programmes/ },
  { page: 'programme', path: ({ programme }) => `/programmes/${programme.id}`, heading: /Dunlin cloud/ },
  { page: 'empty-programme', path: async (_, page) => `/programmes/${await newProgramme(page)}`, heading: /Nothing observed yet/ },
  { page: 'add-spectra', path: ({ programme }) => `/programmes/${programme.id}/add`, heading: /Add spectra/ },
  { page: 'files-read', path: ({ programme }) => `/programmes/${programme.id}/add`, heading: /Add spectra/, prepare: chooseFiles },
  { page: 'target', path: ({ programme, targets }) => `/programmes/${programme.id}/targets/${targets[0]!.id}`, heading: /\w/ },
  { page: 'absorption-spectrum', path: (demo) => spectrumOf(demo, 'Tern 1'), heading: /Tern 1/ },
  { page: 'emission-spectrum', path: (demo) => spectrumOf(demo, 'Curlew Nebula'), heading: /Curlew Nebula/ },
  { page: 'probabilities', path: () => '/probabilities', heading: /How probabilities are tested/ },
  { page: 'find-lines', path: () => '/search', heading: /Find lines/ },
  { page: 'line-lists', path: ({ programme }) => `/programmes/${programme.id}/line-lists`, heading: /Line lists/ },
  { page: 'line-list', path: defaultList, heading: /Foreveil default/ },
  { page: 'file', path: (demo) => `${spectrumOf(demo, 'Tern 1')}/file`, heading: /tern-1/ },
  { page: 'reading-recipes', path: ({ programme }) => `/programmes/${programme.id}/recipes`, heading: /Reading recipes/ },
  { page: 'account', path: () => '/account', heading: /Your account/, prepare: async (page) => page.getByText('Access tokens').waitFor() },
  { page: 'members', path: ({ programme }) => `/programmes/${programme.id}/members`, heading: /Members of/ },
  { page: 'mail', path: () => '/mail', heading: /Mail of this demonstration/ },
  { page: 'join', path: () => '/join#none', heading: /Invitation/, prepare: async (page) => page.getByRole('alert').waitFor() },
  { page: 'forgot-password', path: () => '/forgot-password', heading: /New password/ },
  { page: 'comparisons', path: ({ programme }) => `/programmes/${programme.id}/comparisons`, heading: /Comparisons/ },
  { page: 'comparison', path: aComparison, heading: /Tern 1 and Tern 2/, prepare: compared },
  { page: 'clouds', path: ({ programme }) => `/programmes/${programme.id}/clouds`, heading: /Clouds/ },
  { page: 'cloud', path: newCloud, heading: /Dunlin rim/ },
  { page: 'keys', path: () => '/', heading: /Your programmes/, prepare: openKeys },
  { page: 'nothing-here', path: () => '/no/such/page', heading: /Nothing here/ },
];

/** One file that asks about air and vacuum, one that is ready, one that cannot be read. */
async function chooseFiles(page: Page): Promise<void> {
  const csv = csvOfUnstatedMedium(HOT_STAR_BEHIND_A_CLOUD);
  const file = (name: string, text: string) => ({ name, mimeType: 'text/csv', buffer: Buffer.from(text) });
  const files = [
    file('asks.csv', csv),
    file('ready.csv', `# medium: air\n${csv}`),
    file('broken.csv', 'wavelength (nm),flux\n500,1\n501,oops\n'),
  ];
  await page.locator('input[type=file]').setInputFiles(files);
  await page.getByRole('region', { name: 'asks.csv' }).getByRole('heading', { name: 'Air or vacuum?' }).waitFor();
  await page.getByRole('region', { name: 'ready.csv' }).getByRole('heading', { level: 3, name: 'Ready' }).waitFor();
  await page.getByRole('region', { name: 'broken.csv' }).getByRole('heading', { name: 'Cannot be read' }).waitFor();
}

async function defaultList({ programme }: Demonstration, page: Page): Promise<string> {
  const lists = (await (await page.request.get(apiPaths.programmeLineLists(programme.id))).json()) as { id: string }[];
  return `/programmes/${programme.id}/line-lists/${lists[0]!.id}`;
}

/** Two stars of the demonstration behind one cloud, compared. */
async function aComparison({ programme, targets }: Demonstration, page: Page): Promise<string> {
  const spectrum = (name: string) => targets.find((target) => target.name === name)!.spectra[0]!.id;
  const path = apiPaths.comparisons(programme.id);
  const known = (await (await page.request.get(path)).json()) as { id: string; name: string }[];
  const id = known.find(({ name }) => name === 'Tern 1 and Tern 2')?.id;
  if (id) return `/programmes/${programme.id}/comparisons/${id}`;
  const data = { spectrumA: spectrum('Tern 1'), spectrumB: spectrum('Tern 2') };
  const made = (await (await page.request.post(path, { data, headers: { 'X-Foreveil': '1' } })).json()) as { id: string };
  return `/programmes/${programme.id}/comparisons/${made.id}`;
}

/** A worker makes it; the page shows it when it hears of it. */
async function compared(page: Page): Promise<void> {
  await page.locator('#veil').waitFor({ timeout: 120_000 });
}

async function openKeys(page: Page): Promise<void> {
  await page.keyboard.press('Shift+?'); // the button stands in a wide bar only
  await page.getByRole('dialog').waitFor();
}

/** A cloud with every spectrum of the demonstration that looks at a target of its own. */
async function newCloud({ programme, targets }: Demonstration, page: Page): Promise<string> {
  const cloud: NewCloud = {
    ...{ name: `Dunlin rim ${randomUUID()}`, fromKmPerS: -20, toKmPerS: 0, frame: 'barycentric', notes: 'Simulated.' },
    spectrumIds: targets.flatMap(({ spectra }) => spectra.slice(0, 1).map(({ id }) => id)),
  };
  const headers = { origin: new URL(page.url()).origin };
  const answer = await page.request.post(apiPaths.clouds(programme.id), { data: cloud, headers });
  if (!answer.ok()) throw new Error(await answer.text());
  return `/programmes/${programme.id}/clouds/${((await answer.json()) as { id: string }).id}`;
}

async function newProgramme(page: Page): Promise<string> {
  const name = `Nothing observed yet ${randomUUID()}`;
  const answer = await page.request.post(apiPaths.programmes, { data: { name }, headers: { origin: new URL(page.url()).origin } });
  if (!answer.ok()) throw new Error(await answer.text());
  return ((await answer.json()) as { id: string }).id;
}

describe('every page, by day and by night, on a desk and on a phone', () => {
  let fleet: Fleet;
  let browser: Browser;
  beforeAll(async () => {
    [fleet, browser] = await Promise.all([startFleet(), launch()]);
  }, 120_000);
  afterAll(async () => {
    await browser?.close();
    await fleet?.close();
  });

  describe.each(LOOKS)('$scheme at $width', (look) => {
    let seen: Visit;
    let demo: Demonstration;
    const name = (page: string) => `${page}-${look.scheme}-${look.width}`;
    beforeAll(async () => {
      seen = await visit(browser, fleet.url, look);
    });
    afterAll(() => seen?.context.close());

    /** The checks that hold on every page. */
    async function expectSound(page: string) {
      await shoot(seen.page, name(page));
      expect(await accessibilityFaults(seen.page)).toEqual([]);
      const sideways = await seen.page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
      expect(sideways).toBe(0);
      expect(seen.complaints).toEqual([]);
      expect(seen.outside).toEqual([]);
    }

    it('sign-in', async () => {
      await seen.page.goto('/sign-in');
      await seen.page.getByLabel('E-mail').waitFor();
      await expectSound('sign-in');
      await signIn(seen.page, 'lead');
      demo = await analysedDemonstration(seen.page);
    }, 200_000);

    it.each(SUBJECTS)(
      '$page',
      async ({ page, path, heading, prepare }) => {
        await seen.page.goto(await path(demo, seen.page));
        await seen.page.getByRole('heading', { level: 1, name: heading }).waitFor();
        await seen.page.waitForFunction(() => !document.querySelector('[aria-busy=true]'));
        await prepare?.(seen.page);
        await expectSound(page);
      },
      150_000,
    );
  });
});
