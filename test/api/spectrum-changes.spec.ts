import { createHash } from 'node:crypto';
import {
  apiPaths,
  type AnalysisSummary,
  type Identification,
  type KnownFile,
  type Problem,
  type ReadingEvent,
  type RemovedSpectrum,
  type SpectrumDetail,
  type Target,
} from '@foreveil/shared';
import { purgeRemovedSpectra } from '../../server/src/modules/spectra/purge-removed.js';
import { analysisOf, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Person, type Team } from '../support/api/person.js';
import { spectrumText, upload, uploaded } from '../support/api/spectra.js';

let api: Api;
let team: Team;
beforeAll(async () => {
  api = await startApi();
});
beforeEach(async () => {
  team = await makeTeam(api);
});
afterAll(() => api.close());

const seen = (version: number) => ({ 'If-Match': `"${version}"` });
const get = async <T>(path: string, person: Person = team.reader) => (await person.get(path)).body as T;
const detailOf = (id: string) => get<SpectrumDetail>(apiPaths.spectrum(team.programmeId, id));
const reread = (person: Person, { id, version }: SpectrumDetail, corrections: object, more: object = {}) =>
  person.patch(apiPaths.spectrumReading(team.programmeId, id), { corrections, ...more }, seen(version));
const remove = (person: Person, { id, version }: SpectrumDetail) =>
  person.delete(apiPaths.spectrum(team.programmeId, id), undefined, seen(version));
const restore = (person: Person, id: string) => person.post(apiPaths.restoreSpectrum(team.programmeId, id));
const identifications = (id: string) => get<Identification[]>(apiPaths.identifications(team.programmeId, id));

/** A spectrum with a decision on its dip at 500.5 nm, 0.12 nm wide. */
async function decidedSpectrum(): Promise<SpectrumDetail> {
  const spectrum = await uploaded(team.analyst, team.programmeId);
  await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
  const decision = { action: 'propose', lineId: null, systemId: null };
  const answer = await team.analyst.post(apiPaths.decide(team.programmeId, spectrum.analysis!.id, 0), decision, seen(0));
  expect(answer.status).toBe(200);
  return detailOf(spectrum.id);
}

describe('the name and target of a spectrum', () => {
  test('are changed by who saw its present version', async () => {
    const spectrum = await uploaded(team.analyst, team.programmeId);
    const path = apiPaths.spectrum(team.programmeId, spectrum.id);
    const answer = await team.analyst.patch(path, { label: ' night 4 ' }, seen(1));
    expect(answer.status).toBe(200);
    expect(answer.headers.etag).toBe('"2"');
    expect(answer.body).toMatchObject({ label: 'night 4', version: 2 });
    const late = await team.lead.patch(path, { label: 'mine' }, seen(1));
    expect([late.status, (late.body as Problem).current]).toEqual([412, answer.body]);
    expect((await team.analyst.patch(path, { label: '' }, seen(2))).status).toBe(400);
    expect((await team.analyst.patch(path, { sha256: 'x' }, seen(2))).status).toBe(400);
  });

  test('take the decisions along to the other target', async () => {
    const spectrum = await decidedSpectrum();
    const { targetId } = await uploaded(team.analyst, team.programmeId, { meta: { targetName: 'Other' } });
    const path = apiPaths.spectrum(team.programmeId, spectrum.id);
    const moved = await team.analyst.patch(path, { targetId }, seen(spectrum.version));
    expect(moved.body).toMatchObject({ targetId, targetName: 'Other' });
    const other = await get<Target>(apiPaths.target(team.programmeId, targetId));
    expect(other.identifications.map((one) => [one.spectrumId, one.targetId])).toEqual([[spectrum.id, targetId]]);
    expect((await get<Target>(apiPaths.target(team.programmeId, spectrum.targetId))).identifications).toEqual([]);
  });

  test('do not lead into another programme', async () => {
    const others = await makeTeam(api);
    const theirs = await uploaded(others.analyst, others.programmeId);
    const ours = await uploaded(team.analyst, team.programmeId);
    const path = apiPaths.spectrum(team.programmeId, ours.id);
    expect((await team.analyst.patch(path, { targetId: theirs.targetId }, seen(1))).status).toBe(404);
    expect((await detailOf(ours.id)).targetId).toBe(ours.targetId);
  });
});

