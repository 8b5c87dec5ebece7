import { createHmac } from 'node:crypto';
import { apiPaths, type Problem } from '@foreveil/shared';
import bcrypt from 'bcryptjs';
import request from 'supertest';
import { hashPassword } from '../../server/src/common/auth/password.js';
import type { Config } from '../../server/src/config/config.js';
import { startApi, type Api } from '../support/api/api.js';
import { PASSWORD, makePerson, personWith, signIn, type Person } from '../support/api/person.js';

let api: Api;

/** Starts an API before the tests of a block and closes it after them; one at a time, since passport keeps its strategy process-wide. */
function withApi(changes: Partial<Config> = {}): void {
  beforeAll(async () => {
    api = await startApi(changes);
  });
  afterAll(() => api.close());
}

const post = (path: string, body: object, headers: Record<string, string> = { 'X-Foreveil': '1' }) =>
  request(api.url).post(path).set(headers).send(body);
const meOf = (cookie: string) => request(api.url).get(apiPaths.me).set('Cookie', cookie);
const withCookie = (cookie: string): Person => personWith(api, { role: 'outsider', userId: '', email: '', name: '', cookie });

describe('signing in', () => {
  withApi();

  test('opens a session in a cookie that scripts cannot read', async () => {
    const person = await makePerson(api);
    const answer = await post(apiPaths.signIn, { email: person.email.toUpperCase(), password: PASSWORD }).expect(200);
    expect(answer.body).toEqual({ id: person.userId, email: person.email, name: person.name, administrator: false });
    const cookie = answer.get('Set-Cookie')![0]!;
    expect(cookie).toMatch(/^foreveil=/);
    expect(cookie.split('; ').slice(1)).toEqual(expect.arrayContaining(['Path=/', 'HttpOnly', 'SameSite=Lax']));
    expect(cookie).not.toMatch(/Domain|Secure/);
    expect((await meOf(cookie.split(';')[0]!)).body).toEqual(answer.body);
  });

  test('answers a wrong password, a missing account and a closed account alike', async () => {
    const [person, closed] = [await makePerson(api), await makePerson(api)];
    await api.db('users').where({ id: closed.userId }).update({ active: false });
    const bodies = [
      { email: person.email, password: 'not the right one at all' },
      { email: 'nobody.at.all@example.org', password: PASSWORD },
      { email: closed.email, password: PASSWORD },
    ];
    const answers = await Promise.all(bodies.map((body) => post(apiPaths.signIn, body)));
    const seen = answers.map(({ body }) => ({ ...(body as Problem), traceId: '' }));
    expect(seen[0]).toMatchObject({ status: 401, code: 'wrong_credentials' });
    expect(seen[1]).toEqual(seen[0]);
    expect(seen[2]).toEqual(seen[0]);
    expect(answers.every((answer) => answer.get('Set-Cookie') === undefined)).toBe(true);
  });

  test('tells passwords apart by every character, however long they are, and by case', async () => {
    const long = `${'long pass phrase '.repeat(6)}ending`;
    await api.db('users').insert({ email: 'long@example.org', name: 'Long', password_hash: await hashPassword(long, api.config) });
    const attempt = (password: string) => post(apiPaths.signIn, { email: 'long@example.org', password });
    await attempt(long).expect(200);
    await attempt(`${long.slice(0, -1)}G`).expect(401); // differs in character 108, beyond the 72 bytes that bcrypt reads
    await attempt(long.toUpperCase()).expect(401);
    await attempt(long.slice(0, 72)).expect(401);
  });

  test('takes a password in any Unicode form of the same text', async () => {
    await api
      .db('users')
      .insert({ email: 'form@example.org', name: 'F', password_hash: await hashPassword('Überraschung am Morgen', api.config) });
    await post(apiPaths.signIn, { email: 'form@example.org', password: 'Überraschung am Morgen'.normalize('NFD') }).expect(200);
  });
});

