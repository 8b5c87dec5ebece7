import type { Browser, Page } from 'playwright-core';
import { startFleet, type Fleet } from '../support/browser/fleet.js';
import { signIn } from '../support/browser/people.js';
import { launch, visit, type Visit } from '../support/browser/visit.js';

/** A table of one instrument: invented wavelengths without a unit, a medium or a frame. @param seed makes another file */
function plate(seed: number, extra = ''): string {
  const rows = Array.from({ length: 400 }, (_, i) => {
    const dip = 0.4 * Math.exp(-0.5 * ((i - 150 - 10 * seed) / 4) ** 2);
    return `${(1200 + i * 0.5).toFixed(2)},${(1 - dip + 0.01 * Math.sin(12.9898 * i + seed)).toFixed(5)}`;
  });
  return [`# plate: ${seed}`, extra, 'wavelength,flux', ...rows, ''].filter((line, i) => line || i > 1).join('\n');
}
const file = (name: string, text: string) => ({ name, mimeType: 'text/csv', buffer: Buffer.from(text) });

// Each step goes on where the one before ended: an analyst brings the files of a night.
describe('many files at once', () => {
  let fleet: Fleet;
  let browser: Browser;
  let analyst: Visit;
  let page: Page;
  const band = (name: string) => page.getByRole('region', { name, exact: true });
  const says = (name: string, title: string) => band(name).getByRole('heading', { level: 3, name: title, exact: true }).waitFor();

  beforeAll(async () => {
    [fleet, browser] = await Promise.all([startFleet(), launch()]);
    analyst = await visit(browser, fleet.url);
    page = analyst.page;
    await signIn(page, 'analyst');
    await page.getByRole('link', { name: 'Dunlin cloud (simulated)' }).click();
    await page.getByRole('link', { name: 'Add spectra' }).first().click();
  }, 120_000);
  afterAll(async () => {
    await analyst?.context.close();
    await browser?.close();
    await fleet?.close();
  });

  it('are read here when they are dropped, and a unit that nothing tells is asked for in its place', async () => {
    const files = [plate(1), plate(2), plate(3)].map((text, i) => ({ name: `plate-${i + 1}.csv`, text }));
    const dropped = await page.evaluateHandle((given) => {
      const transfer = new DataTransfer();
      for (const { name, text } of given) transfer.items.add(new File([text], name, { type: 'text/csv' }));
      return transfer;
    }, files);
    await page.locator('input[type=file]').locator('..').dispatchEvent('drop', { dataTransfer: dropped });
    await says('plate-1.csv', 'Cannot be read');
    await band('plate-1.csv')
      .getByText(/Say which unit it is/)
      .waitFor();
    await says('plate-3.csv', 'Cannot be read');
  });

  it('one is corrected, and the correction goes to all of its kind', async () => {
    await band('plate-1.csv').getByRole('combobox', { name: 'Unit of the axis' }).selectOption('nm');
    await says('plate-1.csv', 'Air or vacuum?');
    await band('plate-1.csv')
      .getByRole('radio', { name: /^vacuum/ })
      .click();
    await says('plate-1.csv', 'Ready');
    await band('plate-1.csv').getByRole('button', { name: 'Apply to all 2 similar files' }).click();
    await says('plate-2.csv', 'Ready');
    await says('plate-3.csv', 'Ready');
    await band('plate-3.csv')
      .getByText(/1200\.00–1399\.50 nm/)
      .waitFor();
  });

  it('is kept as a recipe of the programme', async () => {
    await band('plate-1.csv').getByRole('button', { name: 'Save as recipe' }).click();
    const dialog = page.getByRole('dialog', { name: 'Save as a reading recipe' });
    await dialog.getByRole('textbox', { name: 'Name' }).fill('Plates of the north');
    await dialog.getByRole('button', { name: 'Save it' }).click();
    await page.getByRole('link', { name: 'Recipes, 1' }).waitFor();
  });

  it('a new file of the kind is read by it, and says so', async () => {
    await page
      .locator('input[type=file]')
      .first()
      .setInputFiles([file('plate-4.csv', plate(4)), file('again.csv', plate(4))]);
    await band('plate-4.csv').getByText('Recipe Plates of the north applied').waitFor();
    await says('plate-4.csv', 'Ready');
    await says('again.csv', 'Twice on this page');
    await band('again.csv').getByRole('button', { name: 'Leave out' }).click();
    await band('plate-4.csv').getByRole('button', { name: 'Undo' }).click();
    await says('plate-4.csv', 'Cannot be read');
    await band('plate-4.csv').getByRole('button', { name: 'Read by the recipe Plates of the north' }).click();
    await says('plate-4.csv', 'Ready');
  });

  it('one upload is cancelled, another fails and is tried again, and the rest goes', async () => {
    let failing = true;
    await page.route('**/api/programmes/*/spectra', async (route) => {
      if (route.request().method() !== 'POST') return route.continue();
      const body = route.request().postDataBuffer()?.toString('latin1') ?? '';
      if (body.includes('plate-2.csv')) return new Promise(() => undefined); // never answered, so that there is time to cancel
      if (body.includes('plate-3.csv') && failing) return route.abort('connectionreset');
      return route.continue();
    });
    await page.getByRole('button', { name: 'Add 4 spectra' }).click();
    await says('plate-1.csv', 'Added');
    await band('plate-2.csv').getByRole('button', { name: 'Cancel' }).click();
    await says('plate-2.csv', 'Ready');
    await says('plate-3.csv', 'Not added');
    failing = false;
    await band('plate-3.csv').getByRole('button', { name: 'Try again' }).click();
    await says('plate-3.csv', 'Added');
    await page.unroute('**/api/programmes/*/spectra');
  });

  it('does not let a person leave by mistake, and knows a file again before it is sent', async () => {
    await page.getByRole('link', { name: /^Recipes/ }).click();
    const dialog = page.getByRole('dialog', { name: 'Leave these files?' });
    await dialog.getByRole('button', { name: 'Stay' }).click();
    await page
      .locator('input[type=file]')
      .first()
      .setInputFiles(file('plate-1 renamed.csv', plate(1)));
    await says('plate-1 renamed.csv', 'Already here');
    await band('plate-1 renamed.csv').getByRole('link', { name: 'plate-1', exact: true }).waitFor();
  });

  it('on the page of the file shows what was corrected and every line of its header, and reads it anew', async () => {
    await band('plate-1 renamed.csv').getByRole('link', { name: 'open its file there' }).click();
    await page.getByRole('dialog', { name: 'Leave these files?' }).getByRole('button', { name: 'Leave' }).click();
    await page.getByRole('heading', { level: 1, name: 'plate-1.csv' }).waitFor();
    await page.getByText('axis in nm').first().waitFor();
    await page.getByLabel('Header of the file').getByText('plate: 1').waitFor();
    await page.getByRole('combobox', { name: 'Medium' }).selectOption('air');
    await page.getByText(/every velocity moves by 8\d\.\d km\/s/).waitFor();
    await page.getByRole('button', { name: 'Read anew and analyse' }).click();
    await page.getByRole('heading', { name: 'Read as shown' }).waitFor();
    await page.getByText('Reading 1').waitFor();
  });

  it('a spectrum is removed after a question, and put back', async () => {
    await page.getByRole('button', { name: 'Remove' }).click();
    await page.getByRole('dialog').getByRole('button', { name: 'Remove it' }).click();
    await page.getByText('plate-1 was removed').waitFor();
    await page.getByRole('button', { name: 'Put it back' }).click();
    await page.getByText(/The file and how it was read/).waitFor();
  });

  it('a recipe is renamed and deleted where recipes are kept', async () => {
    const programme = /\/programmes\/([^/]+)/.exec(page.url())![1]!;
    await page.goto(`/programmes/${programme}/recipes`);
    const row = page.getByRole('list', { name: 'Reading recipes' }).getByRole('listitem');
    await row.getByRole('button', { name: 'Rename' }).click();
    await row.getByRole('textbox', { name: 'New name of Plates of the north' }).fill('Northern plates');
    await row.getByRole('button', { name: 'Save' }).click();
    await row.getByText('Northern plates').waitFor();
    await row.getByRole('button', { name: 'Delete' }).click();
    await page.getByRole('dialog').getByRole('button', { name: 'Delete it' }).click();
    await page.getByText('No recipe yet').waitFor();
  });

  it('none of that was an error of a page', () => {
    expect(analyst.complaints.filter((complaint) => !/ERR_CONNECTION_RESET/.test(complaint))).toEqual([]);
    expect(analyst.outside).toEqual([]);
  });
});
