import {
  apiPaths,
  type Analysis,
  type Decision,
  type Identification,
  type Problem,
  type ProgrammeSummary,
  type Target,
} from '@foreveil/shared';
import { SODIUM, SODIUM_D1, analysisOf, candidate, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Person, type Team } from '../support/api/person.js';
import { stored } from '../support/api/spectra.js';

let api: Api;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());

/** A spectrum with a complete analysis of three features, and how people decide on them. */
interface Stage {
  readonly team: Team;
  readonly spectrumId: string;
  readonly targetId: string;
  readonly analysisId: string;
}
const FEATURES = [
  feature(0, 500.5),
  feature(1, 501.5, { unidentifiedProbability: 0.4 }),
  feature(2, 503, { candidates: [], unidentifiedProbability: 1 }),
];

async function makeStage(analysis: Analysis = analysisOf(FEATURES)): Promise<Stage> {
  const team = await makeTeam(api);
  const spectrum = await stored(api, team);
  await complete(api, spectrum.analysis!.id, analysis);
  return { team, spectrumId: spectrum.id, targetId: spectrum.targetId, analysisId: spectrum.analysis!.id };
}

const ACCEPT: Decision = { action: 'accept', lineId: SODIUM.lineId, systemId: 'cloud1' };

const decide = (person: Person, { team, analysisId }: Stage, index: number, version: number, decision: Partial<Decision> = {}) =>
  person.post(apiPaths.decide(team.programmeId, analysisId, index), { ...ACCEPT, ...decision }, { 'If-Match': `"${version}"` });

const identifications = async ({ team, spectrumId }: Stage) =>
  (await team.reader.get(apiPaths.identifications(team.programmeId, spectrumId))).body as Identification[];

/** Asks for another analysis of the spectrum and completes it. */
async function again({ team, spectrumId }: Stage, analysis: Analysis): Promise<string> {
  const { body } = await team.analyst.post(apiPaths.analyses(team.programmeId, spectrumId), {}).expect(201);
  await complete(api, (body as { id: string }).id, analysis);
  return (body as { id: string }).id;
}

test('a first decision is version 1 and carries the feature, the line and who, when and why', async () => {
  const stage = await makeStage();
  const answer = await decide(stage.team.reviewer, stage, 0, 0, { remark: '  both lines of the doublet agree ' }).expect(200);
  expect(answer.headers['etag']).toBe('"1"');
  const made = answer.body as Identification;
  expect(made).toMatchObject({
    ...SODIUM,
    ...{ targetId: stage.targetId, spectrumId: stage.spectrumId, spectrumLabel: 'star', featureIndex: 0, kind: 'dip' },
    ...{ wavelengthNm: 500.5, wavelengthSigmaNm: 0.0004, equivalentWidthNm: 0.05, equivalentWidthSigmaNm: 0.0012, fwhmNm: 0.12 },
    ...{ family: 'interstellar', systemId: 'cloud1', velocityKmPerS: -12.5, velocitySigmaKmPerS: 0.2, probability: 0.97 },
    ...{ state: 'accepted', version: 1, decidedBy: stage.team.reviewer.name },
  });
  expect(made.lineSource).toMatch(/NIST/);
  expect(made.history).toMatchObject([
    {
      ...{ by: stage.team.reviewer.name, action: 'accept', from: 'proposed', to: 'accepted' },
      ...{ reading: 'Na I 589.1583 nm, interstellar', remark: 'both lines of the doublet agree' },
    },
  ]);
  expect(await identifications(stage)).toEqual([made]);
  const target = (await stage.team.reader.get(apiPaths.target(stage.team.programmeId, stage.targetId))).body as Target;
  expect(target).toMatchObject({ accepted: 1, rejected: 0, open: 2, identifications: [made] });
  const programme = (await stage.team.reader.get(apiPaths.programme(stage.team.programmeId))).body as ProgrammeSummary;
  expect(programme).toMatchObject({ accepted: 1, open: 2, targets: 1, spectra: 1 });
});

