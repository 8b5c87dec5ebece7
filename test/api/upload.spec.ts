import { createHash } from 'node:crypto';
import { once } from 'node:events';
import { readFileSync } from 'node:fs';
import { connect } from 'node:net';
import { gzipSync } from 'node:zlib';
import { apiPaths, decodeSamples, type Problem, type SpectrumDetail, type SpectrumSummary, type TargetSummary } from '@foreveil/shared';
import type { Response } from 'supertest';
import type { Config } from '../../server/src/config/config.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Team } from '../support/api/person.js';
import { POINTS, spectrumText, upload, uploaded } from '../support/api/spectra.js';

let api: Api;
let team: Team;

/** One API at a time, see sign-in.spec.ts; every test has a programme of its own. */
function withApi(changes: Partial<Config> = {}): void {
  beforeAll(async () => {
    api = await startApi(changes);
  });
  beforeEach(async () => {
    team = await makeTeam(api);
  });
  afterAll(() => api.close());
}

const problemOf = ({ body }: Response) => body as Problem;
const spectra = async () => (await team.reader.get(apiPaths.spectra(team.programmeId))).body as SpectrumSummary[];
/** supertest gives bodies of unknown kinds as a Buffer only when told how to collect them */
async function bytesOf(path: string, headers: Record<string, string> = {}) {
  const answer = await fetch(`${api.url}${path}`, { headers: { Cookie: team.reader.cookie, ...headers } });
  return { answer, bytes: Buffer.from(await answer.arrayBuffer()) };
}
/** Rows that an upload writes, in all tables: none may be left behind by one that was refused. */
async function countRows(): Promise<Record<string, number>> {
  const tables = ['targets', 'spectra', 'analyses', 'jobs.job', 'audit'];
  const counts = await Promise.all(tables.map((table) => api.db(table).count<{ n: string }[]>({ n: '*' })));
  return Object.fromEntries(tables.map((table, i) => [table, Number(counts[i]![0]!.n)]));
}

