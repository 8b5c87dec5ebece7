import {
  apiPaths,
  DEFAULT_COMPARISON_SETTINGS,
  type ComparisonDetail,
  type ComparisonSettings,
  type ComparisonSummary,
  type NewRuling,
  type SpectrumDetail,
  type VerdictRuling,
} from '@foreveil/shared';
import { analysisOf, candidate, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { aComparison, anotherSpectrum, comparedLine, comparisonOf } from '../support/api/comparisons.js';
import { makeTeam, type Person, type Team } from '../support/api/person.js';
import { stored } from '../support/api/spectra.js';
import { startWorker, until } from '../support/api/worker.js';

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

const create = (person: Person, { team, a, b }: Stage, more: object = {}) =>
  person.post(apiPaths.comparisons(team.programmeId), { spectrumA: a.id, spectrumB: b.id, ...more });
const read = async ({ team }: Stage, id: string, person = team.reader) =>
  (await person.get(apiPaths.comparison(team.programmeId, id)).expect(200)).body as ComparisonDetail;
const list = async ({ team }: Stage) =>
  (await team.reader.get(apiPaths.comparisons(team.programmeId)).expect(200)).body as ComparisonSummary[];
const rerun = ({ team }: Stage, from: string, settings: Partial<ComparisonSettings> = {}) =>
  team.analyst.post(apiPaths.comparisonRerun(team.programmeId, from), { settings });

const KEY = comparedLine().key;
const rule = (person: Person, { team }: Stage, id: string, version: number, ruling: Partial<NewRuling> = {}, key = KEY) =>
  person.put(
    apiPaths.comparisonRuling(team.programmeId, id, encodeURIComponent(key)),
    { verdict: 'cannot-tell', remark: 'a line of the star stands there', ...ruling },
    { 'If-Match': `"${version}"` },
  );

test('an analyst asks for a comparison; a worker makes it, and everybody in the programme reads the same', async () => {
  const stage = await makeStage();
  const made = (await create(stage.team.analyst, stage, { settings: { matchKmPerS: 1 } }).expect(201)).body as ComparisonSummary;
  expect(made).toMatchObject({
    ...{ name: 'Star and Other star', phase: 'QUEUED', counts: null, outdated: false, supersededBy: null, version: 1 },
    a: { spectrumId: stage.a.id, targetName: 'Star', analysisId: stage.a.analysis!.id },
    b: { spectrumId: stage.b.id, targetName: 'Other star' },
  });
  const worker = await startWorker(api);
  try {
    await until(
      async () => (await read(stage, made.id)).phase === 'COMPLETED',
      30_000,
      () => worker.log.join(''),
    );
  } finally {
    await worker.end();
  }
  const done = await read(stage, made.id);
  expect(done.settings).toEqual({ ...DEFAULT_COMPARISON_SETTINGS, matchKmPerS: 1 });
  expect(done.result).toMatchObject({ settings: done.settings, a: { frame: 'barycentric' }, lineListVersion: done.lineListVersion });
  expect(Object.values(done.counts!).reduce((sum, n) => sum + n, 0)).toBe(done.result!.lines.length);
  expect((await list(stage)).map(({ id }) => id)).toEqual([made.id]);
  const trail = await api.db('audit').where({ subject: made.id }).pluck('action');
  expect(trail).toEqual(['comparison_requested']);
});

describe('is refused', () => {
  test('a spectrum against itself, one of another programme, and one that was not analysed', async () => {
    const [stage, other] = [await makeStage(), await makeStage()];
    const { team, a } = stage;
    const itself = await team.analyst.post(apiPaths.comparisons(team.programmeId), { spectrumA: a.id, spectrumB: a.id }).expect(400);
    expect(itself.body).toMatchObject({ code: 'invalid_request', errors: [{ pointer: '/spectrumB' }] });
    await team.analyst.post(apiPaths.comparisons(team.programmeId), { spectrumA: a.id, spectrumB: other.b.id }).expect(404);
    const raw = await stored(api, team, 'Fresh');
    const early = await team.analyst.post(apiPaths.comparisons(team.programmeId), { spectrumA: a.id, spectrumB: raw.id }).expect(409);
    expect(early.body).toMatchObject({ code: 'analysis_not_complete' });
  });

  test('settings out of range, and fields that nobody knows', async () => {
    const stage = await makeStage();
    for (const settings of [{ matchKmPerS: 0 }, { offsetAKmPerS: 'x' }, { extraCloudsKmPerS: Array(9).fill(1) }, { colour: 'blue' }])
      await create(stage.team.analyst, stage, { settings }).expect(400);
  });
});

describe('a ruling', () => {
  test('is a reviewer’s: it stands beside the computed verdict, with remark and history, and counts in the summary', async () => {
    const stage = await makeStage();
    const id = await aComparison(api, stage.team, stage.a, stage.b);
    await rule(stage.team.analyst, stage, id, 0).expect(403);
    const first = await rule(stage.team.reviewer, stage, id, 0).expect(200);
    expect(first.headers['etag']).toBe('"1"');
    await rule(stage.team.lead, stage, id, 1, { verdict: null, remark: 'looked again' }).expect(200);
    await rule(stage.team.reviewer, stage, id, 2, { verdict: 'only-a', remark: 'B is too noisy' }).expect(200);
    const { rulings, result, counts } = await read(stage, id);
    expect(rulings).toMatchObject([
      {
        ...{ lineKey: KEY, verdict: 'only-a', remark: 'B is too noisy', by: stage.team.reviewer.name, version: 3 },
        history: [{ verdict: 'cannot-tell' }, { verdict: null, by: stage.team.lead.name }, { verdict: 'only-a' }],
      },
    ]);
    expect(result!.lines[0]!.verdict).toBe('shared');
    expect(counts).toMatchObject({ shared: 0, 'only-a': 1 });
    expect(await api.db('audit').where({ subject: id, action: 'verdict_overruled' }).pluck('user_id')).toHaveLength(3);
  });

  test('of two at once, one is kept and the other is shown it', async () => {
    const stage = await makeStage();
    const id = await aComparison(api, stage.team, stage.a, stage.b);
    const answers = await Promise.all([
      rule(stage.team.reviewer, stage, id, 0, { verdict: 'only-a' }),
      rule(stage.team.lead, stage, id, 0, { verdict: 'only-b' }),
    ]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412]);
    const kept = answers.find(({ status }) => status === 200)!.body as VerdictRuling;
    const refused = answers.find(({ status }) => status === 412)!.body as { code: string; current: VerdictRuling };
    expect(refused).toMatchObject({ code: 'stale_version', current: { verdict: kept.verdict, version: 1 } });
  });

  test('needs a remark, a verdict there is, the version seen and a line of this comparison', async () => {
    const stage = await makeStage();
    const id = await aComparison(api, stage.team, stage.a, stage.b);
    const { reviewer } = stage.team;
    await rule(reviewer, stage, id, 0, { remark: '  ' }).expect(400);
    await rule(reviewer, stage, id, 0, { verdict: 'maybe' as never }).expect(400);
    await rule(reviewer, stage, id, 0, {}, 'FeI-1 cloud9').expect(404);
    const path = apiPaths.comparisonRuling(stage.team.programmeId, id, encodeURIComponent(KEY));
    await reviewer.put(path, { verdict: null, remark: 'x' }).expect(428);
  });

  test('cannot be changed in its history, by nobody', async () => {
    const stage = await makeStage();
    const id = await aComparison(api, stage.team, stage.a, stage.b);
    await rule(stage.team.reviewer, stage, id, 0).expect(200);
    await expect(api.db('verdict_ruling_events').where({ comparison_id: id }).update({ remark: '' })).rejects.toThrow(/only grows/);
  });
});

