import { randomUUID } from 'node:crypto';
import { ERROR_CODES, apiPaths, type Problem } from '@foreveil/shared';
import request, { type Response } from 'supertest';
import { REFUSALS } from '../../server/src/common/errors/domain-error.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Team } from '../support/api/person.js';
import { stored, upload } from '../support/api/spectra.js';

let api: Api;
let team: Team;
beforeAll(async () => {
  api = await startApi({ uploadLimitBytes: 100_000 });
  team = await makeTeam(api);
});
afterAll(() => api.close());

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/;
const KEYS = ['type', 'title', 'status', 'detail', 'instance', 'code', 'traceId', 'errors', 'current'];

/** RFC 9457, section 3, and what contract/api.ts adds to it. */
function expectProblem(answer: Response, status: number, code: string): Problem {
  expect(answer.status).toBe(status);
  expect(answer.headers['content-type']).toBe('application/problem+json; charset=utf-8');
  expect(answer.headers['x-content-type-options']).toBe('nosniff');
  expect(answer.headers['cache-control']).toBe('no-store');
  expect(answer.headers['etag']).toBeUndefined();
  const problem = JSON.parse(answer.text) as Problem;
  expect(Object.keys(problem).filter((key) => !KEYS.includes(key))).toEqual([]);
  expect(problem).toMatchObject({ type: `urn:foreveil:problem:${code}`, status, code });
  expect(problem.title).toBe(REFUSALS[code as keyof typeof REFUSALS].title);
  expect(problem.detail).toMatch(/^\S.+/);
  expect(problem.instance).toMatch(/^\/api/);
  expect(problem.traceId).toMatch(UUID);
  for (const { pointer, detail } of problem.errors ?? []) {
    expect(pointer).toMatch(/^\/\S+/); // RFC 6901
    expect(detail).toBeTruthy();
  }
  return problem;
}

const targets = () => apiPaths.targets(team.programmeId);
const raw = (method: 'get' | 'post', path: string) => request(api.url)[method](path).set({ 'X-Foreveil': '1', Cookie: team.lead.cookie });
const json = (text: string) => raw('post', targets()).type('application/json').send(text);

test('every code has a status of an error and a title', () => {
  expect(Object.keys(REFUSALS).sort()).toEqual([...ERROR_CODES].sort());
  expect(Object.values(REFUSALS).every(({ status, title }) => status >= 400 && status <= 599 && title.length > 0)).toBe(true);
});

describe('answers as problem+json', () => {
  const cases: [string, number, string, () => PromiseLike<Response>][] = [
    ['an address that is none', 404, 'not_found', () => raw('get', '/api/nothing/here')],
    ['the API itself', 404, 'not_found', () => raw('get', '/api')],
    ['an id that is none', 404, 'not_found', () => raw('get', apiPaths.programme('1'))],
    ['an id of nothing', 404, 'not_found', () => raw('get', apiPaths.target(team.programmeId, randomUUID()))],
    ['an address with a broken escape', 400, 'invalid_request', () => raw('get', '/api/programmes/%E0%A4%A')],
    ['an address that is too long', 414, 'too_large', () => raw('get', `/api/programmes?${'x'.repeat(9000)}`)],
    ['a method that is not known there', 405, 'method_not_allowed', () => request(api.url).delete(apiPaths.programmes)],
    ['a POST where there is only GET', 405, 'method_not_allowed', () => raw('post', apiPaths.me)],
    ['a sign-in without a password', 400, 'invalid_request', () => raw('post', apiPaths.signIn).send({ email: 'a@example.org' })],
    ['no sign-in', 401, 'not_signed_in', () => request(api.url).get(apiPaths.me)],
    ['JSON that is none', 400, 'invalid_request', () => json('{"name": ')],
    ['JSON that is no object', 400, 'invalid_request', () => json('[1,2]')],
    [
      'JSON in an unknown character set',
      400,
      'invalid_request',
      () => raw('post', targets()).set('Content-Type', 'application/json; charset=klingon').send('{}'),
    ],
    ['a body of another kind', 400, 'invalid_request', () => raw('post', targets()).type('text/plain').send('name=x')],
    ['a body that is too large', 413, 'too_large', () => json(JSON.stringify({ name: 'x'.repeat(1_100_000), kind: 'star' }))],
    ['fields that are not known', 400, 'invalid_request', () => json('{"name":"x","kind":"star","id":"1","version":7,"createdBy":"me"}')],
    ['a field of the wrong kind', 400, 'invalid_request', () => json('{"name":["x"],"kind":"star"}')],
    ['a number as text', 400, 'invalid_request', () => json('{"name":"x","kind":"star","raDeg":"12"}')],
    ['a number beyond all bounds', 400, 'invalid_request', () => json('{"name":"x","kind":"star","raDeg":1e309}')],
    ['a null where there must be a value', 400, 'invalid_request', () => json('{"name":null,"kind":"star"}')],
    ['a null note', 400, 'invalid_request', () => json('{"name":"x","kind":"star","notes":null}')],
    ['a name that is only blanks', 400, 'invalid_request', () => json('{"name":"   ","kind":"star"}')],
    ['an upload that is no form', 400, 'invalid_request', () => raw('post', apiPaths.spectra(team.programmeId)).send({ file: 'x' })],
    [
      'an upload with a broken form',
      400,
      'invalid_request',
      () => raw('post', apiPaths.spectra(team.programmeId)).set('Content-Type', 'multipart/form-data; boundary=x').send('--x\r\nContent-'),
    ],
    ['an upload that is too large', 413, 'too_large', () => upload(team.lead, team.programmeId, { content: Buffer.alloc(100_001, 49) })],
    ['two files at once', 400, 'invalid_request', () => upload(team.lead, team.programmeId).attach('file', Buffer.from('1,2'), 'b.csv')],
    [
      'a file in another part',
      400,
      'invalid_request',
      () => raw('post', apiPaths.spectra(team.programmeId)).attach('other', Buffer.from('1'), 'a'),
    ],
    [
      'a change without the version that was seen',
      428,
      'version_required',
      async () => team.analyst.patch(apiPaths.target(team.programmeId, (await stored(api, team)).targetId), { notes: 'x' }),
    ],
    [
      'a version that is none',
      400,
      'invalid_request',
      async () =>
        team.analyst.patch(apiPaths.target(team.programmeId, (await stored(api, team)).targetId), { notes: 'x' }, { 'If-Match': '*' }),
    ],
  ];

  test.each(cases)('%s', async (_, status, code, send) => {
    expectProblem(await send(), status, code);
  });
});

