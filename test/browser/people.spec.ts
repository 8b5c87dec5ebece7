import type { Browser, Page } from 'playwright-core';
import { startFleet, type Fleet } from '../support/browser/fleet.js';
import { signIn } from '../support/browser/people.js';
import { accessibilityFaults, launch, shoot, visit, type Visit } from '../support/browser/visit.js';

let fleet: Fleet;
let browser: Browser;
let seen: Visit[] = [];
beforeAll(async () => {
  [fleet, browser] = await Promise.all([startFleet(), launch()]);
}, 180_000);
afterAll(async () => {
  await browser?.close();
  await fleet?.close();
});
afterEach(async () => {
  for (const { context, complaints, outside } of seen) {
    await context.close();
    expect(complaints).toEqual([]);
    expect(outside).toEqual([]);
  }
  seen = [];
});

async function open(look: Parameters<typeof visit>[2] = {}): Promise<Page> {
  const one = await visit(browser, fleet.url, look);
  one.context.setDefaultTimeout(60_000);
  seen.push(one);
  return one.page;
}

async function expectSound(page: Page, name: string): Promise<void> {
  await shoot(page, name);
  expect(await accessibilityFaults(page)).toEqual([]);
  expect(await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)).toBe(0);
}

/** Follows the newest mail with this subject, from the page that shows what was sent. */
async function followMail(page: Page, subject: RegExp): Promise<void> {
  await page.goto('/mail');
  await page.getByRole('button', { name: subject }).first().click();
  await page.getByRole('link', { name: /#/ }).click();
}

const password = 'a heron stands in the reeds';

test('an invitation goes by mail, is accepted with a new account, and a change of role reaches the open page', async () => {
  const lead = await open();
  await signIn(lead, 'lead');
  await lead.getByRole('link', { name: /Dunlin cloud/ }).click();
  await lead.getByRole('link', { name: /Invite, change roles/ }).click();
  await lead.getByLabel('E-mail address').fill('runa@example.org');
  await lead.getByRole('button', { name: 'Invite', exact: true }).click();
  await lead.getByText('runa@example.org').waitFor();
  await expectSound(lead, 'members-light-1440');

  const runa = await open();
  await followMail(runa, /invites you to Dunlin cloud/);
  await runa.getByRole('heading', { name: 'Invitation' }).waitFor();
  await runa.getByLabel('Your name').fill('Runa Holm');
  await runa.getByLabel('Password', { exact: true }).fill('short');
  await runa.getByRole('button', { name: 'Open the account and join' }).click();
  await runa
    .getByRole('alert')
    .getByText(/at least 15 characters/)
    .waitFor();
  await expectSound(runa, 'join-light-1440');
  await runa.getByLabel('Password', { exact: true }).fill(password);
  await runa.getByRole('button', { name: 'Open the account and join' }).click();
  await runa.getByRole('heading', { level: 1, name: /Dunlin cloud/ }).waitFor();
  const add = () => runa.getByRole('button', { name: 'Add target' });
  expect(await add().getAttribute('aria-disabled')).toBeNull(); // an analyst may

  await lead.getByLabel('Role of Runa Holm').selectOption('reader');
  await runa.locator('button[aria-disabled=true]', { hasText: 'Add target' }).waitFor(); // without a reload
  await lead.getByRole('button', { name: 'Remove' }).last().waitFor();
  await lead.getByRole('listitem').filter({ hasText: 'Runa Holm' }).getByRole('button', { name: 'Remove' }).click();
  await lead.getByRole('dialog').getByRole('button', { name: 'Remove' }).click();
  await lead.getByLabel('Role of Runa Holm').waitFor({ state: 'detached' });
  await runa.goto('/');
  await runa.getByRole('heading', { name: 'Start a programme' }).waitFor();
}, 300_000);

test('a forgotten password is set anew through the mail, with the keyboard alone', async () => {
  const page = await open({ scheme: 'dark', width: 390 });
  await page.goto('/forgot-password');
  await page.getByLabel('E-mail').focus();
  await page.keyboard.type('oskar@example.org');
  await page.keyboard.press('Enter');
  await page.getByRole('heading', { name: 'Look into your mail' }).waitFor();
  await expectSound(page, 'forgot-password-dark-390');
  await followMail(page, /Set a new password/);
  await page.getByLabel('New password', { exact: true }).focus();
  await page.keyboard.type(password);
  await page.keyboard.press('Enter');
  await page.getByRole('heading', { name: 'Password set' }).waitFor();
  await page.getByRole('link', { name: 'To the sign-in page' }).click();
  await page.getByLabel('E-mail').fill('oskar@example.org');
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.keyboard.press('Enter');
  await page.getByRole('heading', { name: 'Your programmes' }).waitFor();
  await page.goto('/mail');
  await page.getByRole('button', { name: 'Your password was set anew' }).waitFor();
  await expectSound(page, 'mail-dark-390');
}, 300_000);

test('the second factor is set up from its picture or its text, and then asked for', async () => {
  const { Secret, TOTP } = await import('otpauth');
  const page = await open();
  await signIn(page, 'analyst');
  await page.goto('/account');
  await page.getByLabel('Your password, for the second factor').fill('grey plover, grey sky');
  await page.getByRole('button', { name: 'Set it up' }).click();
  await page.getByAltText(/QR code/).waitFor();
  const secret = (await page.locator('code').innerText()).trim();
  const code = () => new TOTP({ secret: Secret.fromBase32(secret) }).generate({ timestamp: Date.now() });
  await page.getByLabel('Code', { exact: true }).fill(code());
  await page.getByRole('button', { name: 'Turn it on' }).click();
  const recovery = await page.getByRole('list', { name: 'Recovery codes' }).getByRole('listitem').first().innerText();
  await expectSound(page, 'recovery-codes-light-1440');
  await page.getByRole('button', { name: 'I have kept them' }).click();
  await page.getByText(/10 recovery codes are left/).waitFor();

  const again = await open();
  await again.goto('/sign-in');
  await again.getByLabel('E-mail').fill('mirka@example.org');
  await again.getByLabel('Password', { exact: true }).fill('grey plover, grey sky');
  await again.getByRole('button', { name: 'Sign in' }).click();
  await again.getByLabel(/Code of your authenticator app/).fill(recovery);
  await again.getByRole('button', { name: 'Sign in' }).click();
  await again.getByRole('heading', { name: 'Your programmes' }).waitFor();
}, 300_000);

test('an administrator closes and opens an account, and a lead deletes a programme and takes it back', async () => {
  const admin = await open();
  await signIn(admin, null);
  await admin.getByRole('button', { name: /^Account of/ }).click();
  await admin.getByRole('menuitem', { name: 'Accounts of this site' }).click();
  const row = admin.getByRole('listitem').filter({ hasText: 'Teodor Vale' });
  await row.getByRole('button', { name: 'Close' }).click();
  await admin.getByRole('dialog').getByRole('button', { name: 'Close' }).last().click();
  await row.getByRole('button', { name: /Open the account/ }).click();
  await row.getByRole('button', { name: 'Close' }).waitFor();
  await expectSound(admin, 'admin-light-1440');

  const lead = await open();
  await signIn(lead, 'lead');
  await lead.getByRole('button', { name: 'New programme' }).click();
  await lead.getByLabel('Name', { exact: true }).fill('Short-lived');
  await lead.getByRole('button', { name: 'Start it' }).click();
  await lead.getByRole('heading', { level: 1, name: 'Short-lived' }).waitFor();
  await lead.getByRole('link', { name: /Invite, change roles/ }).click();
  await lead.getByRole('button', { name: 'Delete' }).click();
  await lead.getByRole('dialog').getByRole('button', { name: 'Delete' }).click();
  await lead.getByRole('button', { name: 'Take Short-lived back' }).click();
  await lead.getByRole('link', { name: 'Short-lived' }).waitFor();
}, 300_000);
