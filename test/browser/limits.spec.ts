import type { Browser } from 'playwright-core';
import { startFleet, type Fleet } from '../support/browser/fleet.js';
import { analysedDemonstration, fillSignIn, signIn, type Demonstration } from '../support/browser/people.js';
import { launch, visit, type Visit } from '../support/browser/visit.js';

describe('what a person may not do', () => {
  let fleet: Fleet;
  let browser: Browser;
  let demo: Demonstration;
  const visits: Visit[] = [];
  const targetName = 'Curlew Nebula';
  const spectrumPath = () =>
    `/programmes/${demo.programme.id}/spectra/${demo.targets.find(({ name }) => name === targetName)!.spectra[0]!.id}`;

  beforeAll(async () => {
    [fleet, browser] = await Promise.all([startFleet(), launch()]);
    const { page } = await arrive();
    await signIn(page, 'lead');
    demo = await analysedDemonstration(page, targetName);
  }, 200_000);
  afterAll(async () => {
    await Promise.all(visits.map(({ context }) => context.close()));
    await browser?.close();
    await fleet?.close();
  });

  async function arrive(): Promise<Visit> {
    const arrived = await visit(browser, fleet.url);
    visits.push(arrived);
    return arrived;
  }

  it('a reader sees the argument but cannot accept, neither by button nor by key', async () => {
    const { page } = await arrive();
    await signIn(page, 'reader');
    await page.goto(spectrumPath());
    const first = page.getByRole('grid', { name: 'Lines' }).getByRole('row').nth(1);
    await first.click();
    const accept = page.getByRole('button', { name: /^Accept/ });
    await accept.waitFor();
    expect(await accept.getAttribute('aria-disabled')).toBe('true');
    const asked: string[] = [];
    page.on('request', (request) => void (request.method() !== 'GET' && asked.push(request.url())));
    await accept.click({ force: true });
    await page.getByRole('grid', { name: 'Lines' }).focus();
    await page.keyboard.press('a');
    await page.getByText(/role/).first().waitFor(); // the refusal, in words
    expect(asked).toEqual([]);
  });

  it('somebody outside the programme finds nothing at its addresses', async () => {
    const { page } = await arrive();
    await signIn(page, null);
    for (const path of [spectrumPath(), `/programmes/${demo.programme.id}`, `/programmes/${demo.programme.id}/add`]) {
      await page.goto(path);
      await page.getByRole('heading', { level: 1, name: 'Nothing here' }).waitFor();
      expect(await page.getByText('Dunlin').count()).toBe(0);
    }
  });

  it('somebody who is not signed in is asked to, and then taken to the page of the link', async () => {
    const { page } = await arrive();
    await page.goto(spectrumPath());
    await page.getByLabel('E-mail').waitFor();
    await fillSignIn(page, 'reader');
    await page.getByRole('heading', { level: 1, name: targetName }).waitFor();
    expect(new URL(page.url()).pathname).toBe(spectrumPath());
  });

  it('a file that is no spectrum is refused with the reason and the place, and cannot be sent', async () => {
    const { page } = await arrive();
    await signIn(page, 'analyst');
    await page.goto(`/programmes/${demo.programme.id}/add`);
    const table = 'wavelength (nm),flux\n500.0,1.0\n500.1,0.9\n500.2,oops\n500.3,1.1\n500.4,1.0\n';
    await page.locator('input[type=file]').setInputFiles([
      { name: 'notes.csv', mimeType: 'text/csv', buffer: Buffer.from('These are notes, not numbers.\nNothing to measure here.\n') },
      { name: 'broken.csv', mimeType: 'text/csv', buffer: Buffer.from(table) },
    ]);
    const notes = page.getByRole('region', { name: 'notes.csv' });
    await notes.getByRole('heading', { name: 'Cannot be read' }).waitFor();
    expect((await notes.getByRole('alert').textContent())!.length).toBeGreaterThan(20);
    const broken = page.getByRole('region', { name: 'broken.csv' });
    await broken
      .getByText(/line 4|row 3/i)
      .first()
      .waitFor();
    expect(await page.getByRole('button', { name: 'Nothing to add' }).isDisabled()).toBe(true);
  });

  it('none of that was an error of a page', () => {
    expect(visits.flatMap(({ complaints }) => complaints)).toEqual([]);
    expect(visits.flatMap(({ outside }) => outside)).toEqual([]);
  });
});