describe('a session', () => {
  withApi();

  test('ends at once when its person signs out, and only that one', async () => {
    const person = await makePerson(api);
    const other = await signIn(api, person.email);
    const answer = await person.post(apiPaths.signOut).expect(204);
    expect(answer.get('Set-Cookie')![0]).toMatch(/^foreveil=;.*Expires=Thu, 01 Jan 1970/);
    await meOf(person.cookie).expect(401);
    await meOf(other).expect(200);
  });

  test('is a new one at every sign-in', async () => {
    const person = await makePerson(api);
    const cookies = [person.cookie, await signIn(api, person.email), await signIn(api, person.email)];
    expect(new Set(cookies).size).toBe(3);
    expect(await api.db('sessions').where({ user_id: person.userId }).count({ n: '*' }).first()).toEqual({ n: '3' });
  });

  test('ends when it was not used for too long, but not before', async () => {
    const person = await makePerson(api);
    const lastSeen = (minutesAgo: number) =>
      api
        .db('sessions')
        .where({ user_id: person.userId })
        .update({ last_seen_at: api.db.raw(`now() - ? * interval '1 minute'`, [minutesAgo]) });
    await lastSeen(api.config.sessionIdleMinutes - 1);
    await meOf(person.cookie).expect(200); // and this counts as use
    await meOf(person.cookie).expect(200);
    await lastSeen(api.config.sessionIdleMinutes + 1);
    await meOf(person.cookie).expect(401);
  });

  test('ends at its time, however much it is used', async () => {
    const person = await makePerson(api);
    const sessions = () => api.db('sessions').where({ user_id: person.userId });
    const { expires_at: expires, created_at: created } = await sessions().first<{ expires_at: Date; created_at: Date }>();
    expect((expires.getTime() - created.getTime()) / 3_600_000).toBeCloseTo(api.config.sessionHours, 6);
    await sessions().update({ created_at: api.db.raw(`now() - interval '2 hours'`), expires_at: api.db.raw(`now() - interval '1 hour'`) });
    await meOf(person.cookie).expect(401);
  });

  test('ends when its account is closed', async () => {
    const person = await makePerson(api);
    await api.db('users').where({ id: person.userId }).update({ active: false });
    await meOf(person.cookie).expect(401);
  });

  test('cannot be forged', async () => {
    const person = await makePerson(api);
    const [header, payload, signature] = person.cookie.replace('foreveil=', '').split('.') as [string, string, string];
    const claims = JSON.parse(Buffer.from(payload, 'base64url').toString()) as Record<string, unknown>;
    expect(Object.keys(claims).sort()).toEqual(['aud', 'exp', 'gen', 'iat', 'iss', 'sid', 'sub']); // nothing that could go out of date
    const part = (value: object) => Buffer.from(JSON.stringify(value)).toString('base64url');
    const signed = (head: object, body: object, secret = api.config.jwtSecret, algorithm = 'sha256') => {
      const text = `${part(head)}.${part(body)}`;
      return `${text}.${createHmac(algorithm, secret).update(text).digest('base64url')}`;
    };
    const HS256 = { alg: 'HS256', typ: 'JWT' };
    const other = await makePerson(api);
    const forged = {
      unsigned: `${part({ alg: 'none' })}.${payload}.`,
      'with its signature cut off': `${header}.${payload}.`,
      'signed with another secret': signed(HS256, claims, 'x'.repeat(48)),
      'signed with an empty secret': signed(HS256, claims, ''),
      'signed by another method': signed({ alg: 'HS512', typ: 'JWT' }, claims, api.config.jwtSecret, 'sha512'),
      'for another audience': signed(HS256, { ...claims, aud: 'someone-else' }),
      'from another issuer': signed(HS256, { ...claims, iss: 'someone-else' }),
      'out of date': signed(HS256, { ...claims, exp: Math.floor(Date.now() / 1000) - 1 }),
      'of another person with this session': signed(HS256, { ...claims, sub: other.userId }),
      'of a generation that never was': signed(HS256, { ...claims, gen: 2 }),
      'without a generation': signed(HS256, { ...claims, gen: undefined }),
      'without a session': signed(HS256, { ...claims, sid: undefined }),
      'with a session that is no id': signed(HS256, { ...claims, sid: "' or true --" }),
      'with a changed payload': `${header}.${part({ ...claims, sub: other.userId })}.${signature}`,
    };
    expect((await meOf(`foreveil=${signed(HS256, claims)}`)).status).toBe(200); // the forger's hand is good enough
    const answers = await Promise.all(Object.entries(forged).map(async ([how, token]) => [how, (await meOf(`foreveil=${token}`)).status]));
    expect(Object.fromEntries(answers)).toEqual(Object.fromEntries(Object.keys(forged).map((how) => [how, 401])));
  });
});

describe('a change', () => {
  withApi();

  const attempt = (cookie: string, headers: Record<string, string>) =>
    request(api.url).post(apiPaths.programmes).set('Cookie', cookie).set(headers).send({ name: 'From elsewhere' });

  test('is refused when it comes from another site', async () => {
    const { cookie } = await makePerson(api);
    const own = api.url;
    const foreign: Record<string, string>[] = [
      {},
      { Origin: 'https://evil.example.net' },
      { Origin: 'null' },
      { Origin: 'https://evil.example.net', 'X-Foreveil': '1' },
      { Origin: `${own}.evil.example.net` },
      { Origin: own.replace(/\d+$/, '1') },
      { 'X-Foreveil': '0' },
      { 'X-Foreveil': '1', 'Sec-Fetch-Site': 'cross-site' },
    ];
    const answers = await Promise.all(foreign.map((headers) => attempt(cookie, headers)));
    expect(answers.map(({ status, body }) => [status, (body as Problem).code])).toEqual(foreign.map(() => [403, 'cross_site']));
    const form = await request(api.url).post(apiPaths.programmes).set('Cookie', cookie).type('text/plain').send('{"name":"x"}');
    expect(form.status).toBe(403);
    expect(
      await withCookie(cookie)
        .get(apiPaths.programmes)
        .then(({ body }) => body),
    ).toEqual([]);
  });

  test('is taken from our own pages, and from programs that say so', async () => {
    const { cookie } = await makePerson(api);
    await attempt(cookie, { Origin: api.url }).expect(201);
    await attempt(cookie, { 'X-Foreveil': '1' }).expect(201);
  });

  test('of the session needs it too: nobody is signed in or out by another site', async () => {
    const person = await makePerson(api);
    const headers = { Origin: 'https://evil.example.net' };
    await post(apiPaths.signIn, { email: person.email, password: PASSWORD }, headers).expect(403);
    await request(api.url).post(apiPaths.signOut).set('Cookie', person.cookie).set(headers).expect(403);
    await meOf(person.cookie).expect(200);
  });

  test('is never made by a GET', async () => {
    const { cookie } = await makePerson(api);
    const answer = await request(api.url).get(apiPaths.me).set('Cookie', cookie).set('Origin', 'https://evil.example.net').expect(200);
    expect(answer.headers['access-control-allow-origin']).toBeUndefined();
  });
});

