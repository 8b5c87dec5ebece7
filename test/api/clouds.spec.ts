import { apiPaths, type Cloud, type CloudSummary, type Column, type SightlineComparison, type SpectrumDetail } from '@foreveil/shared';
import { analysisOf, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { aComparison, anotherSpectrum, comparisonOf } from '../support/api/comparisons.js';
import { makeTeam, type Person, type Team } from '../support/api/person.js';
import { stored } from '../support/api/spectra.js';

let api: Api;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());

interface Stage {
  readonly team: Team;
  readonly a: SpectrumDetail;
  readonly b: SpectrumDetail;
}

async function makeStage(): Promise<Stage> {
  const team = await makeTeam(api);
  const a = await stored(api, team);
  await complete(api, a.analysis!.id, analysisOf([feature(0, 500.5)]));
  return { team, a, b: await anotherSpectrum(api, team) };
}

const RANGE = { fromKmPerS: -20, toKmPerS: -5, frame: 'barycentric' };
const create = (person: Person, { team }: Stage, more: object = {}) =>
  person.post(apiPaths.clouds(team.programmeId), { name: 'Near veil', ...RANGE, ...more });
const made = async (stage: Stage, more: object = {}) => (await create(stage.team.analyst, stage, more).expect(201)).body as Cloud;
const read = async ({ team }: Stage, id: string) => (await team.reader.get(apiPaths.cloud(team.programmeId, id)).expect(200)).body as Cloud;
const change = (person: Person, { team }: Stage, id: string, version: number, body: object) =>
  person.patch(apiPaths.cloud(team.programmeId, id), body, { 'If-Match': `"${version}"` });
const trail = (id: string) => api.db('audit').where({ subject: id }).orderBy('id').pluck<string[]>('action');

const column = (logN: number, more: Partial<Column> = {}): Column => ({
  ...{ method: 'apparent-depth', logN, logNSigma: 0.02, apparentLogN: logN, saturated: false, lines: [], sentence: '' },
  ...more,
});
const LIMIT = column(10.4, { method: 'limit', logNSigma: null, apparentLogN: null });

/** A comparison with one cloud at −12.4 km/s: sodium towards both stars, calcium towards A alone. */
function measured(logN: number, changes: Partial<SightlineComparison> = {}): SightlineComparison {
  const result = comparisonOf();
  const columns = [
    { species: 'Na I', a: column(logN), b: column(logN + 0.1), difference: 0.1, differenceSigma: 0.03 },
    { species: 'Ca II', a: column(11), b: LIMIT, difference: null, differenceSigma: null },
    { species: 'K I', a: column(10.8), b: null, difference: null, differenceSigma: null },
  ];
  return { ...result, clouds: result.clouds.map((cloud) => ({ ...cloud, columns })), ...changes };
}

test('is named by an analyst, read by everybody in the programme, and noted in the trail', async () => {
  const stage = await makeStage();
  const cloud = await made(stage, { notes: 'in front of both', spectrumIds: [stage.b.id, stage.a.id] });
  expect(cloud).toMatchObject({ ...RANGE, name: 'Near veil', programmeId: stage.team.programmeId, version: 1, sightlineCount: 2 });
  expect((await read(stage, cloud.id)).sightlines).toMatchObject([
    { spectrumId: stage.b.id, targetName: 'Other star', measured: null },
    { spectrumId: stage.a.id, targetName: 'Star', measured: null },
  ]);
  const list = await stage.team.reader.get(apiPaths.clouds(stage.team.programmeId)).expect(200);
  expect((list.body as CloudSummary[]).map(({ id }) => id)).toEqual([cloud.id]);
  await stage.team.outsider.get(apiPaths.cloud(stage.team.programmeId, cloud.id)).expect(404);
  expect(await trail(cloud.id)).toEqual(['cloud_created']);
});

test('takes its columns from the newest completed comparison with a cloud in its range, each sightline from its own side', async () => {
  const stage = await makeStage();
  const cloud = await made(stage, { spectrumIds: [stage.a.id, stage.b.id] });
  await aComparison(api, stage.team, stage.a, stage.b, { result: measured(11.5) });
  const newer = await aComparison(api, stage.team, stage.b, stage.a, { result: measured(11.9) });
  const [b, a] = (await read(stage, cloud.id)).sightlines;
  expect(b!.measured).toMatchObject({ comparisonId: newer, analysisId: stage.b.analysis!.id, outdated: false });
  expect(b!.measured!.components).toHaveLength(1);
  expect(b!.measured!.components[0]).toMatchObject({ velocityKmPerS: -12.4, velocitySigmaKmPerS: 0.07 });
  expect(b!.measured!.components[0]!.columns.map(({ species, column: c }) => [species, c.method, c.logN])).toEqual([
    ['Na I', 'apparent-depth', 11.9],
    ['Ca II', 'apparent-depth', 11],
    ['K I', 'apparent-depth', 10.8],
  ]);
  expect(a!.measured!.components[0]!.columns.map(({ species, column: c }) => [species, c.method, c.logN])).toEqual([
    ['Na I', 'apparent-depth', 12],
    ['Ca II', 'limit', 10.4],
  ]);
});