test('points at every field that is wrong', async () => {
  const problem = expectProblem(await json('{"name":"","kind":"moon","raDeg":400,"role":"lead"}'), 400, 'invalid_request');
  expect(problem.errors!.map(({ pointer }) => pointer).sort()).toEqual(['/kind', '/name', '/raDeg', '/role']);
});

test('says which methods an address answers to', async () => {
  const answer = await request(api.url).put(apiPaths.programmes).set('X-Foreveil', '1');
  expectProblem(answer, 405, 'method_not_allowed');
  expect(answer.headers['allow']).toBe('GET, HEAD, POST');
  for (const method of ['TRACE', 'PROPFIND']) {
    const other = await fetchWith(method, apiPaths.me);
    expect(other).toMatchObject({ status: 405, allow: 'GET, HEAD' });
  }
});

/** supertest and fetch refuse to send TRACE, so it goes over a plain connection. */
async function fetchWith(method: string, path: string): Promise<{ status: number; allow: string | undefined }> {
  const { request: send } = await import('node:http');
  return new Promise((resolve, reject) => {
    const sent = send(`${api.url}${path}`, { method }, (answer) => {
      answer.resume();
      resolve({ status: answer.statusCode!, allow: answer.headers.allow });
    });
    sent.on('error', reject);
    sent.end();
  });
}

test('never tells the inside of what nobody expected', async () => {
  await api.db.schema.renameTable('line_lists', 'line_lists_away');
  try {
    const problem = expectProblem(await team.lead.get(apiPaths.lineLists), 500, 'internal');
    expect(JSON.stringify(problem)).not.toMatch(/relation|line_lists|select|\.ts|\.js|node_modules| at /);
  } finally {
    await api.db.schema.renameTable('line_lists_away', 'line_lists');
  }
});

test('says that the database is away, and when to try again, and recovers', async () => {
  // every connection of the pool is taken: the next request waits its three seconds and is told
  const holds = Array.from({ length: 10 }, async () => void (await api.db.raw('select pg_sleep(4)')));
  const answer = await raw('get', apiPaths.ready);
  expectProblem(answer, 503, 'unavailable');
  expect(Number(answer.headers['retry-after'])).toBeGreaterThan(0);
  await raw('get', apiPaths.live).expect(200);
  await Promise.all(holds);
  await raw('get', apiPaths.ready).expect(200);
});

test('gives every answer its security headers, and no hint of what it runs on', async () => {
  for (const path of ['/api/health/live', '/api/nothing', '/api/auth/me', '/api/openapi.json', '/nowhere', '/.git/config', '/.env']) {
    const { headers, status } = await request(api.url).get(path);
    expect({ path, status }).not.toMatchObject({ path: expect.stringMatching(/^\/\./) as string, status: 200 });
    expect(headers).toMatchObject({
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'same-origin',
      'cross-origin-opener-policy': 'same-origin',
    });
    expect(headers['content-security-policy']).toContain("default-src 'self';script-src 'self';");
    expect(headers['content-security-policy']).toContain("object-src 'none';base-uri 'none';");
    expect(headers['content-security-policy']).toContain("frame-ancestors 'none'");
    expect(headers['x-powered-by']).toBeUndefined();
    expect(headers['access-control-allow-origin']).toBeUndefined();
  }
});

test('drops a key that reaches for the prototype', async () => {
  await json('{"__proto__":{"polluted":1},"constructor":{"prototype":{"polluted":1}},"name":"Proto","kind":"star"}');
  expect(({} as { polluted?: number }).polluted).toBeUndefined();
  expect((await json('{"__proto__":{"name":"Inherited","kind":"star"}}')).status).toBe(400);
});

test('does not answer hostile bodies with anything but 2xx and 4xx', async () => {
  const values = [
    'null',
    '0',
    '-0',
    '1e400',
    '"\\u0000"',
    '"\\ud800"',
    '[[[[[[[[[[[[[[[[[[[[[[]]]]]]]]]]]]]]]]]]]]]]',
    '{"constructor":{"prototype":1}}',
    'true',
    '""',
  ];
  const fields = ['name', 'kind', 'raDeg', 'decDeg', 'notes', 'constructor', 'toString'];
  for (const field of fields) {
    for (const value of values) {
      const { status } = await json(`{"name":"Hostile ${field} ${values.indexOf(value)}","kind":"star","${field}":${value}}`);
      expect({ field, value, status }).toMatchObject({ status: expect.any(Number) as number });
      expect({ field, value, fine: status < 500 }).toEqual({ field, value, fine: true });
    }
  }
});