test('only one of two reviewers decides the same version; the other is shown what is now', async () => {
  const stage = await makeStage();
  for (const round of [0, 1, 2]) {
    const answers = await Promise.all([
      decide(stage.team.reviewer, stage, round, 0),
      decide(stage.team.lead, stage, round, 0, { action: 'reject', lineId: null, systemId: null }),
    ]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412]);
    const [won, lost] = answers[0].status === 200 ? answers : [answers[1], answers[0]];
    expect(lost.body).toMatchObject({ code: 'stale_version' });
    expect((lost.body as Problem).current).toEqual(won.body);
    expect(await identifications(stage)).toHaveLength(round + 1);
  }
});

test('no decision is lost and none counted twice when eight people decide at once', async () => {
  const stage = await makeStage();
  const ROUNDS = 3;
  const insist = async (person: Person): Promise<void> => {
    for (let done = 0, version = 0; done < ROUNDS;) {
      const answer = await decide(person, stage, 0, version, { action: 'propose', remark: `${done}` });
      if (answer.status === 200) done++;
      else expect(answer.status).toBe(412);
      version =
        answer.status === 200 ? (answer.body as Identification).version : ((answer.body as Problem).current as Identification).version;
    }
  };
  const { analyst, reviewer, lead } = stage.team;
  await Promise.all([analyst, reviewer, lead, analyst, reviewer, lead, analyst, reviewer].map(insist));
  const [made] = await identifications(stage);
  expect(made!.version).toBe(8 * ROUNDS);
  expect(made!.history).toHaveLength(8 * ROUNDS);
});

test('an analyst proposes, and no more', async () => {
  const stage = await makeStage();
  await decide(stage.team.analyst, stage, 0, 0, { action: 'propose' }).expect(200);
  for (const action of ['accept', 'reject', 'reopen'] as const) {
    const answer = await decide(stage.team.analyst, stage, 0, 1, { action }).expect(403);
    expect(answer.body).toMatchObject({ code: 'forbidden_role', detail: 'This needs the role reviewer; yours is analyst.' });
  }
  expect((await identifications(stage))[0]).toMatchObject({ state: 'proposed', version: 1 });
});

test('a decided line changes only by being reopened', async () => {
  const stage = await makeStage();
  await decide(stage.team.reviewer, stage, 0, 0, { action: 'reopen' }).expect(409);
  await decide(stage.team.reviewer, stage, 0, 0).expect(200);
  for (const action of ['accept', 'reject', 'propose'] as const) {
    const answer = await decide(stage.team.reviewer, stage, 0, 1, { action, lineId: SODIUM_D1.lineId }).expect(409);
    expect(answer.body).toMatchObject({ code: 'bad_transition', current: { state: 'accepted', version: 1, lineId: SODIUM.lineId } });
  }
  const reopened = await decide(stage.team.reviewer, stage, 0, 1, { action: 'reopen', lineId: null, systemId: null }).expect(200);
  expect(reopened.body).toMatchObject({ state: 'proposed', version: 2, lineId: SODIUM.lineId }); // reopening keeps the reading
  const other = await decide(stage.team.lead, stage, 0, 2, { lineId: SODIUM_D1.lineId, systemId: null, remark: 'the other one' }).expect(
    200,
  );
  expect(other.body).toMatchObject({
    ...SODIUM_D1,
    state: 'accepted',
    version: 3,
    velocityKmPerS: 30,
    probability: 0.02,
    decidedBy: stage.team.lead.name,
  });
  const { history } = other.body as Identification;
  expect(history.map(({ action, from, to }) => [action, from, to])).toEqual([
    ['accept', 'proposed', 'accepted'],
    ['reopen', 'accepted', 'proposed'],
    ['accept', 'proposed', 'accepted'],
  ]);
});