test('takes nothing from a comparison outside its range, in another frame, or of a removed spectrum', async () => {
  const stage = await makeStage();
  const { a, b, team } = stage;
  const spectrumIds = [a.id, b.id];
  await aComparison(api, team, a, b, { result: measured(11.5) });
  const inside = await made(stage, { name: 'Inside', spectrumIds });
  const beside = await made(stage, { name: 'Beside', fromKmPerS: -12.3, toKmPerS: 0, spectrumIds });
  const otherFrame = await made(stage, { name: 'Other frame', frame: 'lsrk', spectrumIds });
  const has = async ({ id }: Cloud) => (await read(stage, id)).sightlines.map(({ measured: m }) => m !== null);
  expect(await has(inside)).toEqual([true, true]);
  expect(await has(beside)).toEqual([false, false]);
  expect(await has(otherFrame)).toEqual([false, false]);
  await api.db('spectra').where({ id: b.id }).update({ removed_at: api.db.fn.now(), removed_by: team.lead.userId });
  expect(await has(inside)).toEqual([false]);
  expect(await read(stage, inside.id)).toMatchObject({ sightlineCount: 1 });
  await team.analyst.put(apiPaths.cloudSightline(team.programmeId, inside.id, b.id), {}).expect(404);
});

test('is changed by one of two at once; the other is shown what it is now', async () => {
  const stage = await makeStage();
  const { id } = await made(stage);
  const answers = await Promise.all([
    change(stage.team.analyst, stage, id, 1, { notes: 'one' }),
    change(stage.team.reviewer, stage, id, 1, { notes: 'two' }),
  ]);
  expect(answers.map(({ status }) => status).sort()).toEqual([200, 412]);
  const refused = answers.find(({ status }) => status === 412)!;
  expect(refused.body).toMatchObject({ code: 'stale_version', current: { id, version: 2 } });
  const kept = answers.find(({ status }) => status === 200)!;
  expect(kept.headers['etag']).toBe('"2"');
  expect((await read(stage, id)).notes).toBe((kept.body as Cloud).notes);
  await stage.team.analyst.patch(apiPaths.cloud(stage.team.programmeId, id), { notes: 'x' }).expect(428);
});

test('refuses a range upside down, a name twice whatever its capitals, a frame that moves, and a spectrum of another programme', async () => {
  const [stage, other] = [await makeStage(), await makeStage()];
  const { analyst } = stage.team;
  const { id } = await made(stage);
  const upside = await create(analyst, stage, { name: 'Upside down', fromKmPerS: 5, toKmPerS: 5 }).expect(400);
  expect(upside.body).toMatchObject({ code: 'invalid_request', errors: [{ pointer: '/toKmPerS' }] });
  await change(analyst, stage, id, 1, { fromKmPerS: 0 }).expect(400);
  const twice = await create(analyst, stage, { name: 'NEAR VEIL' }).expect(409);
  expect(twice.body).toMatchObject({ code: 'name_taken' });
  await create(analyst, stage, { name: 'Moving', frame: 'topocentric' }).expect(400);
  await create(analyst, stage, { name: 'Too fast', toKmPerS: 3001 }).expect(400);
  await create(analyst, stage, { name: 'Foreign', spectrumIds: [other.a.id] }).expect(404);
  await made(other);
  const list = await analyst.get(apiPaths.clouds(stage.team.programmeId)).expect(200);
  expect(list.body).toMatchObject([{ id, version: 1 }]);
});

test('gains and loses sightlines, and goes by the hand of a reviewer', async () => {
  const stage = await makeStage();
  const { team, a } = stage;
  const { id } = await made(stage);
  const sightline = apiPaths.cloudSightline(team.programmeId, id, a.id);
  await team.reader.put(sightline, {}).expect(403);
  for (let twice = 0; twice < 2; twice++)
    expect((await team.analyst.put(sightline, {}).expect(200)).body).toMatchObject({ sightlineCount: 1, version: 1 });
  await team.analyst.delete(sightline).expect(204);
  await team.analyst.delete(sightline).expect(404);
  const path = apiPaths.cloud(team.programmeId, id);
  await team.analyst.delete(path, undefined, { 'If-Match': '"1"' }).expect(403);
  await team.reviewer.delete(path, undefined, { 'If-Match': '"2"' }).expect(412);
  await team.reviewer.delete(path, undefined, { 'If-Match': '"1"' }).expect(204);
  await team.reader.get(path).expect(404);
  expect(await trail(id)).toEqual(['cloud_created', 'cloud_sightline_added', 'cloud_sightline_removed', 'cloud_deleted']);
});
