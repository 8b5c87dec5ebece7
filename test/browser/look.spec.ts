import type { Browser } from 'playwright-core';
import { startFleet, type Fleet } from '../support/browser/fleet.js';
import { analysedDemonstration, signIn, type Demonstration } from '../support/browser/people.js';
import { accessibilityFaults, launch, shoot, visit, type Look, type Visit } from '../support/browser/visit.js';

const LOOKS: Look[] = (['light', 'dark'] as const).flatMap((scheme) => [1440, 390].map((width) => ({ scheme, width })));

interface Subject {
  readonly page: string;
  readonly path: (demo: Demonstration) => string;
  /** what stands there once the page is all there */
  readonly heading: RegExp;
}

const spectrumOf = ({ programme, targets }: Demonstration, name: string) =>
  `/programmes/${programme.id}/spectra/${targets.find((target) => target.name === name)!.spectra[0]!.id}`;

const SUBJECTS: Subject[] = [
  { page: 'programmes', path: () => '/', heading: /Your programmes/ },
  { page: 'programme', path: ({ programme }) => `/programmes/${programme.id}`, heading: /Dunlin cloud/ },
  { page: 'add-spectra', path: ({ programme }) => `/programmes/${programme.id}/add`, heading: /Add spectra/ },
  { page: 'target', path: ({ programme, targets }) => `/programmes/${programme.id}/targets/${targets[0]!.id}`, heading: /\w/ },
  { page: 'absorption-spectrum', path: (demo) => spectrumOf(demo, 'Tern 1'), heading: /Tern 1/ },
  { page: 'emission-spectrum', path: (demo) => spectrumOf(demo, 'Curlew Nebula'), heading: /Curlew Nebula/ },
  { page: 'nothing-here', path: () => '/no/such/page', heading: /Nothing here/ },
];

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

    it.each(SUBJECTS)('$page', async ({ page, path, heading }) => {
      await seen.page.goto(path(demo));
      await seen.page.getByRole('heading', { level: 1, name: heading }).waitFor();
      await seen.page.waitForFunction(() => !document.querySelector('[aria-busy=true]'));
      await expectSound(page);
    });
  });
});
