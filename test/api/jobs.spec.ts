import { readFileSync } from 'node:fs';
import {
  DEFAULT_SETTINGS,
  analyse,
  apiPaths,
  readSpectrum,
  type Analysis,
  type AnalysisDetail,
  type AnalysisSummary,
} from '@foreveil/shared';
import { Listener } from '../../server/src/database/listener.js';
import { AnalysisThread } from '../../server/src/modules/analyses/work/analysis-thread.js';
import { Cancellations } from '../../server/src/modules/analyses/work/cancellations.js';
import { claim, type Claim } from '../../server/src/modules/analyses/work/claim.js';
import { beat, writeProgress } from '../../server/src/modules/analyses/work/hold.js';
import { storeResult } from '../../server/src/modules/analyses/work/store-result.js';
import { AttemptFailed, workOnAnalysis } from '../../server/src/modules/analyses/work/work-on-analysis.js';
import { defaultLineListId, loadLineList } from '../../server/src/modules/linelists/line-list-store.js';
import { loadSpectrum } from '../../server/src/modules/spectra/spectrum-bytes.js';
import { analysisOf, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Team } from '../support/api/person.js';
import { stored, uploaded } from '../support/api/spectra.js';
import { startWorker, until, type WorkerProcess } from '../support/api/worker.js';

/** long enough to catch a worker at it */
const LONG = readFileSync(new URL('../../seeds/data/spectra/curlew-nebula.fits.gz', import.meta.url));

let api: Api;
let team: Team;
const workers: WorkerProcess[] = [];

// every test has a queue of its own: with its database
beforeEach(async () => {
  api = await startApi();
  team = await makeTeam(api);
});
afterEach(async () => {
  await Promise.all(workers.splice(0).map((worker) => worker.end('SIGKILL')));
  await api.close();
});

async function worker(env: Record<string, string> = {}): Promise<WorkerProcess> {
  const started = await startWorker(api, env);
  workers.push(started);
  return started;
}
const summary = async (id: string) => (await team.reader.get(apiPaths.analysis(team.programmeId, id))).body as AnalysisDetail;
const inPhase = (id: string, phase: AnalysisSummary['phase'], milliseconds = 40_000) =>
  until(
    async () => ((await summary(id)).phase === phase ? summary(id) : null),
    milliseconds,
    () => workers.map(({ log }) => log.join('')).join('\n'),
  );
const row = (id: string) =>
  api
    .db('analyses')
    .where({ id })
    .first<{ attempts: number; job_id: string; attempt_token: string | null }>('attempts', 'job_id', 'attempt_token');
const cancel = (id: string) => team.analyst.post(apiPaths.cancelAnalysis(team.programmeId, id));
const uploadLong = async () => (await uploaded(team.analyst, team.programmeId, { content: LONG, fileName: 'nebula.fits.gz' })).analysis!.id;