describe('reading a file anew', () => {
  test('starts from its stored bytes, keeps what was read before, and analyses it', async () => {
    const before = await uploaded(team.analyst, team.programmeId);
    const answer = await reread(team.lead, before, { medium: 'air', resolvingPower: 4000 }, { recipe: 'Old plates' });
    expect(answer.status).toBe(200);
    const after = answer.body as SpectrumDetail;
    expect(after).toMatchObject({ version: 2, readingRevision: 2, corrections: { medium: 'air', resolvingPower: 4000 } });
    expect(after).toMatchObject({ recipe: 'Old plates', resolvingPower: 4000, sha256: before.sha256 });
    expect(after.reading.medium).toMatchObject({ value: 'air', how: 'corrected' });
    expect(after.fromNm - before.fromNm).toBeGreaterThan(0.13); // 500 nm in air is 500.14 nm in vacuum
    const readings = await get<ReadingEvent[]>(apiPaths.spectrumReading(team.programmeId, before.id));
    expect(readings).toMatchObject([
      { revision: 1, by: team.analyst.name, corrections: {}, recipe: null, fromNm: before.fromNm },
      { revision: 2, by: team.lead.name, corrections: after.corrections, recipe: 'Old plates', fromNm: after.fromNm },
    ]);
    const analyses = await get<AnalysisSummary[]>(apiPaths.analyses(team.programmeId, before.id));
    expect(analyses.map(({ phase, readingRevision }) => [phase, readingRevision])).toEqual([
      ['QUEUED', 2],
      ['ABORTED', 1],
    ]);
    expect(after.analysis).toMatchObject({ phase: 'QUEUED', readingRevision: 2 });
    const audit = await api.db('audit').where({ subject: before.id, action: 'spectrum_read_anew' }).first<{ facts: object }>('facts');
    expect(audit.facts).toMatchObject({ from: {}, to: after.corrections, revision: 2 });
  });

  test('and back again gives the very columns of before', async () => {
    const before = await uploaded(team.analyst, team.programmeId);
    const samples = () => team.reader.get(apiPaths.samples(team.programmeId, before.id)).buffer(true);
    const first = await samples();
    const air = (await reread(team.analyst, before, { medium: 'air' })).body as SpectrumDetail;
    const between = await samples();
    const back = (await reread(team.analyst, air, {})).body as SpectrumDetail;
    const last = await samples();
    expect(back).toMatchObject({ corrections: {}, fromNm: before.fromNm, readingRevision: 3 });
    expect(Buffer.compare(first.body as Buffer, last.body as Buffer)).toBe(0);
    expect(Buffer.compare(first.body as Buffer, between.body as Buffer)).not.toBe(0);
    // one who has the samples of before is not told that they are still these
    expect(new Set([first, between, last].map(({ headers }) => headers.etag as string)).size).toBe(3);
  });

  test('takes decisions along to where their feature now lies, and no analysis of before is shown', async () => {
    const spectrum = await decidedSpectrum();
    const [decision] = await identifications(spectrum.id);
    expect(decision).toMatchObject({ featureIndex: 0, wavelengthNm: 500.5 });
    const after = (await reread(team.analyst, spectrum, { medium: 'air' })).body as SpectrumDetail;
    expect(after.analysis).toMatchObject({ phase: 'QUEUED' });
    const [carried] = await identifications(spectrum.id);
    // n - 1 at 500.5 nm is 2.79e-4 (Morton 2000): 0.1397 nm
    expect(Math.abs(carried!.wavelengthNm - 500.5 - 0.1397)).toBeLessThan(0.0003);
    expect(carried).toMatchObject({
      featureIndex: null,
      decidedBy: decision!.decidedBy,
      state: decision!.state,
      version: decision!.version + 1,
    });
    await complete(api, after.analysis!.id, analysisOf([feature(0, 500.6396)]));
    expect((await identifications(spectrum.id))[0]).toMatchObject({ featureIndex: 0 }); // found again by the new analysis
  });

  test('that fails changes nothing', async () => {
    const before = await uploaded(team.analyst, team.programmeId);
    const answer = await reread(team.analyst, before, { fluxColumn: 'no such column' });
    expect([answer.status, (answer.body as Problem).code]).toEqual([422, 'unreadable_spectrum']);
    expect(await detailOf(before.id)).toEqual(before);
  });

  test('is done once when two do it at once', async () => {
    const before = await uploaded(team.analyst, team.programmeId);
    const answers = await Promise.all([reread(team.analyst, before, { medium: 'air' }), reread(team.lead, before, { frame: 'unknown' })]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412]);
    expect((await detailOf(before.id)).readingRevision).toBe(2);
  });
});

