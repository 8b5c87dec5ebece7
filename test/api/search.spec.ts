import { apiPaths, type FoundIdentification, type Page, type SavedSearch } from '@foreveil/shared';
import { startApi, type Api } from '../support/api/api.js';
import { decided, type Decided } from '../support/api/identifications.js';
import { makeTeam, type Person, type Team } from '../support/api/person.js';
import { stored } from '../support/api/spectra.js';

let api: Api;
let team: Team;
let place: Pick<Decided, 'targetId' | 'spectrumId'>;
beforeAll(async () => {
  api = await startApi();
});
beforeEach(async () => {
  team = await makeTeam(api);
  place = await newPlace(team);
});
afterAll(() => api.close());

async function newPlace(of: Team, targetName?: string) {
  const { id, targetId } = await stored(api, of, targetName);
  return { targetId, spectrumId: id };
}

const line = (species: string | null, wavelengthNm: number, velocityKmPerS = 0, equivalentWidthNm = 0.01): Decided => ({
  ...{ species, wavelengthNm, velocityKmPerS, equivalentWidthNm },
  ...place,
});
const page = async (query: string, person: Person = team.reader) =>
  (await person.get(`${apiPaths.searchIdentifications}?${query}`).expect(200)).body as Page<FoundIdentification>;
const wavelengths = async (query: string, person?: Person) => (await page(query, person)).rows.map(({ wavelengthNm }) => wavelengthNm);

test('accepted identifications are found by species, with where and by whom', async () => {
  await decided(api, team, [line('Na I', 589.1, -12), line('K I', 766.7), { ...line('Na I', 589.7), state: 'rejected' }, line(null, 600)]);
  const { rows, next } = await page('species=Na%20I');
  expect(next).toBeNull();
  expect(rows).toEqual([
    expect.objectContaining({
      ...{ programmeId: team.programmeId, targetName: 'Star', spectrumLabel: 'star', wavelengthNm: 589.1, velocityKmPerS: -12 },
      ...{ species: 'Na I', state: 'accepted', decidedBy: team.reviewer.name, lineSource: 'made up', simulated: false },
    }),
  ]);
  expect(await wavelengths('species=unidentified')).toEqual([600]);
  expect(await wavelengths('state=rejected')).toEqual([589.7]);
  expect(await wavelengths('')).toEqual([589.1, 600, 766.7]);
});

test('ranges of wavelength, velocity and width all have to hold', async () => {
  await decided(api, team, [
    line('Fe I', 500, 10, 0.01),
    line('Fe I', 510, 20, 0.02),
    line('Fe I', 520, 30, 0.03),
    line('Fe I', 530, 40, 0.04),
  ]);
  expect(await wavelengths('fromNm=505&toNm=525')).toEqual([510, 520]);
  expect(await wavelengths('fromKmPerS=15&toKmPerS=40')).toEqual([510, 520, 530]);
  expect(await wavelengths('fromWidthNm=0.025')).toEqual([520, 530]);
  expect(await wavelengths('fromNm=505&toKmPerS=35&fromWidthNm=0.025')).toEqual([520]);
  expect(await wavelengths('family=stellar')).toEqual([]);
});

test('companions are lines of the same target at about the same velocity', async () => {
  const other = await newPlace(team, 'Other');
  await decided(api, team, [
    line('Na I', 589.1, -12),
    line('K I', 766.7, -14),
    line('Na I', 589.5, 40), // its velocity has no K I
    { ...line('Na I', 588, -12), ...other }, // its target has none
  ]);
  expect(await wavelengths('species=Na%20I&withSpecies=K%20I')).toEqual([589.1]);
  expect(await wavelengths('species=Na%20I&withSpecies=K%20I&companionKmPerS=1')).toEqual([]);
  expect(await wavelengths('species=Na%20I&withoutSpecies=K%20I')).toEqual([588, 589.5]);
});

test('a removed spectrum takes its lines out of the search, as rows and as companions, until it is put back', async () => {
  const other = await newPlace(team, 'Star');
  await decided(api, team, [line('Na I', 589.1, -12), { ...line('K I', 766.7, -12), ...other }]);
  const remove = (removed: boolean) =>
    api
      .db('spectra')
      .where({ id: other.spectrumId })
      .update({ removed_at: removed ? new Date() : null, removed_by: removed ? team.lead.userId : null });
  await remove(true);
  expect(await wavelengths('')).toEqual([589.1]);
  expect(await wavelengths('withSpecies=K%20I')).toEqual([]);
  await remove(false);
  expect(await wavelengths('')).toEqual([589.1, 766.7]);
  expect(await wavelengths('withSpecies=K%20I')).toEqual([589.1]);
});