describe('a worker process', () => {
  test('does what is queued; what it stores is what the same analysis gives anywhere', async () => {
    const spectrum = await stored(api, team);
    const { id } = spectrum.analysis!;
    await worker();
    const done = await inPhase(id, 'COMPLETED');
    const bytes = await api.db('spectra').where({ id: spectrum.id }).first<{ original: Buffer }>('original');
    const read = readSpectrum(bytes.original, spectrum.fileName);
    if (!read.ok) throw new Error(read.problem.sentence);
    const list = await loadLineList(api.db, (await defaultLineListId(api.db))!);
    const here = JSON.parse(JSON.stringify(analyse(read.spectrum, list, DEFAULT_SETTINGS))) as Analysis;
    expect(done.result).toEqual(here);
    expect(done).toMatchObject({
      progress: 1,
      error: null,
      settings: DEFAULT_SETTINGS,
      features: here.features.length,
      lineListVersion: list.version,
    });
    expect(done.features).toBeGreaterThan(0); // three dips of 40 sigma
    const [rows] = await api.db('features').where({ analysis_id: id }).count<{ n: string }[]>({ n: '*' });
    expect(Number(rows!.n)).toBe(done.features);
    await until(async () => {
      const job = await api
        .db('jobs.job')
        .where({ id: (await row(id)).job_id })
        .first<{ state: string }>('state');
      return job.state === 'completed';
    }, 5_000);
  });

  test('is killed without warning: another one does its analysis again', async () => {
    const first = await worker();
    const id = await uploadLong();
    await inPhase(id, 'EXECUTING');
    await first.end('SIGKILL');
    await worker();
    const done = await inPhase(id, 'COMPLETED');
    expect(done.result!.features.length).toBe(done.features);
    expect((await row(id)).attempts).toBe(2);
  });

  test('stands still and wakes up after another one took over: it can no longer write', async () => {
    const sleeper = await worker();
    const id = await uploadLong();
    await inPhase(id, 'EXECUTING');
    sleeper.process.kill('SIGSTOP');
    await worker();
    const done = await inPhase(id, 'COMPLETED');
    const endedAt = done.endedAt;
    sleeper.process.kill('SIGCONT');
    await until(
      () => sleeper.log.join('').includes(id),
      40_000,
      () => sleeper.log.join(''),
    ); // it came to its end, whatever that was
    expect(await summary(id)).toMatchObject({ phase: 'COMPLETED', endedAt });
    expect((await row(id)).attempts).toBe(2);
    const [rows] = await api.db('features').where({ analysis_id: id }).count<{ n: string }[]>({ n: '*' });
    expect(Number(rows!.n)).toBe(done.features);
  });

  test('is asked to stop: it gives its analysis back unharmed and leaves at once', async () => {
    const first = await worker();
    const id = await uploadLong();
    await inPhase(id, 'EXECUTING');
    const from = Date.now();
    expect(await first.end('SIGTERM')).toBe(0);
    expect(Date.now() - from).toBeLessThan(10_000);
    expect(await summary(id)).toMatchObject({ phase: 'QUEUED', progress: 0 });
    expect(await row(id)).toMatchObject({ attempts: 0, attempt_token: null });
    await worker();
    await inPhase(id, 'COMPLETED');
    expect((await row(id)).attempts).toBe(1);
  });

  test('stops within two seconds when its analysis is cancelled, and goes on with the next', async () => {
    const only = await worker();
    const id = await uploadLong();
    await inPhase(id, 'EXECUTING');
    const from = Date.now();
    expect((await cancel(id).expect(200)).body).toMatchObject({ phase: 'ABORTED' });
    await until(() => only.log.join('').includes(id), 2_000);
    expect(Date.now() - from).toBeLessThan(2_000);
    expect((await cancel(id).expect(409)).body).toMatchObject({ code: 'analysis_not_running' });
    const next = await stored(api, team, 'Next');
    await inPhase(next.analysis!.id, 'COMPLETED');
    expect(await summary(id)).toMatchObject({ phase: 'ABORTED', result: null, features: null });
    expect(await api.db('features').where({ analysis_id: id })).toEqual([]);
  });

  test('refuses to start where the environment is wrong, and says what is', async () => {
    await expect(worker({ FOREVEIL_MODE: 'production', JWT_SECRET: 'short', PASSWORD_KEY: '' })).rejects.toThrow(
      /JWT_SECRET must be at least 32 bytes/,
    );
  });
});