describe('a removed spectrum', () => {
  test('is gone from everywhere, listed as removed, and comes back whole', async () => {
    const spectrum = await uploaded(team.analyst, team.programmeId);
    expect((await remove(team.analyst, spectrum)).status).toBe(204);
    for (const path of [apiPaths.spectrum, apiPaths.samples, apiPaths.original, apiPaths.analyses, apiPaths.spectrumReport])
      expect((await team.lead.get(path(team.programmeId, spectrum.id))).status).toBe(404);
    expect(await get<unknown[]>(apiPaths.spectra(team.programmeId))).toEqual([]);
    const removed = await get<RemovedSpectrum[]>(apiPaths.removedSpectra(team.programmeId));
    expect(removed).toMatchObject([{ id: spectrum.id, label: spectrum.label, decisions: 0, removedBy: team.analyst.name }]);
    const back = await restore(team.analyst, spectrum.id);
    expect([back.status, (back.body as SpectrumDetail).label]).toEqual([200, spectrum.label]);
    expect(await get<unknown[]>(apiPaths.removedSpectra(team.programmeId))).toEqual([]);
  });

  test('with decisions is a matter for the lead', async () => {
    const spectrum = await decidedSpectrum();
    expect((await remove(team.analyst, spectrum)).status).toBe(403);
    expect((await remove(team.lead, spectrum)).status).toBe(204);
    expect((await get<Target>(apiPaths.target(team.programmeId, spectrum.targetId))).identifications).toEqual([]);
    expect((await restore(team.reviewer, spectrum.id)).status).toBe(403);
    expect((await restore(team.lead, spectrum.id)).status).toBe(200);
    expect(await identifications(spectrum.id)).toHaveLength(1);
  });

  test('makes room for the same file, and then cannot come back beside it', async () => {
    const content = spectrumText(700);
    const spectrum = await uploaded(team.analyst, team.programmeId, { content });
    await remove(team.analyst, spectrum);
    const again = await upload(team.analyst, team.programmeId, { content });
    expect(again.status).toBe(201);
    const answer = await restore(team.analyst, spectrum.id);
    expect([answer.status, (answer.body as Problem).code]).toEqual([409, 'duplicate_spectrum']);
  });

  test('goes for good after 30 days with its decisions, not before, and only the trail stays', async () => {
    const [gone, kept, present] = [await decidedSpectrum(), await decidedSpectrum(), await decidedSpectrum()];
    for (const [spectrum, days] of [
      [gone, 30.01],
      [kept, 29.9],
    ] as const) {
      expect((await remove(team.lead, spectrum)).status).toBe(204);
      const removedAt = api.db.raw(`now() - ? * interval '1 day'`, [days]);
      await api.db('spectra').where({ id: spectrum.id }).update({ removed_at: removedAt });
    }
    expect(await purgeRemovedSpectra(api.db)).toBe(1);
    expect(await purgeRemovedSpectra(api.db)).toBe(0);
    const ids = async (table: string, column: string) =>
      (await api.db(table).where({ programme_id: team.programmeId }).distinct(column).pluck(column)) as string[];
    for (const [table, column] of [
      ['spectra', 'id'],
      ['analyses', 'spectrum_id'],
      ['identifications', 'spectrum_id'],
    ] as const)
      expect((await ids(table, column)).sort()).toEqual([kept.id, present.id].sort());
    expect((await restore(team.lead, gone.id)).status).toBe(404);
    expect((await restore(team.lead, kept.id)).status).toBe(200);
    const trail = await api.db('audit').where({ subject: gone.id }).orderBy('id').pluck('action');
    expect(trail.slice(-2)).toEqual(['spectrum_removed', 'spectrum_purged']);
    await expect(api.db('identification_events').delete()).rejects.toThrow(/only grows/); // the gate is shut again
  });
});

describe('files that are there already', () => {
  test('are told by their hash, to members only', async () => {
    const content = spectrumText(800);
    const sha256 = createHash('sha256').update(content).digest('hex');
    const spectrum = await uploaded(team.analyst, team.programmeId, { content, meta: { targetName: 'Tern', label: 'night 1' } });
    const ask = (person: Person, hashes: string) => person.get(`${apiPaths.knownFiles(team.programmeId)}?sha256=${hashes}`);
    const known = (await ask(team.reader, `${'0'.repeat(64)},${sha256}`)).body as KnownFile[];
    expect(known).toEqual([{ sha256, spectrumId: spectrum.id, label: 'night 1', targetId: spectrum.targetId, targetName: 'Tern' }]);
    expect((await ask(team.outsider, sha256)).status).toBe(404);
    expect((await ask(team.reader, 'abc')).status).toBe(400);
    await remove(team.analyst, spectrum);
    expect((await ask(team.reader, sha256)).body).toEqual([]);
  });
});
