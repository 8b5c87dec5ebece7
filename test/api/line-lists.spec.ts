import {
  apiPaths,
  type AnalysisSummary,
  type Line,
  type LineListAnswer,
  type LineListChanges,
  type LineListDetail,
  type LineListSummary,
  type NewLineList,
  type Page,
  type Problem,
} from '@foreveil/shared';
import { analysisOf, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Person, type Team } from '../support/api/person.js';
import { stored } from '../support/api/spectra.js';

let api: Api;
let team: Team;
beforeAll(async () => {
  api = await startApi();
});
beforeEach(async () => {
  team = await makeTeam(api);
});
afterAll(() => api.close());

const HEAD = 'id,species,wavelength_vac [nm],e_low [cm-1],log_gf,source';
const TWO = [HEAD, 'a,Na I,589.158326,0,0.108,one', 'b,K I,766.700899,0,0.149,two'].join('\n');

const add = (text: string, meta: Partial<NewLineList> = {}, person: Person = team.lead) =>
  person
    .post(apiPaths.programmeLineLists(team.programmeId))
    .field('meta', JSON.stringify({ name: 'Team list', version: '1', ...meta }))
    .attach('file', Buffer.from(text), 'list.csv');
const added = async (text: string, meta: Partial<NewLineList> = {}) =>
  ((await add(text, meta).expect(201)).body as LineListAnswer).list as LineListSummary;
const lines = async (id: string, query = '') =>
  (await team.reader.get(`${apiPaths.linesOfList(team.programmeId, id)}${query}`).expect(200)).body as Page<Line>;

test('a list is first looked at, then stored whole, and belongs to its programme alone', async () => {
  const looked = (await add(TWO, { dryRun: true }).expect(201)).body as LineListAnswer;
  expect(looked).toMatchObject({ list: null, preview: { lines: 2, problemCount: 0, diff: null } });
  expect(looked.preview.first.map(({ species }) => species)).toEqual(['Na I', 'K I']);
  const list = await added(TWO, { citation: 'Our own measurements' });
  expect(list).toMatchObject({
    name: 'Team list',
    version: '1',
    own: true,
    isDefault: false,
    lines: 2,
    archived: false,
    createdBy: team.lead.name,
  });
  const offered = (await team.reader.get(apiPaths.programmeLineLists(team.programmeId)).expect(200)).body as LineListSummary[];
  expect(offered.map(({ own, isDefault }) => [own, isDefault])).toEqual([
    [false, true],
    [true, false],
  ]);
  const others = await makeTeam(api);
  await others.lead.get(apiPaths.programmeLineList(others.programmeId, list.id)).expect(404);
  expect((await others.lead.get(apiPaths.programmeLineLists(others.programmeId))).text).not.toContain(list.id);
  expect((await team.reader.get(apiPaths.lineLists)).text).not.toContain(list.id);
});

test('a list with a fault is not stored, and every fault is named with its row', async () => {
  const text = [HEAD, 'a,Na I,589,0,0,x', 'b,nothing at all,5,0,0,x', 'c,K I,-5,0,0,x'].join('\n');
  const looked = (await add(text, { dryRun: true }).expect(201)).body as LineListAnswer;
  expect(looked.preview.problems.map(({ row }) => row)).toEqual([3, 4]);
  const refused = (await add(text).expect(400)).body as Problem;
  expect(refused.errors?.map(({ pointer }) => pointer)).toEqual(['/file/3', '/file/4']);
  const offered = (await team.lead.get(apiPaths.programmeLineLists(team.programmeId))).body as LineListSummary[];
  expect(offered.filter(({ own }) => own)).toEqual([]);
});

test.each([
  ['no file of text', Buffer.from([1, 0, 2, 0]), {}],
  ['air or vacuum unsaid', 'species,wavelength [nm],source\nNa I,589,x', {}],
  ['a name of nothing', TWO, { name: '  ' }],
  ['a base that is not there', TWO, { baseId: 'x' }],
])('%s is refused', async (_, file, meta) => {
  await add(file as string, meta).expect(400);
});

test('a version is used once, also when asked for twice at once', async () => {
  const answers = await Promise.all(['Team list', 'team LIST'].map((name) => add(TWO, { name })));
  expect(answers.map(({ status }) => status).sort()).toEqual([201, 409]);
  await add(TWO, { name: 'Foreveil default', version: 'ours' }).expect(409);
});

