import { readFileSync } from 'node:fs';
import { apiPaths, parseDefaultList } from '@foreveil/shared';
import Papa from 'papaparse';
import { defaultLineListId, loadLineList } from '../../server/src/modules/linelists/line-list-store.js';
import { SODIUM, analysisOf, candidate, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { makeTeam, type Team } from '../support/api/person.js';
import { stored } from '../support/api/spectra.js';

let api: Api;
let team: Team;
beforeAll(async () => {
  api = await startApi();
  team = await makeTeam(api);
});
afterAll(() => api.close());

const seedText = (name: string) => readFileSync(new URL(`../../seeds/data/${name}`, import.meta.url), 'utf8');
const rowsOf = (csv: string) =>
  Papa.parse<Record<string, string>>(csv.slice(csv.indexOf('\r\nspectrum,feature,') + 2), { header: true, skipEmptyLines: true }).data;

test('the report of a target holds its spectra, with what was decided and the facts of the line list', async () => {
  const [first, second] = [await stored(api, team, '=Formula star'), await stored(api, team, '=Formula star')];
  await complete(
    api,
    first.analysis!.id,
    analysisOf([feature(0, 500.5), feature(1, 501.5, { candidates: [], unidentifiedProbability: 1 })]),
  );
  await complete(api, second.analysis!.id, analysisOf([feature(0, 503, { candidates: [candidate({ probability: 0.6 })] })]));
  const decision = { action: 'accept', lineId: SODIUM.lineId, systemId: 'cloud1', remark: '=1+1' };
  await team.reviewer.post(apiPaths.decide(team.programmeId, first.analysis!.id, 0), decision, { 'If-Match': '"0"' }).expect(200);

  const answer = await team.reader.get(apiPaths.targetReport(team.programmeId, first.targetId)).buffer(true).expect(200);
  expect(answer.headers['content-type']).toBe('text/csv; charset=utf-8; header=present');
  expect(answer.headers['content-disposition']).toBe(
    `attachment; filename="=Formula star lines.csv"; filename*=UTF-8''%3DFormula%20star%20lines.csv`,
  );
  expect(answer.text).toContain(`# spectrum 1 sha256: ${first.sha256}\r\n`);
  expect(answer.text).toContain(`# spectrum 2 sha256: ${second.sha256}\r\n`);
  expect(rowsOf(answer.text)).toMatchObject([
    {
      ...{ spectrum: '1', feature: '0', lambda_obs_nm: '500.50000', lambda_obs_err_nm: '0.00040', species: 'Na I', ion_stage: '1' },
      ...{
        lambda_rest_vac_nm: '589.158325',
        lambda_rest_air_nm: '588.995085',
        log_gf: '0.108',
        ew_pm: '50.0',
        ew_err_pm: '1.2',
        rv_km_s: '-12.50',
      },
      ...{ status: 'accepted', reviewer: team.reviewer.name, remark: "'=1+1", source: expect.stringContaining('NIST') as string },
    },
    { spectrum: '1', feature: '1', title: 'unidentified', status: 'unreviewed', reviewer: '' },
    { spectrum: '2', feature: '0', lambda_obs_nm: '503.00000', species: 'Na I', probability: '0.6', status: 'unreviewed' },
  ]);

  const alone = await team.reader.get(apiPaths.spectrumReport(team.programmeId, second.id)).buffer(true).expect(200);
  expect(rowsOf(alone.text)).toMatchObject([{ spectrum: '1', lambda_obs_nm: '503.00000' }]);
  expect(alone.text).not.toContain(first.sha256);
  const exports = await api.db('audit').where({ programme_id: team.programmeId, action: 'report_exported' }).orderBy('id');
  expect(exports).toMatchObject([
    { user_id: team.reader.userId, subject: first.targetId },
    { user_id: team.reader.userId, subject: second.id },
  ]);
});

test('a report of a spectrum that nobody analysed yet says so', async () => {
  const spectrum = await stored(api, team, 'Fresh');
  const answer = await team.reader.get(apiPaths.spectrumReport(team.programmeId, spectrum.id)).buffer(true).expect(200);
  expect(answer.text).toContain('# analysis: none completed yet\r\n');
  expect(rowsOf(answer.text)).toEqual([]);
});

test('the line list in the database is, number by number, the one of the files', async () => {
  const list = await loadLineList(api.db, (await defaultLineListId(api.db))!);
  const parsed = parseDefaultList(seedText('lines.csv'), seedText('telluric.csv'));
  expect(list).toEqual(JSON.parse(JSON.stringify(parsed))); // by way of text, in which there is no -0 either
  const lists = await team.reader.get(apiPaths.lineLists).expect(200);
  expect(lists.body).toMatchObject([{ name: list.name, version: list.version, isDefault: true, lines: list.lines.length }]);
});
