import { readFileSync } from 'node:fs';
import { apiPaths, type ComparisonDetail } from '@foreveil/shared';
import Papa from 'papaparse';
import type { Browser, Download } from 'playwright-core';
import { startFleet, type Fleet } from '../support/browser/fleet.js';
import { analysedDemonstration, signIn, type Demonstration } from '../support/browser/people.js';
import { accessibilityFaults, launch, shoot, visit, type Look, type Visit } from '../support/browser/visit.js';

const LOOKS: Look[] = (['light', 'dark'] as const).flatMap((scheme) => [1440, 390].map((width) => ({ scheme, width })));

// Each step goes on where the one before ended.
describe('comparing two sightlines', () => {
  let fleet: Fleet;
  let browser: Browser;
  let reviewer: Visit;
  let demo: Demonstration;
  let path: string;
  const page = () => reviewer.page;
  const table = () => page().getByRole('group', { name: /^Lines; arrow keys/ });
  const saved = async (name: string): Promise<Download> => {
    const [download] = await Promise.all([page().waitForEvent('download'), page().getByText(name, { exact: true }).first().click()]);
    return download;
  };

  beforeAll(async () => {
    [fleet, browser] = await Promise.all([startFleet(), launch()]);
    reviewer = await visit(browser, fleet.url);
    await signIn(page(), 'reviewer');
    await analysedDemonstration(page(), 'Tern 1');
    demo = await analysedDemonstration(page(), 'Tern 2');
  }, 400_000);
  afterAll(async () => {
    await reviewer?.context.close();
    await browser?.close();
    await fleet?.close();
  });

  it('takes two spectra and shows what they share', async () => {
    const spectrum = (name: string) => demo.targets.find((t) => t.name === name)!.spectra[0]!.id;
    await page().goto(`/programmes/${demo.programme.id}/comparisons`);
    await page().getByLabel('A', { exact: true }).selectOption(spectrum('Tern 1'));
    await page().getByLabel('B', { exact: true }).selectOption(spectrum('Tern 2'));
    await page().getByRole('button', { name: 'Compare', exact: true }).click();
    await page().locator('#veil').waitFor({ timeout: 120_000 });
    path = new URL(page().url()).pathname;
  }, 150_000);

  it('shows the lines of one verdict, and sets the chosen ones above each other', async () => {
    await page().getByLabel('Verdicts shown').selectOption('shared');
    const verdicts = await table().locator('tbody tr td:nth-of-type(8)').allInnerTexts();
    expect(verdicts.length).toBeGreaterThan(1);
    for (const v of verdicts) expect(v).toMatch(/^shared/);
    const boxes = table().getByRole('checkbox');
    await boxes.nth(0).check();
    await boxes.nth(1).check();
    const profiles = page().getByRole('region', { name: 'Profiles on one velocity scale' });
    expect(await profiles.getByRole('figure').count()).toBe(await table().getByRole('checkbox', { checked: true }).count());
  });

  it('lets a person overrule a verdict with a remark, which then stands', async () => {
    await table().locator('tbody tr').first().getByRole('button').click();
    const line = page().getByRole('region', { name: 'The chosen line' });
    await line.getByLabel('Verdict').selectOption('cannot-tell');
    await line.getByLabel('Why').fill('the star has a line there');
    await line.getByRole('button', { name: 'Overrule' }).click();
    await line.getByText('the star has a line there').waitFor();
    await page().getByLabel('Verdicts shown').selectOption('cannot-tell');
    await table().getByText(/^by /).waitFor();
  });

  it('saves the verdicts as a table and the veil as a drawing', async () => {
    const csv = await saved('CSV');
    expect(csv.suggestedFilename()).toMatch(/\.csv$/);
    const { data } = Papa.parse<Record<string, string>>(readFileSync(await csv.path(), 'utf8'), { header: true, comments: '#' });
    expect(data.filter((row) => row['verdict_by'])).toMatchObject([{ verdict: 'cannot-tell', computed_verdict: 'shared' }]);
    const figure = await saved('Figure, SVG');
    expect(figure.suggestedFilename()).toMatch(/\.svg$/);
    const svg = readFileSync(await figure.path(), 'utf8');
    expect(svg).toMatch(/^<svg[^>]*xmlns="http:\/\/www\.w3\.org\/2000\/svg"/);
    expect(svg).toContain('#0072b2');
    expect(svg).not.toMatch(/<script|var\(--/);
  });

  it.each(LOOKS)('is the same page for who is sent its address, and has no fault of access: $scheme at $width', async (look) => {
    const reader = await visit(browser, fleet.url, look);
    try {
      await signIn(reader.page, 'reader');
      await reader.page.goto(path);
      await reader.page.locator('#veil').waitFor();
      await reader.page.getByText('Settings of this comparison').click();
      await reader.page.getByLabel('Verdicts shown').selectOption('cannot-tell');
      await reader.page.getByText(/^by /).first().waitFor();
      await shoot(reader.page, `comparison-sent-${look.scheme}-${look.width}`);
      expect(await accessibilityFaults(reader.page)).toEqual([]);
      expect(await reader.page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0);
    } finally {
      await reader.context.close();
    }
  });

  it('says what another run changes, and runs: the ruling goes along, the name is new', async () => {
    await page().getByText('Settings of this comparison').click();
    const settings = page().getByRole('form', { name: 'Settings of this comparison' });
    await settings.getByLabel('Name').fill('Tern 1 and 2, one more cloud');
    await settings.getByLabel('More clouds at, km/s').fill('41,5');
    await settings.getByText(/A cloud at \+41\.50 km\/s is measured/).waitFor();
    await settings.getByRole('button', { name: 'Compare with these settings' }).click();
    await page().getByRole('heading', { name: 'Tern 1 and 2, one more cloud' }).waitFor();
    await page().locator('#veil').waitFor({ timeout: 120_000 });
    const id = new URL(page().url()).pathname.split('/').at(-1)!;
    const made = (await (await page().request.get(apiPaths.comparison(demo.programme.id, id))).json()) as ComparisonDetail;
    expect(made.settings.extraCloudsKmPerS).toEqual([41.5]);
    expect(made.rulings).toMatchObject([{ verdict: 'cannot-tell', remark: 'the star has a line there' }]);
    await page().goto(path);
    await page().getByRole('link', { name: 'Open the newer one' }).waitFor();
  }, 150_000);
});
