import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import type { Knex } from 'knex';
import { repoRoot } from '../../server/src/config/config.js';
import { createKnex } from '../../server/src/database/knex.js';
import { db as command, makeDatabase, makeEmptyDatabase, type TestDatabase } from '../support/api/database.js';

const FILES = readdirSync(join(repoRoot, 'migrations')).filter((name) => name.endsWith('.ts'));

/** Everything in the schemas of ours: tables with columns, checks, keys, indexes, triggers and functions. */
async function shapeOf(db: Knex): Promise<string[]> {
  const { rows } = await db.raw<{ rows: { thing: string }[] }>(`
    select format('column %s.%s.%s %s %s %s', table_schema, table_name, column_name, data_type, is_nullable, column_default) as thing
      from information_schema.columns where table_schema in ('public', 'jobs')
    union all select format('constraint %s %s', conrelid::regclass, pg_get_constraintdef(oid)) from pg_constraint
      where connamespace in (select oid from pg_namespace where nspname in ('public', 'jobs'))
    union all select indexdef from pg_indexes where schemaname in ('public', 'jobs')
    union all select pg_get_triggerdef(oid) from pg_trigger where not tgisinternal
    union all select format('function %s', proname) from pg_proc
      where pronamespace in (select oid from pg_namespace where nspname in ('public', 'jobs'))
    order by 1`);
  return rows.map(({ thing }) => thing).filter((thing) => !thing.includes('knex_migrations'));
}

const spectrumRow = (changes: object = {}) => ({
  ...{ label: 's', file_name: 's.csv', size_bytes: 3, sha256: 'a'.repeat(64), points: 2, from_nm: 500, to_nm: 501 },
  ...{ flux_kind: 'unknown', frame: 'unknown', reading: '{}', corrections: '{}', original: Buffer.from('abc') },
  ...{ wavelength: Buffer.alloc(16), flux: Buffer.alloc(16), bad: Buffer.alloc(2), ...changes },
});
const analysisRow = (changes: object = {}) => ({ settings: '{}', program_version: '0', ...changes });

async function withDatabase(database: TestDatabase, work: (db: Knex) => Promise<void>): Promise<void> {
  const db = createKnex(database.url, { pool: 2 });
  try {
    await work(db);
  } finally {
    await db.destroy();
    await database.drop();
  }
}

test('run up, down and up again, and end where they were', async () => {
  const database = await makeEmptyDatabase();
  await withDatabase(database, async (db) => {
    expect(await shapeOf(db)).toEqual([]);
    expect(await command(database.url, 'migrate')).toBe(`${FILES.length} migrations run\n`);
    const first = await shapeOf(db);
    expect(first.length).toBeGreaterThan(100);
    expect(await command(database.url, 'migrate')).toBe('0 migrations run\n');
    expect(await command(database.url, 'rollback')).toBe(`${FILES.length} migrations rolled back\n`);
    expect(await shapeOf(db)).toEqual([]);
    await command(database.url, 'migrate');
    expect(await shapeOf(db)).toEqual(first);
  });
});

test('run down although a removed spectrum was uploaded again and has decisions', async () => {
  const database = await makeDatabase();
  await withDatabase(database, async (db) => {
    const one = async (table: string, values: object) => (await db(table).insert(values).returning<{ id: string }[]>('id'))[0]!.id;
    const user = await one('users', { email: 'a@example.org', name: 'A', password_hash: '-' });
    const programme = await one('programmes', { name: 'P', created_by: user });
    const target = await one('targets', { programme_id: programme, name: 'T', kind: 'star', created_by: user });
    const file = { programme_id: programme, target_id: target, created_by: user };
    const removed = await one('spectra', spectrumRow({ ...file, removed_at: new Date(), removed_by: user }));
    await one('spectra', spectrumRow(file));
    const list = (await db('line_lists').first<{ id: string }>('id')).id;
    await one('analyses', analysisRow({ programme_id: programme, spectrum_id: removed, line_list_id: list, requested_by: user }));
    const decision = await one('identifications', {
      ...{ programme_id: programme, target_id: target, spectrum_id: removed, line_list_id: list, kind: 'dip', flags: [] },
      ...{ wavelength_nm: 500, wavelength_sigma_nm: 0.001, equivalent_width_nm: 0.01, equivalent_width_sigma_nm: 0.001, fwhm_nm: 0.01 },
      ...{ depth: 0.4, snr: 100, probability: 0.9, state: 'accepted', decided_by: user },
    });
    await db('identification_events').insert({
      ...{ identification_id: decision, user_id: user, action: 'accept', from_state: 'none', to_state: 'accepted', reading: 'none' },
    });
    expect(await command(database.url, 'rollback')).toBe(`${FILES.length} migrations rolled back\n`);
  });
});