describe('an analysis', () => {
  const ENDLESS = 'for (;;);';
  const DYING = 'process.exit(1)';
  const SAYS = (what: object) => `parentPort.postMessage(${JSON.stringify(what)})`;
  /** a thread that does `code` when it is to run an analysis */
  const thread = (code: string) =>
    new AnalysisThread(
      256,
      new URL(
        `data:text/javascript,${encodeURIComponent(
          `import { parentPort } from 'node:worker_threads'; parentPort.on('message', ({ say }) => { if (say === 'run') { ${code} } });`,
        )}`,
      ),
    );

  const opened: AnalysisThread[] = [];
  afterEach(() => Promise.all(opened.splice(0).map((each) => each.end())));

  async function work(id: string, code: string, more: { analysisSeconds?: number; stopping?: AbortSignal } = {}): Promise<void> {
    const cancellations = new Cancellations(api.app.get(Listener));
    await cancellations.listen();
    const own = thread(code);
    opened.push(own);
    const { analysisSeconds = 30, stopping = new AbortController().signal } = more;
    await workOnAnalysis(id, {
      db: api.db,
      thread: own,
      analysisSeconds,
      beatMs: 100,
      stopping,
      onCancelled: cancellations.on.bind(cancellations),
    });
  }
  const queued = async () => (await stored(api, team)).analysis!.id;

  test('that does not come to an end is stopped at its limit, with the reason', async () => {
    const id = await queued();
    const from = Date.now();
    await work(id, ENDLESS, { analysisSeconds: 1 });
    expect(Date.now() - from).toBeLessThan(4_000);
    expect(await summary(id)).toMatchObject({ phase: 'ERROR', error: 'The analysis took more than 1 s and was stopped.', result: null });
  });

  test('that says it failed ends with what it said', async () => {
    const id = await queued();
    await work(id, SAYS({ say: 'failed', reason: 'there is no continuum' }));
    expect(await summary(id)).toMatchObject({ phase: 'ERROR', error: 'The analysis stopped with an error: there is no continuum' });
  });

  test('whose thread dies every time is given up after three attempts', async () => {
    const id = await queued();
    for (const attempt of [1, 2, 3]) {
      await expect(work(id, DYING)).rejects.toThrow(AttemptFailed);
      expect(await summary(id)).toMatchObject({ phase: 'EXECUTING' });
      expect((await row(id)).attempts).toBe(attempt);
    }
    await work(id, DYING);
    expect(await summary(id)).toMatchObject({ phase: 'ERROR', error: expect.stringContaining('tried 3 times') as string });
  });

  test('that is cancelled in the queue is never begun', async () => {
    const id = await queued();
    await cancel(id).expect(200);
    await work(id, DYING); // would throw
    expect(await summary(id)).toMatchObject({ phase: 'ABORTED', progress: 0 });
    await cancel(id).expect(409);
  });

  test('that is cancelled at work stops, also when the word about it gets lost', async () => {
    const id = await queued();
    const working = work(id, ENDLESS);
    await inPhase(id, 'EXECUTING');
    // as the API does it, but without telling anyone: the next sign of life finds out
    await api.db('analyses').where({ id }).update({ phase: 'ABORTED', attempt_token: null, ended_at: api.db.fn.now() });
    const from = Date.now();
    await working;
    expect(Date.now() - from).toBeLessThan(2_000);
    expect(await summary(id)).toMatchObject({ phase: 'ABORTED' });
  });

  test('shows its progress while it runs, and counts only forwards within an attempt', async () => {
    const id = await queued();
    const steps = ['continuum', 'detection', 'identification'];
    const told = steps.map((step, i) => `setTimeout(() => ${SAYS({ say: 'progress', step, done: (i + 1) / 4 })}, ${i * 400});`).join('');
    const working = work(id, `${told} setTimeout(() => ${SAYS({ say: 'done', analysis: analysisOf([feature(0, 500.5)]) })}, 1400);`);
    const seen: [string | null, number][] = [];
    while ((await summary(id)).phase !== 'COMPLETED') {
      const { step, progress } = await summary(id);
      if (step && seen.at(-1)?.[0] !== step) seen.push([step, progress]);
    }
    await working;
    expect(seen).toEqual([
      ['continuum', 0.25],
      ['detection', 0.5],
      ['identification', 0.75],
    ]);
  });

  test('whose result breaks a rule of the tables ends with that, and leaves no half of it', async () => {
    const id = await queued();
    const broken = analysisOf([feature(0, 500.5), feature(1, 501.5, { wavelengthNm: -1 })]);
    await work(id, SAYS({ say: 'done', analysis: broken }));
    expect(await summary(id)).toMatchObject({
      phase: 'ERROR',
      error: expect.stringContaining('features_wavelength') as string,
      result: null,
    });
    expect(await api.db('features').where({ analysis_id: id })).toEqual([]);
  });

  test('belongs to whoever took it last: who took it before can write nothing', async () => {
    const id = await queued();
    const [before, after] = [(await claim(api.db, id))!, (await claim(api.db, id))!];
    expect(before.token).not.toBe(after.token);
    const spectrum = (await loadSpectrum(api.db, before, before.spectrumId))!;
    expect(await beat(api.db, before)).toBe(false);
    expect(await writeProgress(api.db, before, 'noise', 0.9)).toBe(false);
    expect(await storeResult(api.db, before, spectrum, analysisOf([feature(0, 500.5)]))).toBe(false);
    expect(await storeResult(api.db, after, spectrum, analysisOf([feature(0, 501.5), feature(1, 503)]))).toBe(true);
    expect(await storeResult(api.db, after, spectrum, analysisOf([]))).toBe(false); // once is enough
    expect(await summary(id)).toMatchObject({ phase: 'COMPLETED', features: 2 });
    expect(await api.db('features').where({ analysis_id: id })).toHaveLength(2);
  });

  test('is stored once when ten workers bring their results at the same time', async () => {
    const id = await queued();
    const claims: Claim[] = [];
    for (let i = 0; i < 3; i++) claims.push((await claim(api.db, id))!);
    const spectrum = (await loadSpectrum(api.db, claims[0]!, claims[0]!.spectrumId))!;
    const results = await Promise.all(
      Array.from({ length: 10 }, (_, i) => storeResult(api.db, claims[i % 3]!, spectrum, analysisOf([feature(0, 500.5 + i * 0.1)]))),
    );
    expect(results.filter(Boolean)).toHaveLength(1);
    expect(await api.db('features').where({ analysis_id: id })).toHaveLength(1);
  });

  test('may be asked for again when the one before has ended, with settings of its own', async () => {
    const spectrum = await stored(api, team);
    const again = (body: object) => team.analyst.post(apiPaths.analyses(team.programmeId, spectrum.id), body);
    expect((await again({}).expect(409)).body).toMatchObject({ code: 'bad_transition' });
    await cancel(spectrum.analysis!.id).expect(200);
    const { body } = await again({ settings: { falseFeatures: 2, extinctionAv: 1.5 } }).expect(201);
    expect(await summary((body as AnalysisSummary).id)).toMatchObject({
      phase: 'QUEUED',
      settings: { ...DEFAULT_SETTINGS, falseFeatures: 2, extinctionAv: 1.5 },
      requestedBy: team.analyst.name,
    });
    const list = (await team.reader.get(apiPaths.analyses(team.programmeId, spectrum.id))).body as AnalysisSummary[];
    expect(list.map(({ phase }) => phase)).toEqual(['QUEUED', 'ABORTED']); // newest first
    for (const settings of [
      { falseFeatures: 0 },
      { falseFeatures: '1' },
      { extinctionAv: -1 },
      { localContinuum: 'yes' },
      { temperature: 5000 },
      { maskedRegions: [{ fromNm: 501, toNm: 500 }] },
    ]) {
      expect((await again({ settings }).expect(400)).body).toMatchObject({
        code: 'invalid_request',
        errors: [{ pointer: expect.stringContaining(`/settings/${Object.keys(settings)[0]!}`) as string }],
      });
    }
  });

  test('whose job got lost is found and done all the same', async () => {
    const id = await queued();
    await api.db('jobs.job').delete();
    await api
      .db('analyses')
      .where({ id })
      .update({ requested_at: api.db.raw(`now() - interval '1 minute'`) });
    await worker();
    await inPhase(id, 'COMPLETED');
  });
});