describe('an upload', () => {
  withApi();

  test('is stored with its reading, columns and preview, and its analysis is queued', async () => {
    const content = spectrumText(500);
    const answer = await upload(team.analyst, team.programmeId, {
      content,
      fileName: 'night 3.csv',
      meta: { targetName: '  HV 12 ', targetKind: 'sightline' },
    });
    expect(answer.status).toBe(201);
    const detail = answer.body as SpectrumDetail;
    expect(detail).toMatchObject({
      programmeId: team.programmeId,
      targetName: 'HV 12',
      label: 'night 3',
      fileName: 'night 3.csv',
      points: POINTS,
      resolvingPower: 5000,
      createdBy: team.analyst.name,
      simulated: false,
      hasSigma: true,
      corrections: {},
      sizeBytes: Buffer.byteLength(content),
      sha256: createHash('sha256').update(content).digest('hex'),
      reading: { format: 'text', medium: { value: 'vacuum', how: 'stated' }, frame: { value: 'barycentric', how: 'stated' } },
      analysis: { phase: 'QUEUED', progress: 0, requestedBy: team.analyst.name, lineListName: 'Foreveil default' },
    });
    expect(detail.fromNm).toBeCloseTo(500, 9);
    expect(detail.toNm).toBeCloseTo(503.99, 9);
    expect(detail.preview!.low).toHaveLength(512);
    expect(Math.min(...detail.preview!.low.map((v) => v ?? 1))).toBeLessThan(0.65); // the dips of 40 % show in it
    expect((await team.reader.get(apiPaths.spectrum(team.programmeId, detail.id))).body).toEqual(detail);
    expect(await spectra()).toHaveLength(1);
    const targets = (await team.reader.get(apiPaths.targets(team.programmeId))).body as TargetSummary[];
    expect(targets).toMatchObject([{ name: 'HV 12', kind: 'sightline', spectra: [{ id: detail.id }] }]);
    const { rows } = await api.db.raw<{ rows: { state: string; data: object }[] }>(
      `select state, data from jobs.job where data->>'analysisId' = ?`,
      [detail.analysis!.id],
    );
    expect(rows).toEqual([{ state: 'created', data: { analysisId: detail.analysis!.id } }]);
    const trail = await api.db('audit').where({ programme_id: team.programmeId, action: 'spectrum_uploaded' });
    expect(trail).toMatchObject([{ user_id: team.analyst.userId, subject: detail.id, facts: { sha256: detail.sha256 } }]);
  });

  test('gives its samples back bit by bit, and its bytes as they came', async () => {
    const content = Buffer.from(spectrumText(501));
    const { id } = await uploaded(team.analyst, team.programmeId, { content, fileName: 'Ä "b";\u202e.csv' });
    const samples = await bytesOf(apiPaths.samples(team.programmeId, id));
    expect(samples.answer.headers.get('content-type')).toBe('application/octet-stream');
    const { wavelength, flux, sigma, bad } = decodeSamples(new Uint8Array(samples.bytes).buffer);
    const rows = content
      .toString()
      .split('\n')
      .slice(4, -1)
      .map((row) => row.split(',').map(Number));
    expect([...wavelength]).toEqual(rows.map(([nm]) => nm));
    expect([...flux]).toEqual(rows.map(([, value]) => Math.fround(value!)));
    expect([...sigma!]).toEqual(rows.map(() => Math.fround(0.01)));
    expect([...bad]).toEqual(rows.map(() => 0));
    const original = await bytesOf(apiPaths.original(team.programmeId, id));
    expect(original.bytes.equals(content)).toBe(true);
    expect(original.answer.headers.get('content-disposition')).toBe(
      `attachment; filename="A_ _b_;.csv"; filename*=UTF-8''${encodeURIComponent('Ä "b";.csv')}`,
    );
    expect(original.answer.headers.get('content-security-policy')).toBe('sandbox');
    expect(original.answer.headers.get('x-content-type-options')).toBe('nosniff');
  });

  test('is not sent again to who has it, and not at all to who may not see it', async () => {
    const { id } = await uploaded(team.analyst, team.programmeId);
    for (const path of [apiPaths.samples(team.programmeId, id), apiPaths.original(team.programmeId, id)]) {
      const first = await bytesOf(path);
      const etag = first.answer.headers.get('etag')!;
      expect(etag).toMatch(/^"[\w-]+"$/);
      expect(first.answer.headers.get('cache-control')).toBe('private, no-cache');
      const again = await bytesOf(path, { 'If-None-Match': etag });
      expect([again.answer.status, again.bytes.length]).toEqual([304, 0]);
      const outsider = await fetch(`${api.url}${path}`, { headers: { Cookie: team.outsider.cookie, 'If-None-Match': etag } });
      expect(outsider.status).toBe(404);
      expect(outsider.headers.get('etag')).toBeNull();
    }
  });

  test('reads wavelengths as the person corrects them, and keeps what the file said beside that', async () => {
    const { id, fromNm, reading, corrections } = await uploaded(team.analyst, team.programmeId, {
      meta: { targetName: 'In air', corrections: { medium: 'air', resolvingPower: 4000 } },
    });
    expect(corrections).toEqual({ medium: 'air', resolvingPower: 4000 });
    expect(reading.medium).toMatchObject({ value: 'air', how: 'corrected' });
    expect(reading.resolvingPower).toMatchObject({ value: 4000, how: 'corrected' });
    expect(fromNm - 500).toBeGreaterThan(0.13); // 500 nm in air is 500.14 nm in vacuum
    expect(fromNm - 500).toBeLessThan(0.15);
    const stored = await api.db('spectra').where({ id }).first<{ original: Buffer }>('original');
    expect(stored.original.toString()).toContain('# medium: vacuum');
  });

  test('joins a target that exists, by id or by name whatever its capitals', async () => {
    const first = await uploaded(team.analyst, team.programmeId, { meta: { targetName: 'Tern' } });
    const second = await uploaded(team.analyst, team.programmeId, { meta: { targetName: 'TERN', targetKind: 'nebula' } });
    const third = await uploaded(team.analyst, team.programmeId, { meta: { targetId: first.targetId, label: 'third' } });
    expect([second.targetId, third.targetId]).toEqual([first.targetId, first.targetId]);
    expect(third.label).toBe('third');
    const targets = (await team.reader.get(apiPaths.targets(team.programmeId))).body as TargetSummary[];
    expect(targets.map(({ name, kind, spectra: all }) => [name, kind, all.length])).toEqual([['Tern', 'star', 3]]);
  });

  test('takes FITS, packed, as it comes from an instrument', async () => {
    const content = readFileSync(new URL('../../seeds/data/spectra/plover-7-ultraviolet.fits.gz', import.meta.url));
    const detail = await uploaded(team.analyst, team.programmeId, { content, fileName: 'p7.fits.gz' });
    expect(detail).toMatchObject({ points: 27_000, label: 'p7', resolvingPower: 30_000, reading: { objectName: { value: 'Plover 7' } } });
    const { bytes } = await bytesOf(apiPaths.original(team.programmeId, detail.id));
    expect(bytes.equals(content)).toBe(true);
  });
});

