import type { MemberRole, ProgrammeSummary, TargetSummary } from '@foreveil/shared';
import { apiPaths } from '@foreveil/shared';
import type { Page } from 'playwright-core';
import { DEMO_ACCOUNTS } from '../../../seeds/demo-accounts.js';

/** Signs in, by the form, as the demonstration's member of that role; null: somebody who is not in the programme. */
export async function signIn(page: Page, role: MemberRole | null): Promise<void> {
  const { email, password } = DEMO_ACCOUNTS.find((account) => account.role === role)!;
  await page.goto('/sign-in');
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('heading', { name: 'Your programmes' }).waitFor();
}

/** What the demonstration holds, as the API tells the person who is signed in on this page. */
export interface Demonstration {
  readonly programme: ProgrammeSummary;
  readonly targets: readonly TargetSummary[];
}

/** Waits until a worker has analysed all of its spectra. */
export async function analysedDemonstration(page: Page): Promise<Demonstration> {
  const [programme] = await get<ProgrammeSummary[]>(page, apiPaths.programmes);
  if (!programme) throw new Error('the demonstration has no programme');
  for (const end = Date.now() + 90_000; Date.now() < end;) {
    const targets = await get<TargetSummary[]>(page, apiPaths.targets(programme.id));
    const phases = targets.flatMap(({ spectra }) => spectra.map(({ analysis }) => analysis?.phase));
    if (phases.includes('ERROR')) throw new Error(`an analysis of the demonstration failed: ${phases.join(', ')}`);
    if (phases.length > 0 && phases.every((phase) => phase === 'COMPLETED')) return { programme, targets };
    await page.waitForTimeout(250); // between two questions, not instead of one
  }
  throw new Error('the demonstration was not analysed within 90 s');
}

async function get<T>(page: Page, path: string): Promise<T> {
  const answer = await page.request.get(path);
  if (!answer.ok()) throw new Error(`${path}: ${answer.status()} ${await answer.text()}`);
  return (await answer.json()) as T;
}
