import type { MemberRole, ProgrammeSummary, TargetSummary } from '@foreveil/shared';
import { apiPaths } from '@foreveil/shared';
import type { Page } from 'playwright-core';
import { DEMO_ACCOUNTS } from '../../../seeds/demo-accounts.js';

/** Signs in as the demonstration's member of that role, and arrives at the programmes; null: somebody who is not in the programme. */
export async function signIn(page: Page, role: MemberRole | null): Promise<void> {
  await page.goto('/sign-in');
  await fillSignIn(page, role);
  await page.getByRole('heading', { name: 'Your programmes' }).waitFor();
}

/** The form of signing in, wherever it stands on the page. */
export async function fillSignIn(page: Page, role: MemberRole | null): Promise<void> {
  const { email, password } = DEMO_ACCOUNTS.find((account) => account.role === role)!;
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
}

/** What the demonstration holds, as the API tells the person who is signed in on this page. */
export interface Demonstration {
  readonly programme: ProgrammeSummary;
  readonly targets: readonly TargetSummary[];
}

/** Waits until a worker has analysed its spectra: those of one target, or all. */
export async function analysedDemonstration(page: Page, only?: string): Promise<Demonstration> {
  const [programme] = await get<ProgrammeSummary[]>(page, apiPaths.programmes);
  if (!programme) throw new Error('the demonstration has no programme');
  for (const end = Date.now() + 150_000; Date.now() < end;) {
    const targets = await get<TargetSummary[]>(page, apiPaths.targets(programme.id));
    const awaited = targets.filter(({ name }) => only === undefined || name === only);
    const phases = awaited.flatMap(({ spectra }) => spectra.map(({ analysis }) => analysis?.phase));
    if (phases.includes('ERROR')) throw new Error(`an analysis of the demonstration failed: ${phases.join(', ')}`);
    if (phases.length > 0 && phases.every((phase) => phase === 'COMPLETED')) return { programme, targets };
    await page.waitForTimeout(250); // between two questions, not instead of one
  }
  throw new Error('the demonstration was not analysed within 150 s');
}

async function get<T>(page: Page, path: string): Promise<T> {
  const answer = await page.request.get(path);
  if (!answer.ok()) throw new Error(`${path}: ${answer.status()} ${await answer.text()}`);
  return (await answer.json()) as T;
}