describe('a file that is there already', () => {
  withApi();

  test('is refused, with the spectrum that has it', async () => {
    const content = spectrumText(600);
    const first = await uploaded(team.analyst, team.programmeId, { content, meta: { targetName: 'One', label: 'the first' } });
    const before = await countRows();
    const answer = await upload(team.lead, team.programmeId, { content, fileName: 'other name.csv', meta: { targetName: 'Two' } });
    expect(answer.status).toBe(409);
    expect(problemOf(answer)).toMatchObject({
      code: 'duplicate_spectrum',
      current: { id: first.id, label: 'the first', targetName: 'One' },
    });
    expect(problemOf(answer).detail).toContain('"the first" of One');
    expect(await countRows()).toEqual(before);
  });

  test('is stored once when it comes five times at once', async () => {
    const content = spectrumText(601);
    const answers = await Promise.all([1, 2, 3, 4, 5].map(() => upload(team.analyst, team.programmeId, { content })));
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409, 409, 409, 409]);
    expect(await spectra()).toHaveLength(1);
  });

  test('is taken by another programme, which learns nothing of the first', async () => {
    const content = spectrumText(602);
    await uploaded(team.analyst, team.programmeId, { content });
    const others = await makeTeam(api);
    expect((await upload(others.analyst, others.programmeId, { content })).status).toBe(201);
  });
});

describe('a file that cannot be read', () => {
  withApi();

  const unreadable: [string, string, string | Buffer][] = [
    ['a web page', 'spectrum.fits', '<!doctype html><html><body><script>alert(1)</script></body></html>'],
    ['a picture', 'spectrum.csv', Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13])],
    ['words', 'notes.csv', 'dear diary,\ntoday we observed\n'],
    ['a single row', 'one.csv', 'wavelength (nm),flux\n500,1\n'],
    ['a wavelength that is none', 'bad.csv', `wavelength (nm),flux\n${'x,1\n'.repeat(20)}`],
    [
      'a truncated FITS file',
      'cut.fits',
      Buffer.from(`${'SIMPLE  =                    T'.padEnd(80)}${'BITPIX  =                    8'.padEnd(80)}`),
    ],
    ['a truncated gzip', 'cut.csv.gz', gzipSync(spectrumText()).subarray(0, 500)],
    ['a gzip that grows without end', 'bomb.csv.gz', gzipSync(Buffer.alloc(300 * 1024 * 1024, '1'), { level: 9 })],
  ];

  test.each(unreadable)('%s: is refused in a sentence, and nothing of it stays', async (_, fileName, content) => {
    const before = await countRows();
    const answer = await upload(team.analyst, team.programmeId, { content, fileName });
    expect(answer.status).toBe(422);
    const problem = problemOf(answer);
    expect(problem.code).toBe('unreadable_spectrum');
    expect(problem.detail).toMatch(/^[A-Z].{15,}/s);
    expect(problem.detail).not.toMatch(/undefined|TypeError|RangeError|\.js|\.ts/);
    expect(problem.errors).toEqual([{ pointer: '/file', detail: problem.detail }]);
    expect(await countRows()).toEqual(before);
  });

  test('an empty one: is refused before it is read', async () => {
    const answer = await upload(team.analyst, team.programmeId, { content: '' });
    expect([answer.status, problemOf(answer).errors]).toEqual([400, [{ pointer: '/file', detail: 'must be a file that is not empty' }]]);
  });
});