test('run once when three programs start at the same time', async () => {
  const database = await makeEmptyDatabase();
  await withDatabase(database, async () => {
    const outputs = await Promise.all([1, 2, 3].map(() => command(database.url, 'migrate')));
    expect(outputs.sort()).toEqual(['0 migrations run\n', '0 migrations run\n', `${FILES.length} migrations run\n`]);
  });
});

describe('the tables refuse', () => {
  let db: Knex;
  let database: TestDatabase;
  let ids: { user: string; programme: string; other: string; target: string; spectrum: string; analysis: string; list: string };

  beforeAll(async () => {
    database = await makeDatabase();
    db = createKnex(database.url, { pool: 2 });
    const one = async (table: string, values: object) => (await db(table).insert(values).returning<{ id: string }[]>('id'))[0]!.id;
    const user = await one('users', { email: 'a@example.org', name: 'A', password_hash: '-' });
    const programme = await one('programmes', { name: 'P', created_by: user });
    const other = await one('programmes', { name: 'Q', created_by: user });
    const target = await one('targets', { programme_id: programme, name: 'T', kind: 'star', created_by: user });
    const spectrum = await one('spectra', spectrumRow({ programme_id: programme, target_id: target, created_by: user }));
    const list = (await db('line_lists').first<{ id: string }>('id')).id;
    const analysis = await one(
      'analyses',
      analysisRow({ programme_id: programme, spectrum_id: spectrum, line_list_id: list, requested_by: user }),
    );
    ids = { user, programme, other, target, spectrum, analysis, list };
  });
  afterAll(async () => {
    await db.destroy();
    await database.drop();
  });

  const ours = () => ({ programme_id: ids.programme, target_id: ids.target, created_by: ids.user, sha256: 'b'.repeat(64) });
  const featureRow = () => ({
    ...{ analysis_id: ids.analysis, feature_index: 0, kind: 'dip', wavelength_nm: 500, wavelength_sigma_nm: 0, equivalent_width_nm: -1 },
    ...{ equivalent_width_sigma_nm: 0, fwhm_nm: 1, depth: 0, significance: 1, snr: 1, flags: [], unidentified_probability: 0 },
  });
  const lineRow = () => ({
    ...{ line_list_id: ids.list, line_id: 'X', position: 1_000_000, species: 'X I', element: 'X', ion_stage: 1, wavelength_nm: 500 },
    ...{ type: 'allowed', settings: ['stellar'], multiplet: '', relative_intensity_scale: '', tier: 1, source: 's' },
  });

  const rows: [string, string, () => object, RegExp][] = [
    ['an e-mail address with capitals', 'users', () => ({ email: 'B@example.org', name: 'B', password_hash: '-' }), /users_email_lower/],
    ['an e-mail address used twice', 'users', () => ({ email: 'a@example.org', name: 'B', password_hash: '-' }), /users_email_unique/],
    ['a role that is none', 'memberships', () => ({ programme_id: ids.programme, user_id: ids.user, role: 'owner' }), /memberships_role/],
    [
      'a kind of target that is none',
      'targets',
      () => ({ programme_id: ids.programme, name: 'U', kind: 'moon', created_by: ids.user }),
      /targets_kind/,
    ],
    [
      'a right ascension of 360 degrees',
      'targets',
      () => ({ ...{ programme_id: ids.programme, name: 'U', kind: 'star' }, ra_deg: 360, created_by: ids.user }),
      /targets_ra_range/,
    ],
    [
      'a spectrum of another programme than its target',
      'spectra',
      () => spectrumRow({ ...ours(), programme_id: ids.other }),
      /spectra_programme_id_target_id_foreign/,
    ],
    ['a file twice', 'spectra', () => spectrumRow({ ...ours(), sha256: 'a'.repeat(64) }), /spectra_file_once/],
    ['columns of different lengths', 'spectra', () => spectrumRow({ ...ours(), flux: Buffer.alloc(8) }), /spectra_columns_equally_long/],
    ['errors of another length', 'spectra', () => spectrumRow({ ...ours(), sigma: Buffer.alloc(8) }), /spectra_columns_equally_long/],
    ['a negative wavelength', 'spectra', () => spectrumRow({ ...ours(), from_nm: -1 }), /spectra_range/],
    ['a hash that is none', 'spectra', () => spectrumRow({ ...ours(), sha256: 'x' }), /spectra_sha256/],
    ['a size that is not that of the file', 'spectra', () => spectrumRow({ ...ours(), size_bytes: 4 }), /spectra_size/],
    ['a line at a negative wavelength', 'lines', () => ({ ...lineRow(), wavelength_nm: -1 }), /lines_wavelength/],
    ['a line met in an unknown place', 'lines', () => ({ ...lineRow(), settings: ['lunar'] }), /lines_settings/],
    ['a line of an unknown tier', 'lines', () => ({ ...lineRow(), tier: 3 }), /lines_tier/],
    ['a negative error', 'features', () => ({ ...featureRow(), wavelength_sigma_nm: -1 }), /features_sigma/],
    ['a probability above one', 'features', () => ({ ...featureRow(), unidentified_probability: 1.5 }), /features_probability/],
    ['a feature that is neither dip nor peak', 'features', () => ({ ...featureRow(), kind: 'step' }), /features_kind/],
  ];

  test.each(rows)('%s', async (_, table, row, constraint) => {
    await expect(db(table).insert(row())).rejects.toThrow(constraint);
  });

  test('a second analysis of a spectrum while one is active', async () => {
    const again = analysisRow({ programme_id: ids.programme, spectrum_id: ids.spectrum, line_list_id: ids.list, requested_by: ids.user });
    await expect(db('analyses').insert(again)).rejects.toThrow(/analyses_one_active/);
  });

  test('phases that cannot follow each other, and endings without what belongs to them', async () => {
    const set = (values: object) => Promise.resolve(db('analyses').where({ id: ids.analysis }).update(values));
    const now = db.fn.now();
    await expect(set({ phase: 'DONE' })).rejects.toThrow(/analyses_phase/);
    await expect(set({ phase: 'COMPLETED', result: '{}', feature_count: 0, ended_at: now })).rejects.toThrow(/before it was EXECUTING/);
    await expect(set({ phase: 'EXECUTING' })).rejects.toThrow(/analyses_token/);
    await set({ phase: 'EXECUTING', attempt_token: ids.user });
    await expect(set({ phase: 'COMPLETED', attempt_token: null, ended_at: now })).rejects.toThrow(/analyses_result/);
    await expect(set({ phase: 'ERROR', attempt_token: null, ended_at: now })).rejects.toThrow(/analyses_error/);
    await expect(set({ progress: 1.5 })).rejects.toThrow(/analyses_progress/);
    await set({ phase: 'ABORTED', attempt_token: null, ended_at: now });
    for (const phase of ['QUEUED', 'EXECUTING', 'COMPLETED']) await expect(set({ phase })).rejects.toThrow(/not changed any more/);
  });

  test('two default line lists', async () => {
    await expect(db('line_lists').insert({ name: 'Other', version: '1', is_default: true })).rejects.toThrow(/line_lists_one_default/);
  });
});
