import { readFileSync } from 'node:fs';
import Papa from 'papaparse';
import type { Browser, Page } from 'playwright-core';
import { startFleet, type Fleet } from '../support/browser/fleet.js';
import { signIn } from '../support/browser/people.js';
import { launch, visit, type Visit } from '../support/browser/visit.js';
import { csvOfUnstatedMedium, HOT_STAR_BEHIND_A_CLOUD } from '../support/simulated-spectrum.js';

const FILE = { name: 'Sanderling 5.csv', mimeType: 'text/csv', buffer: Buffer.from(csvOfUnstatedMedium(HOT_STAR_BEHIND_A_CLOUD)) };

// Each step goes on where the one before ended: an analyst adds a file, a reviewer decides, the report leaves.
describe('from a file to a report', () => {
  let fleet: Fleet;
  let browser: Browser;
  let analyst: Visit;
  let reviewer: Visit;
  let spectrumUrl: string;
  const everybody = () => [analyst, reviewer].filter(Boolean);

  beforeAll(async () => {
    [fleet, browser] = await Promise.all([startFleet(), launch()]);
    analyst = await visit(browser, fleet.url);
    reviewer = await visit(browser, fleet.url);
  }, 120_000);
  afterAll(async () => {
    await Promise.all(everybody().map(({ context }) => context.close()));
    await browser?.close();
    await fleet?.close();
  });

  it('leads from signing in to the page that takes files', async () => {
    await signIn(analyst.page, 'analyst');
    await analyst.page.getByRole('link', { name: 'Dunlin cloud (simulated)' }).click();
    await analyst.page.getByRole('heading', { level: 1, name: /Dunlin cloud/ }).waitFor();
    await analyst.page.getByRole('link', { name: 'Add spectra' }).first().click();
    await analyst.page.getByRole('heading', { level: 1, name: 'Add spectra' }).waitFor();
  });

  it('asks whether wavelengths are meant in air or vacuum when the file does not say, and sends nothing before', async () => {
    await analyst.page.locator('input[type=file]').setInputFiles(FILE);
    const file = fileBand(analyst.page);
    await file.getByRole('heading', { name: 'Air or vacuum?' }).waitFor();
    expect(await analyst.page.getByRole('button', { name: 'Nothing to add' }).isDisabled()).toBe(true);
    await file.getByRole('radio', { name: /^air/ }).click();
    await file.getByRole('heading', { name: 'Ready' }).waitFor();
    expect(await file.getByText('said by you').count()).toBeGreaterThan(0);
  });

  it('sends it, says that the analysis waits, and shows the result when a worker has done it', async () => {
    fleet.pauseWorker();
    const file = fileBand(analyst.page);
    await analyst.page.getByRole('button', { name: 'Add 1 spectrum' }).click();
    await file.getByRole('heading', { name: 'Added' }).waitFor();
    await file.getByRole('link', { name: 'watch it in the spectrum' }).click();
    await analyst.page.getByRole('heading', { level: 1, name: 'Sanderling 5' }).waitFor();
    await analyst.page.getByRole('progressbar', { name: 'Analysis' }).waitFor();
    spectrumUrl = analyst.page.url();
    fleet.resumeWorker();
    await linesOf(analyst.page).waitFor({ timeout: 90_000 });
    expect(await analyst.page.getByRole('progressbar', { name: 'Analysis' }).count()).toBe(0);
  });

  it('ranks sodium in a cloud first for the dip that sodium made', async () => {
    await row(analyst.page, /Na I 589\.158/).click();
    await analyst.page.getByRole('heading', { level: 2, name: /^Na I 589\.158.* in the cloud/ }).waitFor();
    const candidates = analyst.page.getByRole('list', { name: 'Candidates, best first' }).getByRole('listitem');
    expect(await candidates.first().textContent()).toMatch(/Na I 589\.158/);
    expect(await candidates.last().textContent()).toMatch(/not in the list/);
  });

  it('puts the velocity where the file, read as air wavelengths, has it', async () => {
    const title = await analyst.page.getByRole('heading', { level: 2, name: /^Na I 589\.158/ }).textContent();
    const velocity = Number(/at ([−+\d.]+) km\/s/.exec(title!)![1]!.replace('−', '-'));
    // simulated at -12.3 km/s; read as vacuum it would lie 83 km/s away. A line of this strength is placed to well below 1 km/s.
    expect(Math.abs(velocity - -12.3)).toBeLessThan(1);
  });

  it('takes an acceptance by key, goes on to the next line, and the teammate sees it without reloading', async () => {
    await signIn(reviewer.page, 'reviewer');
    await reviewer.page.goto(spectrumUrl);
    await row(reviewer.page, /Na I 589\.158/).click();
    await linesOf(reviewer.page).focus();
    await reviewer.page.keyboard.press('a');
    await row(reviewer.page, /Na I 589\.158.*accepted/).waitFor();
    await reviewer.page.getByText('Accepted Na I 589.158').first().waitFor();
    expect(await row(reviewer.page, /Na I 589\.158/).getAttribute('aria-selected')).toBe('false');
    await row(analyst.page, /Na I 589\.158.*accepted/).waitFor();
  });

  it('takes a rejection, and takes it back', async () => {
    await row(reviewer.page, /Na I 589\.75/).click();
    await linesOf(reviewer.page).focus();
    await reviewer.page.keyboard.press('x');
    await row(reviewer.page, /Na I 589\.75.*rejected/).waitFor();
    await reviewer.page.getByText('Rejected Na I 589.75').first().waitFor(); // saved, not only shown
    await row(reviewer.page, /Na I 589\.75/).click();
    await linesOf(reviewer.page).focus();
    await reviewer.page.keyboard.press('b');
    await row(reviewer.page, /Na I 589\.75.*proposed/).waitFor();
  });

  it('keeps who decided what in the history of the line', async () => {
    await row(reviewer.page, /Na I 589\.158/).click();
    await reviewer.page.getByRole('group', { name: 'Companions and history' }).getByText('Teodor Vale').first().waitFor();
  });

  it('shows the same page when its address is opened anew', async () => {
    await reviewer.page.reload();
    await row(reviewer.page, /Na I 589\.158.*accepted/).waitFor();
    await reviewer.page.getByRole('heading', { level: 2, name: /^Na I 589\.158/ }).waitFor();
  });

  it('hands out a report with the decisions: one line accepted and by whom, the other proposed again', async () => {
    const [download] = await Promise.all([
      reviewer.page.waitForEvent('download'),
      reviewer.page.getByRole('link', { name: 'Line report, CSV' }).click(),
    ]);
    expect(download.suggestedFilename()).toMatch(/\.csv$/);
    const { data } = Papa.parse<Record<string, string>>(readFileSync(await download.path(), 'utf8'), { header: true, comments: '#' });
    const decisionOn = (title: string) => data.filter((row) => row.title === title).map(({ status, reviewer: by }) => ({ status, by }));
    expect(decisionOn('Na I 589.158')).toEqual([{ status: 'accepted', by: 'Teodor Vale' }]);
    expect(decisionOn('Na I 589.756')).toEqual([{ status: 'proposed', by: 'Teodor Vale' }]);
  });

  it('gave nobody a reason to complain, and asked no other machine for anything', () => {
    expect(everybody().flatMap(({ complaints }) => complaints)).toEqual([]);
    expect(everybody().flatMap(({ outside }) => outside)).toEqual([]);
    expect(fleet.log.filter((line) => /"level":(50|60)/.test(line))).toEqual([]);
  });
});

const fileBand = (page: Page) => page.getByRole('region', { name: FILE.name });
const linesOf = (page: Page) => page.getByRole('grid', { name: 'Lines' });
const row = (page: Page, name: RegExp) => linesOf(page).getByRole('row').filter({ hasText: name });
