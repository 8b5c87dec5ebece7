import type { Knex } from 'knex';

/**
 * The file of a spectrum may be read again with other corrections: the columns are then those of the newest reading, every reading stays in
 * the record, and an analysis says which one it rests on. A spectrum that is removed stays for a while and can be put back; its file may be
 * uploaded again meanwhile.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.alterTable('spectra', (t) => {
    t.integer('version').notNullable().defaultTo(1);
    t.integer('reading_revision').notNullable().defaultTo(1);
    t.text('recipe_name');
    t.timestamp('removed_at');
    t.uuid('removed_by').references('users.id');
    t.check('version >= 1 and reading_revision >= 1', [], 'spectra_versions');
    t.check('(removed_at is null) = (removed_by is null)', [], 'spectra_removed_whole');
    t.dropUnique(['programme_id', 'sha256'], 'spectra_file_once');
  });
  await db.raw('create unique index spectra_file_once on spectra (programme_id, sha256) where removed_at is null');
  await db.schema.alterTable('analyses', (t) => {
    t.integer('reading_revision').notNullable().defaultTo(1);
  });
  await db.schema.createTable('spectrum_readings', (t) => {
    t.uuid('programme_id').notNullable();
    t.uuid('spectrum_id').notNullable();
    t.integer('revision').notNullable();
    t.timestamp('at').notNullable().defaultTo(db.raw('clock_timestamp()'));
    t.uuid('user_id').notNullable().references('users.id');
    t.jsonb('reading').notNullable();
    t.jsonb('corrections').notNullable();
    t.text('recipe_name');
    t.integer('points').notNullable();
    t.double('from_nm').notNullable();
    t.double('to_nm').notNullable();
    t.primary(['spectrum_id', 'revision']);
    t.foreign(['programme_id', 'spectrum_id']).references(['programme_id', 'id']).inTable('spectra').onDelete('CASCADE');
    t.check('revision >= 1', [], 'spectrum_readings_revision');
  });
  await db.raw(`
    insert into spectrum_readings (programme_id, spectrum_id, revision, at, user_id, reading, corrections, points, from_nm, to_nm)
    select programme_id, id, 1, created_at, created_by, reading, corrections, points, from_nm, to_nm from spectra`);
  await db.raw(`
    create trigger spectrum_readings_stay before update on spectrum_readings
    for each statement execute function refuse_change()`);
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('spectrum_readings');
  await db.schema.alterTable('analyses', (t) => {
    t.dropColumn('reading_revision');
  });
  await db.raw('drop index spectra_file_once');
  await deleteSecondCopies(db);
  await db.schema.alterTable('spectra', (t) => {
    t.dropColumns('version', 'reading_revision', 'recipe_name', 'removed_at', 'removed_by');
    t.unique(['programme_id', 'sha256'], { indexName: 'spectra_file_once' });
  });
}

/**
 * Without removals a file is there once: of several copies the one that is not removed stays, else the last one that was. The others go, with
 * their decisions and the history of these, which otherwise only grows.
 */
async function deleteSecondCopies(db: Knex): Promise<void> {
  await db.raw(`
    create temporary table second_copies on commit drop as
    select id from (
      select id, row_number() over (partition by programme_id, sha256 order by removed_at desc nulls first, id) as copy from spectra
    ) as copies where copy > 1`);
  await db.raw('alter table identification_events disable trigger identification_events_only_grow');
  await db.raw(`
    delete from identification_events where identification_id in
      (select id from identifications where spectrum_id in (select id from second_copies))`);
  await db.raw('alter table identification_events enable trigger identification_events_only_grow');
  await db.raw('delete from identifications where spectrum_id in (select id from second_copies)');
  await db.raw('delete from spectra where id in (select id from second_copies)');
}