describe('where the site is https', () => {
  withApi({ origin: 'https://foreveil.example.org', secureCookies: true });

  test('makes the cookie secure, and names it so, where the site is https', async () => {
    const email = 'secure@example.org';
    await api.db('users').insert({ email, name: 'Secure', password_hash: await hashPassword(PASSWORD, api.config) });
    const headers = { Origin: 'https://foreveil.example.org' };
    const answer = await post(apiPaths.signIn, { email, password: PASSWORD }, headers).expect(200);
    expect(answer.get('Set-Cookie')![0]).toMatch(/^__Host-foreveil=.*; Path=\/;.*HttpOnly; Secure; SameSite=Lax$/);
    expect(answer.headers['strict-transport-security']).toBe('max-age=31536000; includeSubDomains');
  });
});

describe('where hashing takes real work', () => {
  withApi({ passwordCost: 9 });

  test('takes as long for a missing account as for a wrong password', async () => {
    await api.db('users').insert({ email: 'known@example.org', name: 'Known', password_hash: await hashPassword(PASSWORD, api.config) });
    const timed = async (email: string): Promise<number> => {
      const from = performance.now();
      await post(apiPaths.signIn, { email, password: 'wrong on purpose, long' }).expect(401);
      return performance.now() - from;
    };
    const [known, unknown]: number[][] = [[], []];
    for (let i = 0; i < 15; i++) {
      known!.push(await timed('known@example.org'));
      unknown!.push(await timed('unknown@example.org'));
    }
    const median = (times: number[]) => times.sort((a, b) => a - b)[times.length >> 1]!;
    // without the comparison against a hash that nothing matches, a missing account answers in a tenth of the time
    expect(median(unknown!) / median(known!)).toBeGreaterThan(0.6);
    expect(median(unknown!) / median(known!)).toBeLessThan(1.7);
  });
});

describe('where hashing takes more work than it did', () => {
  withApi({ passwordCost: 5 });

  test('stores a hash with today’s work when an older one took less', async () => {
    const older = await hashPassword(PASSWORD, { ...api.config, passwordCost: 4 });
    expect(bcrypt.getRounds(older)).toBe(4);
    await api.db('users').insert({ email: 'older@example.org', name: 'Older', password_hash: older });
    await post(apiPaths.signIn, { email: 'older@example.org', password: PASSWORD }).expect(200);
    const after = await api.db('users').where({ email: 'older@example.org' }).first<{ password_hash: string }>('password_hash');
    expect(bcrypt.getRounds(after.password_hash)).toBe(5);
    await post(apiPaths.signIn, { email: 'older@example.org', password: PASSWORD }).expect(200);
  });
});

describe('where one account is guessed at', () => {
  withApi({ signInPerAccount: 3 });

  test('slows down guessing at one account, and says for how long', async () => {
    const attempt = (email: string) => post(apiPaths.signIn, { email, password: 'a guess among many' });
    const statuses = [];
    for (let i = 0; i < 4; i++) statuses.push((await attempt('Victim@example.org')).status);
    expect(statuses).toEqual([401, 401, 401, 429]);
    const refused = await attempt('victim@example.org').expect(429);
    expect(refused.body).toMatchObject({ code: 'too_many_requests' });
    expect(Number(refused.headers['retry-after'])).toBeGreaterThan(0);
    expect(Number(refused.headers['retry-after'])).toBeLessThanOrEqual(300);
    await attempt('somebody.else@example.org').expect(401);
  });
});

describe('where one address tries many accounts', () => {
  withApi({ signInPerAddress: 3 });

  test('slows down an address that tries many accounts, and does not believe who it says it is', async () => {
    const statuses = [];
    for (let i = 0; i < 4; i++) {
      const headers = { 'X-Foreveil': '1', 'X-Forwarded-For': `10.0.0.${i}` };
      statuses.push((await post(apiPaths.signIn, { email: `n${i}@example.org`, password: 'one guess for each' }, headers)).status);
    }
    expect(statuses).toEqual([401, 401, 401, 429]);
  });
});
