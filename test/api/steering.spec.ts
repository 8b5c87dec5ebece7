import {
  apiPaths,
  completeSettings,
  type AnalysisRecipe,
  type AnalysisRun,
  type Feature,
  type Identification,
  type UnplacedDecision,
} from '@foreveil/shared';
import { SODIUM, analysisOf, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Person, type Team } from '../support/api/person.js';
import { stored } from '../support/api/spectra.js';

let api: Api;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());

const seen = (version: number) => ({ 'If-Match': `"${version}"` });

describe('a recipe', () => {
  let team: Team;
  const all = () => apiPaths.analysisRecipes(team.programmeId);
  const one = ({ id }: AnalysisRecipe) => apiPaths.analysisRecipe(team.programmeId, id);
  const make = async (name: string, settings: object = {}) =>
    (await team.analyst.post(all(), { name, settings }).expect(201)).body as AnalysisRecipe;
  beforeEach(async () => {
    team = await makeTeam(api);
  });

  test('keeps settings under a name, and says who made and changed it', async () => {
    const settings = { maskedRegions: [{ fromNm: 686, toNm: 695 }], falseFeatures: 1 };
    const made = await make(' Red  arm ', settings);
    expect(made).toMatchObject({ name: 'Red  arm', settings, version: 1, createdBy: team.analyst.name, changedBy: team.analyst.name });
    const changed = await team.lead.patch(one(made), { name: 'Red arm' }, seen(1)).expect(200);
    expect(changed.headers['etag']).toBe('"2"');
    expect(changed.body).toMatchObject({ name: 'Red arm', settings, version: 2, createdBy: team.analyst.name, changedBy: team.lead.name });
    await make('another');
    expect(((await team.reader.get(all())).body as AnalysisRecipe[]).map(({ name }) => name)).toEqual(['another', 'Red arm']);
    const trail = await api.db('audit').where({ programme_id: team.programmeId }).whereLike('action', 'analysis_recipe_%').orderBy('id');
    expect(trail.map(({ action }: { action: string }) => action)).toEqual([
      'analysis_recipe_created',
      'analysis_recipe_changed',
      'analysis_recipe_created',
    ]);
  });

  test('has a name of its own in the programme, whatever the capitals', async () => {
    const first = await make('Hot stars');
    const other = await make('Cool stars');
    expect((await team.lead.post(all(), { name: 'HOT stars', settings: {} }).expect(409)).body).toMatchObject({ code: 'name_taken' });
    expect((await team.lead.patch(one(other), { name: 'hot Stars' }, seen(1)).expect(409)).body).toMatchObject({ code: 'name_taken' });
    await team.lead.patch(one(first), { name: 'hot stars' }, seen(1)).expect(200);
  });

  test('takes no settings that an analysis would not take', async () => {
    const bad = { maskedRegions: [{ fromNm: 5, toNm: 4 }] };
    const { body } = await team.analyst.post(all(), { name: 'Odd', settings: bad }).expect(400);
    expect(body).toMatchObject({ code: 'invalid_request', errors: [{ pointer: '/settings/maskedRegions/0/toNm' }] });
    const recipe = await make('Even');
    await team.analyst.patch(one(recipe), { settings: { colour: 'green' } }, seen(1)).expect(400);
    await team.analyst.post(all(), { name: '', settings: {} }).expect(400);
    await team.analyst.post(all(), { name: 'No settings' }).expect(400);
  });

  test('is changed and deleted only by who saw its present version', async () => {
    const recipe = await make('Shared');
    await team.analyst.patch(one(recipe), { settings: { falseFeatures: 2 } }, seen(1)).expect(200);
    const stale = await team.lead.patch(one(recipe), { settings: { falseFeatures: 3 } }, seen(1)).expect(412);
    expect(stale.body).toMatchObject({ code: 'stale_version', current: { version: 2, settings: { falseFeatures: 2 } } });
    await team.lead.delete(one(recipe), undefined, seen(1)).expect(412);
    await team.lead.delete(one(recipe)).expect(428);
    await team.lead.delete(one(recipe), undefined, seen(2)).expect(204);
    await team.lead.delete(one(recipe), undefined, seen(2)).expect(404);
    expect((await team.reader.get(all())).body).toEqual([]);
  });

  test('that changes or goes leaves the runs made with it as they are', async () => {
    const spectrum = await stored(api, team);
    await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
    const recipe = await make('Once', { falseFeatures: 7 });
    const runs = apiPaths.analyses(team.programmeId, spectrum.id);
    await team.analyst.post(runs, { settings: recipe.settings }).expect(201);
    await team.analyst.delete(one(recipe), undefined, seen(1)).expect(204);
    const [newest, first] = (await team.reader.get(runs)).body as AnalysisRun[];
    expect(newest!.settings).toEqual(completeSettings({ falseFeatures: 7 }));
    expect(first!.settings).toEqual(completeSettings({}));
  });
});

