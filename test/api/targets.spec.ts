import { apiPaths, type Problem, type Programme, type ProgrammeSummary, type Target } from '@foreveil/shared';
import { startApi, type Api } from '../support/api/api.js';
import { makePerson, makeTeam, type Team } from '../support/api/person.js';

let api: Api;
let team: Team;
beforeAll(async () => {
  api = await startApi();
});
beforeEach(async () => {
  team = await makeTeam(api);
});
afterAll(() => api.close());

const create = (body: object) => team.analyst.post(apiPaths.targets(team.programmeId), body);
const change = (id: string, version: number, body: object) =>
  team.analyst.patch(apiPaths.target(team.programmeId, id), body, { 'If-Match': `"${version}"` });

test('whoever starts a programme leads it, and nobody else sees it', async () => {
  const [founder, stranger] = [await makePerson(api), await makePerson(api)];
  const made = await founder.post(apiPaths.programmes, { name: ' Dust  lanes ', description: 'Rims.' }).expect(201);
  const programme = made.body as Programme;
  expect(programme).toEqual({
    ...{ id: programme.id, name: 'Dust  lanes', description: 'Rims.', simulated: false, role: 'lead' },
    ...{ targets: 0, spectra: 0, accepted: 0, open: 0, version: 1 },
    members: [{ userId: founder.userId, name: founder.name, role: 'lead' }],
  });
  const { members: _, ...summary } = programme;
  expect((await founder.get(apiPaths.programmes)).body as ProgrammeSummary[]).toEqual([summary]);
  expect((await stranger.get(apiPaths.programmes)).body).toEqual([]);
  await stranger.get(apiPaths.programme(programme.id)).expect(404);
});

test('members see each other by name and role, not by e-mail address', async () => {
  const { body, text } = await team.reader.get(apiPaths.programme(team.programmeId)).expect(200);
  expect((body as Programme).members.map(({ role }) => role).sort()).toEqual(['analyst', 'lead', 'reader', 'reviewer']);
  expect(text).not.toContain('@');
});

test('a target is stored as it was given, and given back the same', async () => {
  const given = { name: 'σ Ori 😀 ΑΒΓ', kind: 'star', raDeg: 0, decDeg: -90, notes: 'first line\nsecond\tline' };
  const made = await create(given).expect(201);
  expect(made.headers['etag']).toBe('"1"');
  expect(made.body).toMatchObject({ ...given, version: 1, simulated: false, accepted: 0, open: 0, spectra: [], identifications: [] });
  const { id } = made.body as Target;
  const read = await team.reader.get(apiPaths.target(team.programmeId, id)).set('If-None-Match', '"1"').expect(200);
  expect(read.body).toEqual(made.body);
});

test('a name is used once in a programme, whatever its capitals, also when asked for twice at once', async () => {
  const answers = await Promise.all(['Tern', 'TERN', 'tern'].map((name) => create({ name, kind: 'star' })));
  expect(answers.map(({ status }) => status).sort()).toEqual([201, 409, 409]);
  const refused = answers.find(({ status }) => status === 409)!.body as Problem;
  expect(refused).toMatchObject({ code: 'name_taken', errors: [{ pointer: '/name' }] });
  const others = await makeTeam(api);
  await others.analyst.post(apiPaths.targets(others.programmeId), { name: 'Tern', kind: 'star' }).expect(201);
});

test('a change names what it changes and the version that was seen', async () => {
  const { id } = (await create({ name: 'Plover', kind: 'star', raDeg: 12.5, notes: 'old' })).body as Target;
  const changed = await change(id, 1, { notes: 'new', raDeg: null }).expect(200);
  expect(changed.body).toMatchObject({ name: 'Plover', kind: 'star', raDeg: null, decDeg: null, notes: 'new', version: 2 });
  expect(changed.headers['etag']).toBe('"2"');
  const stale = await change(id, 1, { notes: 'lost' }).expect(412);
  expect(stale.body).toMatchObject({ code: 'stale_version', current: { id, notes: 'new', version: 2 } });
  await change(id, 2, { name: null }).expect(400);
  await change(id, 2, { version: 9, programmeId: team.programmeId }).expect(400);
  await create({ name: 'Dunlin', kind: 'star' }).expect(201);
  await change(id, 2, { name: 'dunlin' }).expect(409);
  expect((await change(id, 2, { name: 'PLOVER' }).expect(200)).body).toMatchObject({ name: 'PLOVER', version: 3 });
});

test('of ten changes to one version, one is made', async () => {
  const { id } = (await create({ name: 'Knot', kind: 'star' })).body as Target;
  const answers = await Promise.all(Array.from({ length: 10 }, (_, i) => change(id, 1, { notes: `change ${i}` })));
  expect(answers.map(({ status }) => status).sort()).toEqual([200, ...Array<number>(9).fill(412)]);
  const { body } = await team.reader.get(apiPaths.target(team.programmeId, id));
  expect(body).toMatchObject({ version: 2, notes: (answers.find(({ status }) => status === 200)!.body as Target).notes });
});

test('a role that is taken away while a change is on its way either stops it or comes after it', async () => {
  for (let round = 0; round < 10; round++) {
    const fresh = await makeTeam(api);
    const membership = () => api.db('memberships').where({ user_id: fresh.analyst.userId, programme_id: fresh.programmeId });
    const [answer] = await Promise.all([
      fresh.analyst.post(apiPaths.targets(fresh.programmeId), { name: 'Late', kind: 'star' }),
      membership().delete(),
    ]);
    expect([201, 404]).toContain(answer.status);
    const made = await api.db('targets').where({ programme_id: fresh.programmeId });
    expect(made).toHaveLength(answer.status === 201 ? 1 : 0);
  }
});