test('a feature can be agreed to be unidentified', async () => {
  const stage = await makeStage();
  const answer = await decide(stage.team.reviewer, stage, 1, 0, { lineId: null, systemId: null }).expect(200);
  expect(answer.body).toMatchObject({
    ...{ lineId: null, species: null, restNm: null, lineSource: null, family: null, systemId: null },
    ...{ velocityKmPerS: null, velocitySigmaKmPerS: null, probability: 0.4, state: 'accepted' },
    history: [{ reading: 'unidentified' }],
  });
});

test('a line that the analysis did not list can be chosen from the line list', async () => {
  const stage = await makeStage();
  const answer = await decide(stage.team.reviewer, stage, 2, 0, { lineId: SODIUM.lineId, systemId: 'cloud1' }).expect(200);
  const made = answer.body as Identification;
  expect(made).toMatchObject({ ...SODIUM, family: 'interstellar', systemId: 'cloud1', probability: 0 });
  // relativistic Doppler velocity of 503 nm seen for 589.158325 nm, computed here by hand
  const q = (503 / SODIUM.restNm) ** 2;
  expect(made.velocityKmPerS).toBeCloseTo((299_792.458 * (q - 1)) / (q + 1), 6);
  expect(made.velocitySigmaKmPerS).toBeCloseTo((299_792.458 * 0.0004) / 503, 9);
});

test('what is no line, no system, no feature or no remark is refused', async () => {
  const stage = await makeStage();
  const { reviewer } = stage.team;
  const pointers = async (decision: Record<string, unknown>) => {
    const answer = await decide(reviewer, stage, 2, 0, decision as Partial<Decision>);
    return [answer.status, (answer.body as Problem).errors?.map(({ pointer }) => pointer)];
  };
  expect(await pointers({ lineId: 'XxI-1' })).toEqual([400, ['/lineId']]);
  expect(await pointers({ systemId: 'cloud9' })).toEqual([400, ['/systemId']]);
  expect(await pointers({ lineId: undefined })).toEqual([400, ['/lineId', '/lineId']]);
  expect(await pointers({ action: 'approve' })).toEqual([400, ['/action']]);
  expect(await pointers({ remark: 'x'.repeat(2001) })).toEqual([400, ['/remark']]);
  expect(await pointers({ remark: null })).toEqual([400, expect.arrayContaining(['/remark'])]);
  expect(await pointers({ state: 'accepted', version: 7, decidedBy: 'me' })).toEqual([400, ['/state', '/version', '/decidedBy']]);
  for (const index of [3, -1, 1.5, Number.NaN]) await decide(reviewer, stage, index, 0).expect(404);
  expect(await identifications(stage)).toEqual([]);
});

test('a version must be named, and be the one that is', async () => {
  const stage = await makeStage();
  const { reviewer, programmeId } = { ...stage.team };
  const path = apiPaths.decide(programmeId, stage.analysisId, 0);
  expect((await reviewer.post(path, ACCEPT)).body).toMatchObject({ status: 428, code: 'version_required' });
  for (const header of ['0', 'W/"0"', '*', '""', '"0", "1"'])
    expect((await reviewer.post(path, ACCEPT, { 'If-Match': header })).status).toBe(400);
  const early = await decide(reviewer, stage, 0, 1).expect(412);
  expect((early.body as Problem).current).toBeNull();
  await decide(reviewer, stage, 0, 0).expect(200);
});

test('there is nothing to decide on before an analysis is complete', async () => {
  const team = await makeTeam(api);
  const spectrum = await stored(api, team);
  const stage = { team, spectrumId: spectrum.id, targetId: spectrum.targetId, analysisId: spectrum.analysis!.id };
  expect((await decide(team.reviewer, stage, 0, 0).expect(409)).body).toMatchObject({ code: 'analysis_not_complete' });
});