test('a re-run is a new comparison: the old address stays, the list shows the new one, a second re-run of the old one is refused', async () => {
  const stage = await makeStage();
  const id = await aComparison(api, stage.team, stage.a, stage.b);
  const next = (await rerun(stage, id, { offsetBKmPerS: 2 }).expect(201)).body as ComparisonSummary;
  expect(next.id).not.toBe(id);
  expect(await read(stage, next.id)).toMatchObject({ settings: { offsetBKmPerS: 2 }, phase: 'QUEUED', name: 'Star and other star' });
  expect((await read(stage, id)).supersededBy).toBe(next.id);
  expect((await list(stage)).map((c) => c.id)).toEqual([next.id]);
  expect((await rerun(stage, id, { offsetBKmPerS: 2 }).expect(409)).body).toMatchObject({ code: 'bad_transition' });
  expect((await rerun(stage, next.id).expect(409)).body).toMatchObject({ code: 'bad_transition' }); // still at work
});

test('a re-run keeps the rulings whose lines still stand, with who ruled and why, and leaves the others with the old one', async () => {
  const stage = await makeStage();
  const { team } = stage;
  const again = await team.analyst.post(apiPaths.analyses(team.programmeId, stage.a.id), {}).expect(201);
  const ofStar = candidate({ lineId: 'star line', restNm: 500.5, family: 'stellar' });
  await complete(api, (again.body as { id: string }).id, analysisOf([feature(0, 500.5, { candidates: [ofStar] })]));
  const id = await aComparison(api, team, stage.a, stage.b);
  const first = (await rerun(stage, id).expect(201)).body as ComparisonSummary;
  const worker = await startWorker(api);
  const done = (wanted: string) =>
    until(
      async () => (await read(stage, wanted)).phase === 'COMPLETED',
      60_000,
      () => worker.log.join(''),
    );
  try {
    await done(first.id);
    const stands = (await read(stage, first.id)).result!.lines[0]!;
    const gone = comparedLine({ key: 'gone cloud9', lineId: 'gone' });
    await api
      .db('comparisons')
      .where({ id: first.id })
      .update({ result: JSON.stringify(comparisonOf([stands, gone])) });
    const [moved] = await Promise.all([
      rule(team.reviewer, stage, first.id, 0, { verdict: 'cannot-tell', remark: 'blended' }, stands.key).expect(200),
      rule(team.lead, stage, first.id, 0, { verdict: 'only-b', remark: 'of a cloud that will go' }, gone.key).expect(200),
    ]);
    const second = (await rerun(stage, first.id).expect(201)).body as ComparisonSummary;
    await done(second.id);
    const { rulings, result } = await read(stage, second.id);
    const ruled = moved.body as VerdictRuling;
    expect(rulings).toMatchObject([
      {
        lineKey: stands.key,
        verdict: 'cannot-tell',
        remark: 'blended',
        by: team.reviewer.name,
        at: ruled.at,
        history: [{ remark: 'blended' }],
      },
    ]);
    expect(result!.lines.map((l) => l.key)).toContain(stands.key);
    expect((await read(stage, first.id)).rulings).toHaveLength(2);
  } finally {
    await worker.end();
  }
}, 180_000);