describe('a decision whose feature a new analysis does not find', () => {
  interface Stage {
    readonly team: Team;
    readonly spectrumId: string;
    readonly analysisId: string;
    readonly decision: Identification;
  }

  async function decided(person: (team: Team) => Person, action: string): Promise<Omit<Stage, 'analysisId'>> {
    const team = await makeTeam(api);
    const spectrum = await stored(api, team);
    await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
    const path = apiPaths.decide(team.programmeId, spectrum.analysis!.id, 0);
    const { body } = await person(team).post(path, { action, lineId: SODIUM.lineId, systemId: 'cloud1' }, seen(0)).expect(200);
    return { team, spectrumId: spectrum.id, decision: body as Identification };
  }

  async function rerun({ team, spectrumId }: { team: Team; spectrumId: string }, features: readonly Feature[]): Promise<string> {
    const { body } = await team.analyst.post(apiPaths.analyses(team.programmeId, spectrumId), {}).expect(201);
    const { id } = body as { id: string };
    await complete(api, id, analysisOf(features));
    return id;
  }

  async function lost(features: readonly Feature[], person = (team: Team) => team.reviewer, action = 'accept'): Promise<Stage> {
    const stage = await decided(person, action);
    return { ...stage, analysisId: await rerun(stage, features) };
  }

  const unplaced = async ({ team, spectrumId }: { team: Team; spectrumId: string }) =>
    (await team.reader.get(apiPaths.unplacedDecisions(team.programmeId, spectrumId)).expect(200)).body as UnplacedDecision[];
  const place = (person: Person, { team, analysisId, decision }: Stage, featureIndex: number, version = 1) =>
    person.post(apiPaths.placeDecision(team.programmeId, decision.id), { analysisId, featureIndex }, seen(version));

  test.each([
    ['shifted by less than half its width', [feature(0, 500.53)], 0],
    ['split in two: the nearer half takes it', [feature(0, 500.47), feature(1, 500.54)], 0],
  ])('is none when the feature was %s', async (_, features, index) => {
    const stage = await lost(features);
    expect(await unplaced(stage)).toEqual([]);
    const [carried] = (await stage.team.reader.get(apiPaths.identifications(stage.team.programmeId, stage.spectrumId)))
      .body as Identification[];
    expect(carried).toMatchObject({ id: stage.decision.id, featureIndex: index, state: 'accepted' });
  });

  test('is listed with what was decided, until it is kept', async () => {
    const stage = await lost([feature(0, 501)]);
    expect(await unplaced(stage)).toEqual([{ identification: { ...stage.decision, featureIndex: null }, kept: null }]);
    await stage.team.analyst.post(apiPaths.keepDecision(stage.team.programmeId, stage.decision.id), {}, seen(1)).expect(200);
    expect(await unplaced(stage)).toMatchObject([{ identification: { id: stage.decision.id }, kept: { by: stage.team.analyst.name } }]);
    await rerun(stage, []); // kept for that analysis: the next one asks anew
    expect(await unplaced(stage)).toMatchObject([{ kept: null }]);
  });

  test('is put on a feature by hand, once, with its facts as they were decided', async () => {
    const stage = await lost([feature(0, 501), feature(1, 502, { kind: 'peak', equivalentWidthNm: -0.05, depth: -0.4 })]);
    expect((await place(stage.team.reviewer, stage, 1).expect(409)).body).toMatchObject({ code: 'bad_transition' }); // a dip is no peak
    await place(stage.team.reviewer, stage, 7).expect(404);
    const placed = await place(stage.team.reviewer, stage, 0).expect(200);
    expect(placed.body).toMatchObject({ featureIndex: 0, version: 2, wavelengthNm: 500.5, state: 'accepted' });
    await place(stage.team.reviewer, stage, 0, 1).expect(412);
    await place(stage.team.reviewer, stage, 0, 2).expect(409); // it has a feature now
    expect(await unplaced(stage)).toEqual([]);
    expect(await api.db('audit').where({ action: 'decision_placed', subject: stage.decision.id })).toHaveLength(1);
  });

  test('is not put where another decision stands, nor on an analysis that is not the current one', async () => {
    const stage = await lost([feature(0, 501)]);
    const path = apiPaths.decide(stage.team.programmeId, stage.analysisId, 0);
    await stage.team.reviewer.post(path, { action: 'reject', lineId: null, systemId: null }, seen(0)).expect(200);
    expect((await place(stage.team.reviewer, stage, 0).expect(409)).body).toMatchObject({
      detail: expect.stringContaining('of its own') as string,
    });
    await rerun(stage, [feature(0, 502)]);
    expect((await place(stage.team.reviewer, stage, 0).expect(409)).body).toMatchObject({
      detail: expect.stringContaining('again') as string,
    });
  });

  test('that was only proposed an analyst may place; what was decided, only a reviewer', async () => {
    const proposed = await lost([feature(0, 501)], (team) => team.analyst, 'propose');
    await place(proposed.team.analyst, proposed, 0).expect(200);
    const accepted = await lost([feature(0, 501)]);
    expect((await place(accepted.team.analyst, accepted, 0).expect(403)).body).toMatchObject({ code: 'forbidden_role' });
  });
});