test('an edit makes a new version that tells its difference, and leaves the old one as it was', async () => {
  const first = await added(TWO);
  const edit = [HEAD, 'b,K I,766.7009,0,0.149,two', 'c,Ca II,393.4777,0,0.135,three'].join('\n');
  const answer = (await add(edit, { name: 'ignored', version: '2', baseId: first.id, previousId: first.id, remove: ['a'] }).expect(201))
    .body as LineListAnswer;
  expect(answer.preview.diff!.counts).toEqual({ added: 1, removed: 1, changed: 1, unchanged: 0 });
  expect(answer.preview.diff!.changed[0]).toMatchObject({ after: { id: 'b', wavelengthNm: 766.7009 }, fields: ['wavelengthNm'] });
  const second = answer.list!;
  expect(second).toMatchObject({ name: 'Team list', version: '2', previousId: first.id, lines: 2 });
  const { body } = await team.reader.get(apiPaths.lineListDiff(team.programmeId, second.id, first.id)).expect(200);
  expect((body as LineListChanges).counts).toEqual(answer.preview.diff!.counts);
  expect((await lines(first.id)).rows.map(({ id }) => id)).toEqual(['a', 'b']);
  await expect(api.db('lines').where({ line_list_id: first.id }).update({ source: 'other' })).rejects.toThrow('only grows');
});

test('lines are found by wavelength, species and energy, a page at a time', async () => {
  const rows = Array.from({ length: 250 }, (_, i) => `n${i},${i % 2 ? 'Fe I' : 'Fe II'},${500 + i / 10},${i * 100},0,x`);
  const { id } = await added([HEAD, ...rows].join('\n'));
  const seen: Line[] = [];
  for (let next: string | null = ''; next !== null;) {
    const page: Page<Line> = await lines(id, `?limit=99${next ? `&after=${next}` : ''}`);
    seen.push(...page.rows);
    next = page.next;
  }
  expect(seen.map((line) => line.id)).toEqual(rows.map((_, i) => `n${i}`));
  const ids = async (query: string) => (await lines(id, query)).rows.map((line) => line.id);
  expect(await ids('?fromNm=500.5&toNm=500.7')).toEqual(['n5', 'n6', 'n7']);
  expect(await ids('?species=Fe%20II&toNm=500.3')).toEqual(['n0', 'n2']);
  expect(await ids('?lowerEnergyTo=200')).toEqual(['n0', 'n1', 'n2']);
  await team.reader.get(`${apiPaths.linesOfList(team.programmeId, id)}?fromNm=x`).expect(400);
  await team.reader.get(`${apiPaths.linesOfList(team.programmeId, id)}?after=x`).expect(400);
});

test('a list goes out as it can come in again', async () => {
  const first = await added(TWO);
  const csv = (await team.reader.get(apiPaths.lineListCsv(team.programmeId, first.id)).expect(200)).text;
  const second = await added(csv, { version: '2' });
  const { body } = await team.reader.get(apiPaths.lineListDiff(team.programmeId, second.id, first.id));
  expect((body as LineListChanges).counts).toEqual({ added: 0, removed: 0, changed: 0, unchanged: 2 });
});

test('an analysis uses the list that was chosen, and the list tells what rests on it', async () => {
  const list = await added(TWO);
  const spectrum = await stored(api, team);
  await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
  const again = (await team.analyst.post(apiPaths.analyses(team.programmeId, spectrum.id), { lineListId: list.id }).expect(201))
    .body as AnalysisSummary;
  expect(again).toMatchObject({ lineListName: 'Team list', lineListVersion: '1' });
  await complete(api, again.id, analysisOf([feature(0, 500.5)]));
  const decision = { action: 'accept', lineId: null, systemId: null };
  await team.reviewer.post(apiPaths.decide(team.programmeId, again.id, 0), decision, { 'If-Match': '"0"' }).expect(200);
  const detail = (await team.reader.get(apiPaths.programmeLineList(team.programmeId, list.id)).expect(200)).body as LineListDetail;
  expect(detail).toMatchObject({ analyses: 1, decisions: { accepted: 1, rejected: 0, other: 0 }, fromNm: 589.158326, toNm: 766.700899 });
  expect(detail.species).toEqual([
    { species: 'K I', lines: 1 },
    { species: 'Na I', lines: 1 },
  ]);
});

test('a list that was put away is not offered for analyses, and can be brought back', async () => {
  const list = await added(TWO);
  const spectrum = await stored(api, team);
  await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
  const request = () => team.analyst.post(apiPaths.analyses(team.programmeId, spectrum.id), { lineListId: list.id });
  const away = (await team.lead.put(apiPaths.archiveLineList(team.programmeId, list.id)).expect(200)).body as LineListSummary;
  expect(away.archived).toBe(true);
  await request().expect(409);
  await team.lead.delete(apiPaths.archiveLineList(team.programmeId, list.id)).expect(200);
  await request().expect(201);
  const [shared] = (await team.lead.get(apiPaths.programmeLineLists(team.programmeId))).body as LineListSummary[];
  await team.lead.put(apiPaths.archiveLineList(team.programmeId, shared!.id)).expect(409);
  const strangers = await makeTeam(api);
  const theirs = await stored(api, strangers);
  await complete(api, theirs.analysis!.id, analysisOf([feature(0, 500.5)]));
  await strangers.analyst.post(apiPaths.analyses(strangers.programmeId, theirs.id), { lineListId: list.id }).expect(404);
});
