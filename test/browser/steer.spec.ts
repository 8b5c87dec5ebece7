import { apiPaths, type AnalysisRun } from '@foreveil/shared';
import type { Browser, Page } from 'playwright-core';
import { startFleet, type Fleet } from '../support/browser/fleet.js';
import { analysedDemonstration, signIn, type Demonstration } from '../support/browser/people.js';
import { accessibilityFaults, launch, shoot, visit, type Look, type Visit } from '../support/browser/visit.js';

const LOOKS: Look[] = (['light', 'dark'] as const).flatMap((scheme) => [1440, 390].map((width) => ({ scheme, width })));

// Each step goes on where the one before ended: a line is accepted, the analysis is steered and run again, the decision is still there.
describe('steering an analysis', () => {
  let fleet: Fleet;
  let browser: Browser;
  let reviewer: Visit;
  let demo: Demonstration;
  let path: string;
  const page = () => reviewer.page;
  const panel = () => page().getByRole('dialog', { name: 'Steer the analysis' });
  const settings = () => panel().getByRole('region', { name: 'Settings for the next run' });

  beforeAll(async () => {
    [fleet, browser] = await Promise.all([startFleet(), launch()]);
    reviewer = await visit(browser, fleet.url);
    await signIn(page(), 'reviewer');
    demo = await analysedDemonstration(page(), 'Tern 1');
    path = `/programmes/${demo.programme.id}/spectra/${demo.targets.find(({ name }) => name === 'Tern 1')!.spectra[0]!.id}`;
  }, 240_000);
  afterAll(async () => {
    await reviewer?.context.close();
    await browser?.close();
    await fleet?.close();
  });

  it('begins with a decision on the line of a cloud', async () => {
    await page().goto(path);
    await row(page(), /Na I 589\.158/)
      .first()
      .click();
    await linesOf(page()).focus();
    await page().keyboard.press('a');
    await page()
      .getByText(/^Accepted Na I 589\.158/)
      .first()
      .waitFor();
  });

  it('opens by its key, and keeps a system that was found', async () => {
    await linesOf(page()).focus();
    await page().keyboard.press('g');
    await panel().waitFor();
    await panel()
      .getByRole('button', { name: /^Keep cloud/ })
      .first()
      .click();
    await settings()
      .getByText(/system of the interstellar gas is set at/)
      .waitFor();
  });

  it('masks a stretch that was dragged over the curve', async () => {
    await page().getByRole('button', { name: 'Mark', exact: true }).click();
    const box = (await page().locator('.u-over').boundingBox())!;
    const y = box.y + box.height / 2;
    await page().mouse.move(box.x + 60, y);
    await page().mouse.down();
    await page().mouse.move(box.x + 90, y, { steps: 4 });
    await page().mouse.up();
    const bar = page().getByRole('region', { name: 'Marked region' });
    await bar.getByText(/mÅ/).waitFor();
    await bar.getByRole('button', { name: 'Mask this' }).click();
    await settings()
      .getByText(/is masked: no fit uses it/)
      .waitFor();
  });

  it('says what will change, runs, and shows the new run with the decision where it was', async () => {
    await panel()
      .getByText(/Will change: 2 new settings/)
      .waitFor();
    await panel().getByRole('button', { name: 'Run with these settings' }).click();
    await page().getByText('2 settings of a person').waitFor({ timeout: 120_000 });
    await row(page(), /Na I 589\.158.*accepted/)
      .first()
      .waitFor();
    const runs = (await (await page().request.get(apiPaths.analyses(demo.programme.id, path.split('/').at(-1)!))).json()) as AnalysisRun[];
    expect(runs.map(({ phase }) => phase)).toEqual(['COMPLETED', 'COMPLETED']);
    expect(runs[0]!.settings.maskedRegions).toHaveLength(1);
    expect(runs[0]!.settings.setSystems).toMatchObject([{ family: 'interstellar' }]);
  }, 150_000);

  it('tells what changed between the two runs, and opens the older one to be read', async () => {
    await panel().getByRole('tab', { name: 'Runs' }).click();
    await panel().getByRole('button', { name: 'What changed' }).first().click();
    await panel()
      .getByText(/as they were/)
      .waitFor();
    await panel().getByRole('button', { name: 'Open' }).first().click();
    await page().getByText('An older run, of').waitFor();
    await page().getByRole('button', { name: 'Back to the newest run' }).click();
    await page().getByText('2 settings of a person').waitFor();
  });

  it('keeps the settings as a recipe', async () => {
    await panel().getByRole('tab', { name: 'Settings' }).click();
    await panel().getByLabel('Name of a new recipe').fill('Without the edge');
    await panel().getByRole('button', { name: 'Keep these settings as a recipe' }).click();
    await panel().getByRole('button', { name: 'Delete …' }).waitFor();
    expect(await panel().getByLabel('Recipe', { exact: true }).locator('option:checked').textContent()).toBe('Without the edge');
  });

  it.each(LOOKS)('is sound at $scheme, $width', async (look) => {
    const seen = await visit(browser, fleet.url, look);
    await signIn(seen.page, 'reviewer');
    await seen.page.goto(path);
    await linesOf(seen.page).waitFor();
    await seen.page.getByRole('button', { name: 'Steer', exact: true }).click();
    await seen.page.getByRole('dialog', { name: 'Steer the analysis' }).getByText('Velocity systems').waitFor();
    await shoot(seen.page, `steering-${look.scheme}-${look.width}`);
    expect(await accessibilityFaults(seen.page)).toEqual([]);
    expect(await seen.page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)).toBe(0);
    expect(seen.complaints).toEqual([]);
    await seen.context.close();
  });

  it('gave nobody a reason to complain', () => {
    expect(reviewer.complaints).toEqual([]);
    expect(reviewer.outside).toEqual([]);
  });
});

const linesOf = (page: Page) => page.getByRole('grid', { name: 'Lines' });
const row = (page: Page, name: RegExp) => linesOf(page).getByRole('row').filter({ hasText: name });
