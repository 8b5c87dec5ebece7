import { apiPaths, type Problem, type ReadingRecipe } from '@foreveil/shared';
import { startApi, type Api } from '../support/api/api.js';
import { A_SIGNATURE } from '../support/api/calls/files.js';
import { makeTeam, type Team } from '../support/api/person.js';

let api: Api;
let team: Team;
beforeAll(async () => {
  api = await startApi();
});
beforeEach(async () => {
  team = await makeTeam(api);
});
afterAll(() => api.close());

const wanted = { name: ' Old plates ', signature: A_SIGNATURE, corrections: { medium: 'air', axisUnit: 'angstrom' } as const };
const path = () => apiPaths.recipes(team.programmeId);
const make = async (changes: object = {}) => (await team.analyst.post(path(), { ...wanted, ...changes })).body as ReadingRecipe;
const list = async () => (await team.reader.get(path())).body as ReadingRecipe[];
const trail = () => api.db('audit').where({ programme_id: team.programmeId }).orderBy('id').pluck('action');

describe('a reading recipe', () => {
  test('keeps what an analyst corrects under a name that the team sees', async () => {
    const answer = await team.analyst.post(path(), wanted);
    expect(answer.status).toBe(201);
    expect(answer.headers.etag).toBe('"1"');
    const recipe = answer.body as ReadingRecipe;
    expect(recipe).toMatchObject({ name: 'Old plates', signature: A_SIGNATURE, corrections: wanted.corrections, version: 1 });
    expect([recipe.createdBy, recipe.changedBy]).toEqual([team.analyst.name, team.analyst.name]);
    expect(await list()).toEqual([recipe]);
    expect(await trail()).toEqual(['recipe_created']);
  });

  test('is renamed, and replaced by what another person found better; who did it is kept', async () => {
    const { id } = await make();
    const answer = await team.lead.patch(
      apiPaths.recipe(team.programmeId, id),
      { name: 'Plates', corrections: { medium: 'vacuum' } },
      { 'If-Match': '"1"' },
    );
    expect(answer.status).toBe(200);
    expect(answer.body).toMatchObject({ name: 'Plates', corrections: { medium: 'vacuum' }, version: 2, signature: A_SIGNATURE });
    expect(answer.body).toMatchObject({ createdBy: team.analyst.name, changedBy: team.lead.name });
    expect(await trail()).toEqual(['recipe_created', 'recipe_changed']);
  });

  test('of two who change it at once only one does; the other is shown what it is now', async () => {
    const { id } = await make();
    const change = (name: string) => team.analyst.patch(apiPaths.recipe(team.programmeId, id), { name }, { 'If-Match': '"1"' });
    const answers = await Promise.all([change('One'), change('Two')]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412]);
    const [now] = await list();
    expect((answers.find(({ status }) => status === 412)!.body as Problem).current).toMatchObject({ name: now!.name, version: 2 });
  });

  test('is deleted by who saw its present version, and by nobody else', async () => {
    const { id } = await make();
    const remove = (version: string) => team.analyst.delete(apiPaths.recipe(team.programmeId, id), undefined, { 'If-Match': version });
    expect((await remove('"7"')).status).toBe(412);
    expect((await team.analyst.delete(apiPaths.recipe(team.programmeId, id))).status).toBe(428);
    expect((await remove('"1"')).status).toBe(204);
    expect(await list()).toEqual([]);
    expect((await remove('"1"')).status).toBe(404);
    expect(await trail()).toEqual(['recipe_created', 'recipe_deleted']);
  });

  test('has a name of its own, whatever its capitals', async () => {
    await make();
    const answer = await team.analyst.post(path(), { ...wanted, name: 'OLD PLATES' });
    expect(answer.status).toBe(409);
    expect((answer.body as Problem).code).toBe('name_taken');
    const { id } = await make({ name: 'Other' });
    const renamed = await team.analyst.patch(apiPaths.recipe(team.programmeId, id), { name: 'old plates' }, { 'If-Match': '"1"' });
    expect(renamed.status).toBe(409);
  });

  test('is not seen, changed or deleted from another programme', async () => {
    const { id } = await make();
    const others = await makeTeam(api);
    const there = apiPaths.recipe(others.programmeId, id);
    expect((await others.lead.patch(there, { name: 'Mine' }, { 'If-Match': '"1"' })).status).toBe(404);
    expect((await others.lead.delete(there, undefined, { 'If-Match': '"1"' })).status).toBe(404);
    expect((await others.lead.get(apiPaths.recipes(others.programmeId))).body).toEqual([]);
    expect(await list()).toHaveLength(1);
  });

  const wrong: [string, object, string][] = [
    ['without a name', { name: '  ' }, '/name'],
    ['for a format that is none', { signature: { ...A_SIGNATURE, format: 'picture' } }, '/signature/format'],
    ['with a medium that is none', { corrections: { medium: 'water' } }, '/corrections/medium'],
    [
      'with a latitude beyond the pole',
      { corrections: { site: { latitudeDeg: 91, longitudeDegEast: 0, heightM: 0 } } },
      '/corrections/site/latitudeDeg',
    ],
    ['with what is not known', { corrections: { shift: 3 } }, '/corrections/shift'],
    ['that sets its own author', { createdBy: 'me' }, '/createdBy'],
  ];
  test.each(wrong)('%s: is refused at its place', async (_, changes, pointer) => {
    const answer = await team.analyst.post(path(), { ...wanted, ...changes });
    expect(answer.status).toBe(400);
    expect((answer.body as Problem).errors!.map((error) => error.pointer)).toContain(pointer);
    expect(await list()).toEqual([]);
  });
});