test('is called outdated once one of its spectra has a newer analysis', async () => {
  const stage = await makeStage();
  const id = await aComparison(api, stage.team, stage.a, stage.b);
  const again = await stage.team.analyst.post(apiPaths.analyses(stage.team.programmeId, stage.a.id), {}).expect(201);
  await complete(api, (again.body as { id: string }).id, analysisOf([feature(0, 500.5)]));
  expect((await read(stage, id)).outdated).toBe(true);
});

test('is deleted by who asked for it or by a reviewer, with the version seen', async () => {
  const stage = await makeStage();
  const { team } = stage;
  const own = await aComparison(api, team, stage.a, stage.b);
  const others = await aComparison(api, team, stage.a, stage.b, { by: team.lead });
  const remove = (person: Person, id: string, version = 1) =>
    person.delete(apiPaths.comparison(team.programmeId, id), undefined, { 'If-Match': `"${version}"` });
  expect((await remove(team.analyst, others).expect(403)).body).toMatchObject({ code: 'forbidden_role' });
  await remove(team.analyst, own, 7).expect(412);
  await rule(team.reviewer, stage, own, 0).expect(200);
  await remove(team.analyst, own).expect(204);
  await remove(team.reviewer, others).expect(204);
  expect(await list(stage)).toEqual([]);
  await team.reader.get(apiPaths.comparison(team.programmeId, own)).expect(404);
});

test('goes out as a table that says what it is, whose verdicts stand, and what was assumed', async () => {
  const stage = await makeStage();
  const odd = comparedLine({ key: 'DIB-1 cloud1', species: '=DIB', verdict: 'cannot-tell', b: null, ratio: null, ratioSigma: null });
  const result = { ...comparisonOf([comparedLine(), odd]), cautions: ['The velocity frame of B is unknown.'] };
  const id = await aComparison(api, stage.team, stage.a, stage.b, { result });
  await rule(stage.team.reviewer, stage, id, 0, { verdict: 'only-a', remark: 'B is "noisy"' }).expect(200);
  const answer = await stage.team.reader.get(apiPaths.comparisonReport(stage.team.programmeId, id)).expect(200);
  expect(answer.headers['content-type']).toMatch(/text\/csv/);
  expect(answer.headers['content-disposition']).toMatch(/Star and other star\.csv/);
  const lines = answer.text.trim().split('\r\n');
  expect(lines).toContain('# caution: The velocity frame of B is unknown.');
  const [names, ...rows] = lines.filter((l) => !l.startsWith('#')).map((l) => l.split(','));
  const cell = (row: number, name: string) => rows[row]![names!.indexOf(name)];
  expect(rows).toHaveLength(2);
  expect([cell(0, 'verdict'), cell(0, 'verdict_by'), cell(0, 'computed_verdict')]).toEqual(['only-a', stage.team.reviewer.name, 'shared']);
  expect([cell(0, 'a_ew_pm'), cell(0, 'a_ew_err_pm'), cell(0, 'b_ew_limit_2sigma_pm')]).toEqual(['12.40', '0.40', '0.8']);
  expect([cell(1, 'species'), cell(1, 'b_ew_pm')]).toEqual(["'=DIB", '']);
});
