import type { Knex } from 'knex';

/**
 * Deleting a programme in two steps: first it is only marked and can be had back, after 30 days it goes with everything in it. What only grows
 * may go with its programme, in a transaction that says so; the trail of who did what stays.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.alterTable('programmes', (t) => {
    t.integer('version').notNullable().defaultTo(1);
    t.timestamp('deleted_at').index();
    t.uuid('deleted_by').references('users.id');
    t.check('(deleted_at is null) = (deleted_by is null)', [], 'programmes_deleted');
  });
  await db.raw(`
    alter table identifications
      drop constraint identifications_programme_id_target_id_foreign,
      drop constraint identifications_programme_id_spectrum_id_foreign,
      add constraint identifications_programme_id_target_id_foreign foreign key (programme_id, target_id)
        references targets (programme_id, id) on delete cascade,
      add constraint identifications_programme_id_spectrum_id_foreign foreign key (programme_id, spectrum_id)
        references spectra (programme_id, id) on delete cascade`);
  await db.raw(`
    alter table identification_events
      drop constraint identification_events_identification_id_foreign,
      add constraint identification_events_identification_id_foreign foreign key (identification_id)
        references identifications (id) on delete cascade`);
  await db.raw(`
    create or replace function refuse_change() returns trigger language plpgsql as $$
    begin
      if tg_op = 'DELETE' and tg_table_name <> 'audit' and current_setting('foreveil.purging', true) = 'on' then
        return null;
      end if;
      raise exception '% only grows: % is refused', tg_table_name, lower(tg_op) using errcode = 'restrict_violation';
    end $$`);
}

export async function down(db: Knex): Promise<void> {
  await db.raw(`
    create or replace function refuse_change() returns trigger language plpgsql as $$
    begin
      raise exception '% only grows: % is refused', tg_table_name, lower(tg_op) using errcode = 'restrict_violation';
    end $$`);
  await db.raw(`
    alter table identification_events
      drop constraint identification_events_identification_id_foreign,
      add constraint identification_events_identification_id_foreign foreign key (identification_id) references identifications (id)`);
  await db.raw(`
    alter table identifications
      drop constraint identifications_programme_id_target_id_foreign,
      drop constraint identifications_programme_id_spectrum_id_foreign,
      add constraint identifications_programme_id_target_id_foreign foreign key (programme_id, target_id)
        references targets (programme_id, id),
      add constraint identifications_programme_id_spectrum_id_foreign foreign key (programme_id, spectrum_id)
        references spectra (programme_id, id)`);
  await db.schema.alterTable('programmes', (t) => {
    t.dropColumns('version', 'deleted_at', 'deleted_by');
  });
}
