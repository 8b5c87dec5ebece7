import { apiPaths, type Identification, type ProgrammeEvent } from '@foreveil/shared';
import { SODIUM, analysisOf, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Person, type Team } from '../support/api/person.js';
import { stored, uploaded } from '../support/api/spectra.js';

let api: Api;
let team: Team;
beforeAll(async () => {
  api = await startApi();
});
beforeEach(async () => {
  team = await makeTeam(api);
});
afterAll(() => api.close());

/** An open stream: what it said so far, and when it ends. */
interface Stream {
  readonly events: ProgrammeEvent[];
  readonly ended: Promise<void>;
  /** waits for an event that `is` it */
  next(is: (event: ProgrammeEvent) => boolean): Promise<ProgrammeEvent>;
  close(): void;
}

async function open(person: Person, programmeId = team.programmeId): Promise<Stream> {
  const controller = new AbortController();
  const answer = await fetch(`${api.url}${apiPaths.events(programmeId)}`, {
    headers: { Cookie: person.cookie },
    signal: controller.signal,
  });
  expect(answer.status).toBe(200);
  expect(answer.headers.get('content-type')).toBe('text/event-stream; charset=utf-8');
  const events: ProgrammeEvent[] = [];
  const ended = listen(answer.body!, events).catch(() => undefined);
  return {
    events,
    ended,
    async next(is) {
      for (const end = Date.now() + 5_000; Date.now() < end; await new Promise((resolve) => setTimeout(resolve, 10))) {
        const event = events.find(is);
        if (event) return event;
      }
      throw new Error(`not heard; heard ${JSON.stringify(events)}`);
    },
    close: () => controller.abort(),
  };
}

async function listen(body: ReadableStream<Uint8Array>, events: ProgrammeEvent[]): Promise<void> {
  let text = '';
  const decoder = new TextDecoder();
  for await (const piece of body) {
    const blocks = (text + decoder.decode(piece, { stream: true })).split('\n\n');
    text = blocks.pop()!;
    for (const block of blocks) if (block.startsWith('data: ')) events.push(JSON.parse(block.slice(6)) as ProgrammeEvent);
  }
}

/** Fails when the stream does not end soon. */
const endsSoon = ({ ended }: Stream) =>
  Promise.race([ended, new Promise((_, reject) => setTimeout(() => reject(new Error('the stream is still open')), 1_000))]);

test('tells every page what anyone does, in full', async () => {
  const streams = await Promise.all([team.reader, team.analyst, team.lead].map((person) => open(person)));
  const spectrum = await uploaded(team.analyst, team.programmeId);
  const analysisId = spectrum.analysis!.id;
  await complete(api, analysisId, analysisOf([feature(0, 500.5)]));
  const decision = { action: 'accept', lineId: SODIUM.lineId, systemId: 'cloud1' };
  const decided = await team.reviewer.post(apiPaths.decide(team.programmeId, analysisId, 0), decision, { 'If-Match': '"0"' }).expect(200);
  for (const stream of streams) {
    expect(await stream.next(({ type }) => type === 'spectrum')).toEqual({
      type: 'spectrum',
      spectrumId: spectrum.id,
      targetId: spectrum.targetId,
    });
    expect(await stream.next((event) => event.type === 'analysis' && event.analysis.phase === 'COMPLETED')).toMatchObject({
      spectrumId: spectrum.id,
      analysis: { id: analysisId, features: 1, progress: 1, temperatureK: 9000 },
    });
    expect(await stream.next(({ type }) => type === 'identification')).toEqual({
      type: 'identification',
      identification: decided.body as Identification,
    });
    stream.close();
  }
});

test('tells nothing of other programmes', async () => {
  const stream = await open(team.reader);
  const others = await makeTeam(api);
  await stored(api, others);
  await stored(api, team);
  await stream.next(({ type }) => type === 'spectrum');
  expect(stream.events.filter(({ type }) => type === 'spectrum')).toHaveLength(1);
  stream.close();
});

test('tells nothing of what was rolled back', async () => {
  const stream = await open(team.reader);
  const rows = await api.db('spectra').where({ programme_id: team.programmeId });
  await expect(stored(api, { ...team, analyst: { ...team.analyst, userId: '00000000-0000-4000-8000-000000000000' } })).rejects.toThrow();
  await stored(api, team);
  await stream.next(({ type }) => type === 'spectrum');
  expect(stream.events.filter(({ type }) => type === 'spectrum')).toHaveLength(rows.length + 1);
  stream.close();
});

test('ends the streams of a session when its person signs out, and only those', async () => {
  const [mine, other] = [await open(team.reader), await open(team.lead)];
  await team.reader.post(apiPaths.signOut).expect(204);
  await endsSoon(mine);
  await stored(api, team);
  await other.next(({ type }) => type === 'spectrum');
  other.close();
});

test('hears of the database again after their connection broke', async () => {
  const stream = await open(team.reader);
  await api.db.raw(
    `select pg_terminate_backend(pid) from pg_stat_activity where application_name = 'foreveil listener' and datname = current_database()`,
  );
  await new Promise((resolve) => setTimeout(resolve, 500));
  await stored(api, team);
  await stream.next(({ type }) => type === 'spectrum');
  stream.close();
});

test('is not for who is not signed in or not in the programme', async () => {
  for (const [person, status] of [
    [team.anonymous, 401],
    [team.outsider, 404],
  ] as const) {
    expect((await fetch(`${api.url}${apiPaths.events(team.programmeId)}`, { headers: { Cookie: person.cookie } })).status).toBe(status);
  }
});

describe('where streams are looked after often', () => {
  // one API at a time in a process, so this block replaces the one above
  beforeAll(async () => {
    await api.close();
    api = await startApi({ eventBeatSeconds: 0.1 });
  });

  test('a stream is kept alive, and ends when its reader leaves the programme or the session runs out', async () => {
    const [leaves, runsOut, stays] = [await open(team.reader), await open(team.analyst), await open(team.lead)];
    await new Promise((resolve) => setTimeout(resolve, 300));
    await api.db('memberships').where({ user_id: team.reader.userId }).delete();
    await api
      .db('sessions')
      .where({ user_id: team.analyst.userId })
      .update({ last_seen_at: api.db.raw(`now() - interval '2 days'`) });
    await Promise.all([endsSoon(leaves), endsSoon(runsOut)]);
    await stored(api, team);
    await stays.next(({ type }) => type === 'spectrum');
    stays.close();
  });
});
