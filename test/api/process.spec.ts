import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { connect } from 'node:net';
import { join } from 'node:path';
import { apiPaths } from '@foreveil/shared';
import { hashPassword } from '../../server/src/common/auth/password.js';
import { repoRoot } from '../../server/src/config/config.js';
import { createKnex } from '../../server/src/database/knex.js';
import { testConfig } from '../support/api/api.js';
import { makeDatabase, type TestDatabase } from '../support/api/database.js';
import { until } from '../support/api/worker.js';

const PASSWORD = 'canary-password-7391';
const EMAIL = 'canary@example.org';

let database: TestDatabase;
let child: ChildProcess;
let log: string[];
let url: string;

/** The built API as `npm start` runs it, on a port of its own. */
beforeEach(async () => {
  database = await makeDatabase();
  const db = createKnex(database.url, { pool: 1 });
  await db('users').insert({ email: EMAIL, name: 'Canary', password_hash: await hashPassword(PASSWORD, testConfig(database.url)) });
  await db.destroy();
  child = spawn(process.execPath, [join(repoRoot, 'server/dist/main.js')], {
    cwd: repoRoot,
    env: {
      ...process.env,
      NODE_OPTIONS: '',
      FOREVEIL_MODE: 'test',
      DATABASE_URL: database.url,
      PORT: '0',
      LOG_LEVEL: 'info',
      PASSWORD_COST: '4',
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  log = [];
  for (const stream of [child.stdout!, child.stderr!]) stream.on('data', (piece: Buffer) => log.push(piece.toString()));
  url = (
    await until(
      () => /listening on (http:\/\/[\d.:]+)/.exec(log.join('')),
      30_000,
      () => log.join(''),
    )
  )[1]!;
});
afterEach(async () => {
  if (child.exitCode === null && child.signalCode === null) {
    child.kill('SIGKILL');
    await once(child, 'exit');
  }
  await database.drop();
});

async function signIn(): Promise<string> {
  const answer = await fetch(`${url}${apiPaths.signIn}`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json', 'X-Foreveil': '1' },
    body: JSON.stringify({ email: EMAIL, password: PASSWORD }),
  });
  expect(answer.status).toBe(200);
  return answer.headers.get('set-cookie')!.split(';')[0]!;
}
async function newProgramme(cookie: string): Promise<string> {
  const headers = { 'Content-Type': 'application/json', 'X-Foreveil': '1', Cookie: cookie };
  const answer = await fetch(`${url}${apiPaths.programmes}`, { method: 'POST', headers, body: '{"name":"Canary"}' });
  return ((await answer.json()) as { id: string }).id;
}

test('stops when asked: open streams end, a request on its way is answered, idle connections do not keep it', async () => {
  const cookie = await signIn();
  const programmeId = await newProgramme(cookie);
  const stream = await fetch(`${url}${apiPaths.events(programmeId)}`, { headers: { Cookie: cookie } });
  const streamed = stream.text();
  // a request whose body is still on its way when the signal comes
  const { port, hostname } = new URL(url);
  const socket = connect(Number(port), hostname);
  await once(socket, 'connect');
  const body = '{"name":"On its way"}';
  const head = `POST ${apiPaths.programmes} HTTP/1.1\r\nHost: x\r\nX-Foreveil: 1\r\nCookie: ${cookie}\r\nContent-Type: application/json\r\n`;
  socket.write(`${head}Content-Length: ${body.length}\r\n\r\n${body.slice(0, 5)}`);
  const idle = connect(Number(port), hostname);
  await once(idle, 'connect');
  await new Promise((resolve) => setTimeout(resolve, 200));
  const from = Date.now();
  child.kill('SIGTERM');
  await new Promise((resolve) => setTimeout(resolve, 300));
  socket.write(body.slice(5));
  const [answer] = (await once(socket, 'data')) as [Buffer];
  expect(answer.toString()).toMatch(/^HTTP\/1\.1 201 /);
  socket.end();
  idle.destroy();
  const [status] = (await once(child, 'exit')) as [number | null];
  expect(status).toBe(0);
  expect(Date.now() - from).toBeLessThan(10_000);
  expect(await streamed).toMatch(/^retry: \d+\n\n/);
});

test('serves on after the database cut all its connections', async () => {
  const cookie = await signIn();
  const admin = createKnex(database.url, { pool: 1, applicationName: 'admin of the test' });
  for (let round = 0; round < 3; round++) {
    await admin.raw(
      `select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and pid <> pg_backend_pid()`,
    );
    const me = () => fetch(`${url}${apiPaths.me}`, { headers: { Cookie: cookie } });
    const first = (await me()).status;
    expect([200, 503]).toContain(first);
    await until(
      async () => (await me()).status === 200,
      5_000,
      () => log.join(''),
    );
  }
  await admin.destroy();
  expect(child.exitCode).toBeNull();
});

test('logs who did what, one JSON line each, and no secret', async () => {
  const cookie = await signIn();
  await fetch(`${url}${apiPaths.me}`, { headers: { Cookie: cookie } });
  // a token in the header counts, whatever the cookie says
  const unknown = await fetch(`${url}${apiPaths.me}`, { headers: { Cookie: cookie, Authorization: 'Bearer canary-bearer-5521' } });
  expect(unknown.status).toBe(401);
  await fetch(`${url}${apiPaths.signIn}`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json', 'X-Foreveil': '1' },
    body: JSON.stringify({ email: 'x@example.org\n{"level":60,"forged":true}', password: 'canary-wrong-4410' }),
  });
  await fetch(`${url}/api/nowhere%0a{"level":60}`);
  const logged = () => log.join('').split('\n').filter(Boolean);
  await until(
    () => logged().filter((line) => line.includes('"statusCode"')).length >= 5,
    5_000,
    () => log.join(''),
  );
  const lines = logged().map((line) => JSON.parse(line) as Record<string, unknown> & { req?: Record<string, unknown>; level: number });
  expect(lines.some(({ level }) => level === 60)).toBe(false);
  const token = cookie.split('=')[1]!;
  for (const secret of [PASSWORD, 'canary-wrong-4410', 'canary-bearer-5521', token, token.split('.')[2]!])
    expect(log.join('')).not.toContain(secret);
  const me = lines.find(({ req }) => req?.['url'] === apiPaths.me)!;
  expect(me).toMatchObject({ req: { method: 'GET', id: expect.stringMatching(/^[0-9a-f-]{36}$/) as string }, res: { statusCode: 200 } });
  expect(me['userId']).toMatch(/^[0-9a-f-]{36}$/);
  expect(me['responseTime']).toEqual(expect.any(Number));
});