describe('what is said about a file', () => {
  withApi();

  const refused: [string, Record<string, unknown> | string, string][] = [
    ['that is no JSON', '{"targetName":', '/meta'],
    ['that is no object', '"Star"', '/meta'],
    ['that names no target', {}, '/meta'],
    ['that names two targets', { targetName: 'A', targetId: '00000000-0000-4000-8000-000000000000' }, '/meta'],
    ['that sets what is not its to set', { targetName: 'A', createdBy: 'me', programmeId: 'x', simulated: true }, '/meta/createdBy'],
    ['with a correction that is not known', { targetName: 'A', corrections: { medium: 'water' } }, '/meta/corrections/medium'],
    ['with a correction too many', { targetName: 'A', corrections: { shift: 1 } }, '/meta/corrections/shift'],
    ['with a resolving power that is none', { targetName: 'A', corrections: { resolvingPower: -5 } }, '/meta/corrections/resolvingPower'],
    ['with a name that is too long', { targetName: 'A'.repeat(121) }, '/meta/targetName'],
    ['with a kind that is none', { targetName: 'A', targetKind: 'planet' }, '/meta/targetKind'],
  ];

  test.each(refused)('%s: is refused at its place', async (_, meta, pointer) => {
    const before = await countRows();
    const answer = await upload(team.analyst, team.programmeId, { meta });
    expect(answer.status).toBe(400);
    expect(problemOf(answer).errors!.map((error) => error.pointer)).toContain(pointer);
    expect(await countRows()).toEqual(before);
  });

  test('cannot put a spectrum into a target of another programme', async () => {
    const others = await makeTeam(api);
    const { targetId } = await uploaded(others.analyst, others.programmeId);
    const before = await countRows();
    expect((await upload(team.analyst, team.programmeId, { meta: { targetId } })).status).toBe(404);
    expect(await countRows()).toEqual(before);
  });
});

describe('an upload that is cut off', () => {
  withApi();

  test('leaves nothing behind, and the server serves on', async () => {
    const before = await countRows();
    const { port } = new URL(api.url);
    const socket = connect(Number(port), '127.0.0.1');
    await once(socket, 'connect');
    const head = '--x\r\nContent-Disposition: form-data; name="file"; filename="a.csv"\r\n\r\n';
    socket.write(
      `POST ${apiPaths.spectra(team.programmeId)} HTTP/1.1\r\nHost: 127.0.0.1:${port}\r\nX-Foreveil: 1\r\nCookie: ${team.analyst.cookie}\r\n` +
        `Content-Type: multipart/form-data; boundary=x\r\nContent-Length: 100000\r\n\r\n${head}${spectrumText().slice(0, 3000)}`,
    );
    await new Promise((resolve) => setTimeout(resolve, 200));
    socket.destroy();
    await new Promise((resolve) => setTimeout(resolve, 200));
    expect(await countRows()).toEqual(before);
    expect(await spectra()).toEqual([]);
    expect((await upload(team.analyst, team.programmeId)).status).toBe(201);
  });
});

describe('where a programme may keep little', () => {
  withApi({ programmeLimitBytes: 3 * Buffer.byteLength(spectrumText(0)) + 100 });

  test('exactly what fits is taken, also when all comes at once', async () => {
    const answers = await Promise.all([1, 2, 3, 4, 5, 6].map(() => upload(team.analyst, team.programmeId)));
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 201, 201, 413, 413, 413]);
    expect(await spectra()).toHaveLength(3);
  });
});

describe('where reading may take no time', () => {
  withApi({ readSeconds: 0.001 });

  test('a file that takes longer is refused, and the server serves on', async () => {
    const answer = await upload(team.analyst, team.programmeId);
    expect(answer.status).toBe(422);
    expect(problemOf(answer).detail).toMatch(/^Reading the file took more than 0.001 s/);
    expect((await team.reader.get(apiPaths.me)).status).toBe(200);
  });
});