test.each(['wavelength', 'velocity', 'width'] as const)(
  'pages by %s neither repeat nor leave out a row, also among equals',
  async (order) => {
    const rows = Array.from({ length: 57 }, (_, i) => line('Fe II', 500 + (i % 7), (i % 5) * 10, 0.001 * (1 + (i % 3))));
    const ids = await decided(api, team, rows);
    const second = await makeTeam(api);
    const there = await newPlace(second);
    ids.push(
      ...(await decided(
        api,
        second,
        rows.slice(0, 20).map((row) => ({ ...row, ...there })),
      )),
    );
    await api.db('memberships').insert({ programme_id: second.programmeId, user_id: team.reader.userId, role: 'reader' });
    const seen: FoundIdentification[] = [];
    for (let next: string | null = ''; next !== null;) {
      const found: Page<FoundIdentification> = await page(`order=${order}&limit=10${next ? `&after=${next}` : ''}`);
      seen.push(...found.rows);
      next = found.next;
    }
    expect(seen.map(({ id }) => id).sort()).toEqual(ids.sort());
    const key = { wavelength: 'wavelengthNm', velocity: 'velocityKmPerS', width: 'equivalentWidthNm' } as const;
    const values = seen.map((row) => row[key[order]] as number);
    expect(values).toEqual([...values].sort((a, b) => a - b));
  },
);

test('nobody finds what they may not read, and a role that ends takes its rows along', async () => {
  await decided(api, team, [line('Na I', 589.1)]);
  expect(await wavelengths('', team.outsider)).toEqual([]);
  expect(await wavelengths(`programmeId=${team.programmeId}`, team.outsider)).toEqual([]);
  expect(await wavelengths(`programmeId=${team.programmeId}`)).toEqual([589.1]);
  await api.db('memberships').where({ user_id: team.reader.userId }).delete();
  expect(await wavelengths('')).toEqual([]);
});

test.each(['fromNm=x', 'state=maybe', 'order=name', 'limit=0', 'after=x', 'after=WzEsMl0', 'programmeId=1', 'nonsense=1'])(
  '%s is refused with its field',
  async (query) => {
    const { body } = await team.reader.get(`${apiPaths.searchIdentifications}?${query}`).expect(400);
    const { errors } = body as { errors: { pointer: string }[] };
    expect(errors.map(({ pointer }) => pointer)).toContain(`/${query.split('=')[0]}`);
  },
);

test('what is found can be taken away as CSV, rounded to its errors and disarmed', async () => {
  await api.db('programmes').where({ id: team.programmeId }).update({ name: '=SUM(1)' });
  await decided(api, team, [line('Na I', 589.123456, -12.3456, 0.0123456)]);
  const { text } = await team.reader.get(`${apiPaths.searchCsv}?species=Na%20I`).expect(200);
  const [names, row] = text.split('\r\n').filter((l) => !l.startsWith('#'));
  const cell = (name: string) => row!.split(',')[names!.split(',').indexOf(name)];
  expect(cell('programme')).toBe("'=SUM(1)");
  expect([cell('lambda_obs_nm'), cell('lambda_obs_err_nm'), cell('ew_pm'), cell('rv_km_s'), cell('rv_err_km_s')]).toEqual([
    ...['589.12346', '0.00040', '12.35', '-12.35', '0.20'],
  ]);
});

test('a search is kept by its owner under a name, replaced by that name, and removed', async () => {
  const keep = (query: object, name = 'Sodium') => team.reader.post(apiPaths.savedSearches, { name, query });
  await keep({ species: 'Na I' }).expect(201);
  const { body } = await keep({ species: 'Na I', fromKmPerS: -20 }, 'SODIUM').expect(201);
  const list = async (person: Person) => (await person.get(apiPaths.savedSearches).expect(200)).body as SavedSearch[];
  expect(await list(team.reader)).toEqual([expect.objectContaining({ name: 'SODIUM', query: { species: 'Na I', fromKmPerS: -20 } })]);
  expect(await list(team.lead)).toEqual([]);
  await keep({ species: 5 }).expect(400);
  await team.lead.delete(apiPaths.savedSearch((body as SavedSearch).id)).expect(404);
  await team.reader.delete(apiPaths.savedSearch((body as SavedSearch).id)).expect(204);
  expect(await list(team.reader)).toEqual([]);
});
