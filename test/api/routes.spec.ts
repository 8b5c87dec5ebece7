import { apiPaths, roleAllows, type SpectrumDetail } from '@foreveil/shared';
import type { Application } from 'express';
import { allowedMethods } from '../../server/src/common/http/routes.js';
import { analysisOf, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { ROLES, makeTeam, type Person, type Role, type Team } from '../support/api/person.js';
import { routeTable, type Route } from '../support/api/route-table.js';
import { stored } from '../support/api/spectra.js';

/** What is in the programme that the matrix asks for. */
interface Stage {
  readonly team: Team;
  readonly spectrum: SpectrumDetail;
}

/** A request that succeeds when its sender is allowed to make it, and the status of that success. */
interface Call {
  readonly body?: object;
  readonly headers?: Record<string, string>;
  readonly success: number;
}

/** One for every route; a route without an entry fails the test. */
const CALLS: Record<string, Call> = {
  'AccountsController.signIn': { body: { email: 'nobody@example.org', password: 'wrong on purpose' }, success: 401 },
  'AccountsController.signOut': { success: 204 },
  'AccountsController.me': { success: 200 },
  'ProgrammesController.list': { success: 200 },
  'ProgrammesController.create': { body: { name: 'Another programme' }, success: 201 },
  'ProgrammesController.get': { success: 200 },
  'TargetsController.list': { success: 200 },
  'TargetsController.create': { body: { name: 'to be set', kind: 'star' }, success: 201 },
  'TargetsController.get': { success: 200 },
  'TargetsController.change': { body: { notes: 'seen' }, headers: { 'If-Match': '"1"' }, success: 200 },
  'SpectraController.list': { success: 200 },
  'SpectraController.upload': { success: 400 }, // past the door, then refused for sending no file
  'SpectraController.get': { success: 200 },
  'SpectraController.samples': { success: 200 },
  'SpectraController.original': { success: 200 },
  'LineListsController.list': { success: 200 },
  'AnalysesController.list': { success: 200 },
  'AnalysesController.request': { body: {}, success: 201 },
  'AnalysesController.get': { success: 200 },
  'AnalysesController.cancel': { success: 409 }, // past the door, then refused because it has ended
  'IdentificationsController.list': { success: 200 },
  'IdentificationsController.decide': {
    body: { action: 'propose', lineId: null, systemId: null },
    headers: { 'If-Match': '"0"' },
    success: 200,
  },
  'ReportsController.ofTarget': { success: 200 },
  'ReportsController.ofSpectrum': { success: 200 },
  'EventsController.stream': { success: 200 },
  'HealthController.live': { success: 200 },
  'HealthController.ready': { success: 200 },
};

let api: Api;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());

/** A programme of its own for every request that may change something, so that none leans on another. */
async function makeStage(): Promise<Stage> {
  const team = await makeTeam(api);
  const spectrum = await stored(api, team);
  await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
  return { team, spectrum };
}

const pathOf = ({ path }: Route, { team, spectrum }: Stage): string =>
  path
    .replace(':programmeId', team.programmeId)
    .replace(':targetId', spectrum.targetId)
    .replace(':spectrumId', spectrum.id)
    .replace(':analysisId', spectrum.analysis!.id)
    .replace(':featureIndex', '0');

async function send(route: Route, person: Person, stage: Stage): Promise<{ status: number; code: string | undefined }> {
  const { body, headers } = CALLS[route.handler]!;
  if (route.handler === 'EventsController.stream') return openStream(pathOf(route, stage), person);
  const fresh = route.handler === 'TargetsController.create' ? { ...body, name: `Target of ${person.role}` } : body;
  const answer =
    route.method === 'GET'
      ? await person.get(pathOf(route, stage))
      : await (route.method === 'PATCH' ? person.patch : person.post)(pathOf(route, stage), fresh, headers);
  return { status: answer.status, code: (answer.body as { code?: string }).code };
}

/** A stream does not end, so only its beginning is looked at. */
async function openStream(path: string, person: Person): Promise<{ status: number; code: string | undefined }> {
  const controller = new AbortController();
  const answer = await fetch(`${api.url}${path}`, { headers: { Cookie: person.cookie }, signal: controller.signal });
  const code = answer.ok ? undefined : ((await answer.json()) as { code: string }).code;
  controller.abort();
  return { status: answer.status, code };
}

/** What the rule of a route promises to a role. */
function promised({ rule, handler }: Route, role: Role): { status: number; code?: string } {
  const success = { status: CALLS[handler]!.success };
  if (rule!.who === 'anyone') return success;
  if (role === 'anonymous') return { status: 401, code: 'not_signed_in' };
  if (rule!.who === 'signed_in') return success;
  if (role === 'outsider') return { status: 404, code: 'not_found' };
  return roleAllows(role, rule!.least) ? success : { status: 403, code: 'forbidden_role' };
}

test('every route states who may use it, and has a call in this test', () => {
  const routes = routeTable(api);
  expect(routes.length).toBeGreaterThan(20);
  expect(routes.filter(({ rule }) => !rule)).toEqual([]);
  expect(routes.map(({ handler }) => handler).sort()).toEqual(Object.keys(CALLS).sort());
  // a member's rule needs to know the programme
  expect(routes.filter(({ rule, path }) => rule?.who === 'member' && !path.startsWith('/api/programmes/:programmeId'))).toEqual([]);
});

test.each(ROLES)(
  'lets %s use exactly what the rules say',
  async (role) => {
    for (const route of routeTable(api)) {
      const stage = await makeStage();
      const answer = await send(route, stage.team[role], stage);
      expect({ role, route: route.handler, ...answer }).toMatchObject({ role, route: route.handler, ...promised(route, role) });
    }
  },
  120_000,
);

test('shows nobody what belongs to another programme, whatever their role in their own', async () => {
  const [ours, theirs] = [await makeStage(), await makeStage()];
  const routes = routeTable(api).filter(({ path }) => /:(target|spectrum|analysis)Id/.test(path));
  expect(routes.length).toBeGreaterThan(10);
  for (const route of routes) {
    // our programme in the path, their target, spectrum and analysis behind it
    const mixed: Stage = { team: ours.team, spectrum: theirs.spectrum };
    const answer = await send(route, ours.team.lead, mixed);
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
  const p = ':programmeId';
  const called = Object.values(apiPaths)
    .map((path) => (typeof path === 'string' ? path : (path as (...ids: unknown[]) => string)(p, ':x', 0)))
    .sort();
  const served = routeTable(api).map(({ path }) => path.replace(/:(?!programmeId)\w+Id/, ':x').replace(':featureIndex', '0'));
  expect([...new Set(served)].sort()).toEqual(called);
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