describe('another analysis', () => {
  test('takes the decisions along to the features that are the same, and keeps the others', async () => {
    const stage = await makeStage();
    for (const index of [0, 1, 2]) await decide(stage.team.reviewer, stage, index, 0, { lineId: null, systemId: null }).expect(200);
    // 500.5 moves a little, 501.5 is gone, 503 is now a peak; and there is one more before them
    const found = [feature(0, 500.2), feature(1, 500.53), feature(2, 503.01, { kind: 'peak' })];
    const newer = await again(stage, analysisOf(found));
    const after = await identifications(stage);
    expect(after.map(({ wavelengthNm, featureIndex, version, state }) => [wavelengthNm, featureIndex, version, state])).toEqual([
      [500.5, 1, 1, 'accepted'],
      [501.5, null, 1, 'accepted'],
      [503, null, 1, 'accepted'],
    ]);
    const target = (await stage.team.reader.get(apiPaths.target(stage.team.programmeId, stage.targetId))).body as Target;
    expect(target).toMatchObject({ accepted: 3, open: 2 });
    // the old one cannot be decided on any more; the new one goes on from the version that the decision has
    expect((await decide(stage.team.reviewer, stage, 0, 1, { action: 'reopen' }).expect(409)).body).toMatchObject({
      code: 'bad_transition',
    });
    const reopened = await decide(stage.team.reviewer, { ...stage, analysisId: newer }, 1, 1, { action: 'reopen' }).expect(200);
    expect(reopened.body).toMatchObject({ id: after[0]!.id, version: 2, wavelengthNm: 500.53, featureIndex: 1 });
  });

  test('takes them back when the features are found again', async () => {
    const stage = await makeStage();
    await decide(stage.team.reviewer, stage, 1, 0).expect(200);
    await again(stage, analysisOf([]));
    expect((await identifications(stage))[0]!.featureIndex).toBeNull();
    await again(stage, analysisOf([feature(0, 499.9), feature(1, 501.49)]));
    expect((await identifications(stage))[0]!.featureIndex).toBe(1);
  });

  test('never comes between a decision and its feature', async () => {
    const stage = await makeStage();
    const { body } = await stage.team.analyst.post(apiPaths.analyses(stage.team.programmeId, stage.spectrumId), {}).expect(201);
    const shifted = analysisOf([feature(0, 499.5), ...FEATURES.map((f) => ({ ...f, index: f.index + 1 }))]);
    const [answer] = await Promise.all([decide(stage.team.reviewer, stage, 1, 0), complete(api, (body as { id: string }).id, shifted)]);
    expect([200, 409]).toContain(answer.status); // before the new analysis, or after it and refused
    const after = await identifications(stage);
    expect(after.map(({ wavelengthNm, featureIndex }) => [wavelengthNm, featureIndex])).toEqual(answer.status === 200 ? [[501.5, 2]] : []);
  });
});

test('candidates are stored so that they can be searched, with their arguments', async () => {
  const stage = await makeStage(
    analysisOf([feature(0, 500.5, { flags: ['blend', 'edge'], candidates: [candidate({ probability: 0.5 })] })]),
  );
  const features = await api.db('features').where({ analysis_id: stage.analysisId });
  expect(features).toMatchObject([{ feature_index: 0, kind: 'dip', wavelength_nm: 500.5, flags: ['blend', 'edge'] }]);
  const candidates = await api.db('candidates').where({ analysis_id: stage.analysisId });
  expect(candidates).toMatchObject([
    { rank: 1, line_id: SODIUM.lineId, probability: 0.5, evidence: { parts: [{ part: 'position', logOdds: 3.5 }] } },
  ]);
});

test('the history and the audit trail only grow, whoever asks', async () => {
  const stage = await makeStage();
  await decide(stage.team.reviewer, stage, 0, 0).expect(200);
  for (const table of ['identification_events', 'audit']) {
    for (const change of [api.db(table).update({ at: api.db.fn.now() }), api.db(table).delete(), api.db.raw(`truncate ${table} cascade`)]) {
      await expect(Promise.resolve(change)).rejects.toThrow(`${table} only grows`);
    }
  }
});
