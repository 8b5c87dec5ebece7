import { readFileSync, statSync } from 'node:fs';
import { gunzipSync } from 'node:zlib';
import { PASSWORD_LENGTH, apiPaths, type ProgrammeSummary, type SpectrumSummary, type TargetSummary } from '@foreveil/shared';
import { DEMO_ACCOUNTS } from '../../seeds/demo-accounts.js';
import { DEMO_SPECTRA } from '../../seeds/demo-spectra.js';
import { seedData } from '../../seeds/line-list.js';
import { startApi, type Api } from '../support/api/api.js';
import { db as command } from '../support/api/database.js';
import { personWith, signIn, type Person } from '../support/api/person.js';

let api: Api;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());

const member = async (email: string, password: string): Promise<Person> =>
  personWith(api, { role: 'outsider', userId: '', email, name: '', cookie: await signIn(api, email, password) });

test('fills an empty database with the demonstration, once', async () => {
  expect(await command(api.database.url, 'seed')).toContain('demonstration installed');
  const counts = async () => {
    const tables = ['users', 'programmes', 'memberships', 'targets', 'spectra', 'analyses', 'line_lists'];
    const found = await Promise.all(tables.map((table) => api.db(table).count<{ n: string }[]>({ n: '*' })));
    return Object.fromEntries(tables.map((table, i) => [table, Number(found[i]![0]!.n)]));
  };
  expect(await counts()).toEqual({ users: 5, programmes: 1, memberships: 4, targets: 6, spectra: 6, analyses: 6, line_lists: 1 });
  expect(await command(api.database.url, 'seed', 'seed')).not.toContain('demonstration installed');
  expect(await counts()).toMatchObject({ users: 5, spectra: 6, line_lists: 1 });
});

test('everyone can sign in as announced, in a role of their own, and one is not of the programme', async () => {
  const roles = [];
  for (const { email, password, name } of DEMO_ACCOUNTS) {
    expect([...password].length).toBeGreaterThanOrEqual(PASSWORD_LENGTH.least);
    expect(email).toMatch(/@example\.org$/);
    const person = await member(email, password);
    expect((await person.get(apiPaths.me)).body).toMatchObject({ email, name });
    roles.push(((await person.get(apiPaths.programmes)).body as ProgrammeSummary[])[0]?.role ?? null);
  }
  expect(roles).toEqual(DEMO_ACCOUNTS.map(({ role }) => role));
  expect(new Set(roles).size).toBe(5);
  const announced = await command(api.database.url, 'accounts');
  for (const { email, password } of DEMO_ACCOUNTS) expect(announced).toContain(`${email}  "${password}"`);
});

test('says everywhere that its data are simulated, and their files name what they are shown as', async () => {
  const { email, password } = DEMO_ACCOUNTS.find(({ role }) => role === 'reader')!;
  const reader = await member(email, password);
  const [programme] = (await reader.get(apiPaths.programmes)).body as ProgrammeSummary[];
  expect(programme).toMatchObject({ simulated: true, targets: 6, spectra: 6, name: expect.stringContaining('simulated') as string });
  const targets = (await reader.get(apiPaths.targets(programme!.id))).body as TargetSummary[];
  expect(targets.every(({ simulated, notes }) => simulated && notes.startsWith('Simulated.'))).toBe(true);
  expect(targets.map(({ name }) => name).sort()).toEqual(DEMO_SPECTRA.map(({ targetName }) => targetName).sort());
  const spectra = (await reader.get(apiPaths.spectra(programme!.id))).body as SpectrumSummary[];
  expect(spectra.every(({ analysis, preview }) => analysis?.phase === 'QUEUED' && preview?.low.length === 512)).toBe(true);
  expect(spectra.some(({ fromNm }) => fromNm < 200)).toBe(true); // one of the ultraviolet
  for (const { file, targetName } of DEMO_SPECTRA) {
    const bytes = readFileSync(seedData(`spectra/${file}`));
    if (file.endsWith('.fits.gz')) expect(gunzipSync(bytes).toString('latin1', 0, 2880)).toContain(`OBJECT  = '${targetName}`);
  }
  const size = DEMO_SPECTRA.reduce((sum, { file }) => sum + statSync(seedData(`spectra/${file}`)).size, 0);
  expect(size).toBeLessThan(5e6);
});
