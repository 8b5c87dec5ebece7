import { apiPaths, roleAllows, type MemberRole } from '@foreveil/shared';
import type { Application } from 'express';
import { allowedMethods } from '../../server/src/common/http/routes.js';
import { analysisOf, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { allCalls, gaps } from '../support/api/calls/all.js';
import type { Call, Stage } from '../support/api/calls/call.js';
import { ROLES, credentialsOf, makeTeam, scriptOf, type Person } from '../support/api/person.js';
import { routeTable, type Route } from '../support/api/route-table.js';
import { stored } from '../support/api/spectra.js';

let api: Api;
let calls: ReadonlyMap<string, Call>;
beforeAll(async () => {
  api = await startApi();
  calls = await allCalls();
});
afterAll(() => api.close());

/** Who asks: every role; a lead whose account is closed; an administrator who is in no programme; scripts with an access token of the lead. */
const SENDERS = [...ROLES, 'closed', 'administrator', 'reading script', 'writing script'] as const;
type Sender = (typeof SENDERS)[number];

/** A programme with everything that requests are made for. */
async function makeStage(): Promise<Stage> {
  const team = await makeTeam(api);
  const spectrum = await stored(api, team);
  await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
  return { api, team, spectrum };
}

/** The person behind a column of the table. */
async function personOf(sender: Sender, { team }: Stage): Promise<Person> {
  if (sender === 'reading script' || sender === 'writing script')
    return scriptOf(api, team.lead, sender === 'reading script' ? 'read' : 'write');
  if (sender === 'administrator') {
    await api.db('users').where({ id: team.outsider.userId }).update({ administrator: true });
    return team.outsider;
  }
  if (sender !== 'closed') return team[sender];
  await api.db('users').where({ id: team.lead.userId }).update({ active: false });
  return team.lead;
}

async function paramsOf(route: Route, stage: Stage, person: Person): Promise<Record<string, string>> {
  const { team, spectrum } = stage;
  const usual = { programmeId: team.programmeId, targetId: spectrum.targetId, spectrumId: spectrum.id, analysisId: spectrum.analysis!.id };
  return { ...usual, featureIndex: '0', ...(await calls.get(route.handler)!.params?.(stage, person)) };
}

const fill = ({ path, handler }: Route, params: Record<string, string>): string =>
  path.replaceAll(/:(\w+)/g, (_, name: string) => {
    if (params[name] === undefined) throw new Error(`:${name} of ${handler} is not known: let \`params\` of its call make one`);
    return params[name];
  });

interface Answer {
  readonly status: number;
  readonly code: string | undefined;
}

async function send(route: Route, person: Person, stage: Stage, path: string): Promise<Answer> {
  const { body, headers, stream } = calls.get(route.handler)!;
  if (stream) return openStream(path, person);
  const sent = typeof body === 'function' ? await body(stage, person) : body;
  const method = route.method.toLowerCase() as 'get' | 'post' | 'patch' | 'put' | 'delete';
  const answer = await (method === 'get' ? person.get(path) : person[method](path, sent, headers));
  return { status: answer.status, code: (answer.body as { code?: string }).code };
}

async function withPerson(sender: Sender): Promise<{ stage: Stage; person: Person }> {
  const stage = await makeStage();
  return { stage, person: await personOf(sender, stage) };
}

/** A stream does not end, so only its beginning is looked at. */
async function openStream(path: string, person: Person): Promise<Answer> {
  const controller = new AbortController();
  const answer = await fetch(`${api.url}${path}`, { headers: credentialsOf(person), signal: controller.signal });
  const code = answer.ok ? undefined : ((await answer.json()) as { code: string }).code;
  controller.abort();
  return { status: answer.status, code };
}

/** What the rule of a route promises to a sender. */
function promised({ rule, handler, method }: Route, sender: Sender): { status: number; code?: string } {
  const success = { status: calls.get(handler)!.success };
  if (rule!.who === 'anyone') return success;
  if (sender === 'anonymous' || sender === 'closed') return { status: 401, code: 'not_signed_in' };
  const byHand = rule!.who === 'session' || rule!.who === 'administrator';
  if (sender.endsWith('script') && byHand) return { status: 403, code: 'needs_session' };
  if (sender === 'reading script' && method !== 'GET') return { status: 403, code: 'token_scope' };
  if (rule!.who === 'administrator') return sender === 'administrator' ? success : { status: 403, code: 'needs_administrator' };
  if (rule!.who !== 'member') return success;
  if (sender === 'outsider' || sender === 'administrator') return { status: 404, code: 'not_found' };
  const role = sender.endsWith('script') ? 'lead' : (sender as MemberRole);
  return roleAllows(role, rule!.least) ? success : { status: 403, code: 'forbidden_role' };
}

test('every route states who may use it, and has a call in this test', () => {
  const routes = routeTable(api);
  expect(routes.length).toBeGreaterThan(20);
  expect(gaps(routes, calls)).toEqual([]);
});

test('says of a new route what has to be added', () => {
  const made = { method: 'GET', path: '/api/made-up/:programmeId', rule: undefined, handler: 'MadeUp.get' };
  expect(gaps([made], new Map([['Gone.get', { success: 200 }]]))).toEqual([
    expect.stringContaining('MadeUp.get states no rule'),
    expect.stringContaining("add a line 'MadeUp.get'"),
    expect.stringContaining('Gone.get is no route any more'),
  ]);
});

test.each(SENDERS)(
  'lets %s use exactly what the rules say',
  async (sender) => {
    const table = routeTable(api).filter(({ handler }) => calls.has(handler));
    const wrong: object[] = [];
    const common = await withPerson(sender);
    for (const route of table) {
      // a programme of its own for every request that changes something, so that none leans on another
      const changes = route.method !== 'GET' && promised(route, sender).code === undefined;
      const { stage, person } = changes ? await withPerson(sender) : common;
      const answer = await send(route, person, stage, fill(route, await paramsOf(route, stage, person)));
      const expected = promised(route, sender);
      const right = answer.status === expected.status && (expected.code === undefined || answer.code === expected.code);
      if (!right) wrong.push({ route: route.handler, answer, expected });
    }
    expect(wrong).toEqual([]);
  },
  240_000,
);

test('shows nobody what belongs to another programme, whatever their role in their own', async () => {
  const [ours, theirs] = [await makeStage(), await makeStage()];
  const routes = routeTable(api).filter(({ path, handler }) => /:programmeId.*:/.test(path) && calls.has(handler));
  expect(routes.length).toBeGreaterThan(10);
  for (const route of routes) {
    // our programme in the path, what is theirs behind it
    const params = { ...(await paramsOf(route, theirs, theirs.team.lead)), programmeId: ours.team.programmeId };
    const answer = await send(route, ours.team.lead, theirs, fill(route, params));
    expect({ route: route.handler, ...answer }).toEqual({ route: route.handler, status: 404, code: 'not_found' });
  }
});

test('counts a change of role from the next request on', async () => {
  const { team } = await makeStage();
  const create = () => team.analyst.post(apiPaths.targets(team.programmeId), { name: 'Late', kind: 'star' });
  await api.db('memberships').where({ user_id: team.analyst.userId }).update({ role: 'reader' });
  expect((await create()).status).toBe(403);
  await api.db('memberships').where({ user_id: team.analyst.userId }).delete();
  expect((await create()).status).toBe(404);
});

test('lives at the addresses that the client calls', () => {
  const called = Object.values(apiPaths)
    .map((path) => (typeof path === 'string' ? path : (path as (...ids: string[]) => string)(':x', ':x', ':x', ':x').split('?')[0]!))
    .map(decodeURIComponent);
  const served = routeTable(api).map(({ path }) => path.replaceAll(/:\w+/g, ':x'));
  expect([...new Set(served)].sort()).toEqual([...new Set(called)].sort());
});

test('describes in OpenAPI exactly the routes there are', () => {
  const described = Object.entries(api.document.paths).flatMap(([path, methods]) =>
    Object.keys(methods).map((method) => `${method.toUpperCase()} ${path.replaceAll(/\{(\w+)\}/g, ':$1')}`),
  );
  expect(described.sort()).toEqual(
    routeTable(api)
      .map(({ method, path }) => `${method} ${path}`)
      .sort(),
  );
});

test('has no route beside those of the controllers', () => {
  const express = api.app.getHttpAdapter().getInstance() as Application;
  const known = new Set(routeTable(api).map(({ path }) => path));
  const stack = (express as unknown as { router: { stack: { route?: { path: string; methods: object } }[] } }).router.stack;
  const others = stack.flatMap(({ route }) =>
    route && Object.keys(route.methods).length === 1 && !known.has(route.path) ? [route.path] : [],
  );
  expect(others.every((path) => /^\/api\/(docs|openapi\.json)/.test(path))).toBe(true);
  expect(allowedMethods(express, '/api/programmes')).toEqual(['GET', 'HEAD', 'POST']);
});
