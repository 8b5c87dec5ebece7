import type { Knex } from 'knex';

/**
 * Clouds as things of a programme: a name, a velocity range and the spectra that look through them. What they hold is not kept here: it is read
 * from the comparisons, so it never differs from them.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('clouds', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').notNullable().references('programmes.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.double('from_km_per_s').notNullable();
    t.double('to_km_per_s').notNullable();
    t.text('frame').notNullable().checkIn(['barycentric', 'heliocentric', 'lsrk', 'lsrd'], 'clouds_frame');
    t.text('notes').notNullable().defaultTo('');
    t.integer('version').notNullable().defaultTo(1);
    t.uuid('changed_by').notNullable().references('users.id');
    t.timestamp('changed_at').notNullable().defaultTo(db.fn.now());
    t.unique(['programme_id', 'id']);
    t.check('char_length(name) between 1 and 120 and char_length(notes) <= 10000', [], 'clouds_lengths');
    t.check('from_km_per_s >= -3000 and from_km_per_s < to_km_per_s and to_km_per_s <= 3000', [], 'clouds_range');
  });
  await db.raw('create unique index clouds_name_once on clouds (programme_id, lower(name))');
  await db.schema.createTable('cloud_sightlines', (t) => {
    t.uuid('programme_id').notNullable();
    t.uuid('cloud_id').notNullable();
    t.uuid('spectrum_id').notNullable();
    t.primary(['cloud_id', 'spectrum_id']);
    t.foreign(['programme_id', 'cloud_id']).references(['programme_id', 'id']).inTable('clouds').onDelete('CASCADE');
    t.foreign(['programme_id', 'spectrum_id']).references(['programme_id', 'id']).inTable('spectra').onDelete('CASCADE');
    t.index(['programme_id', 'spectrum_id']);
  });
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('cloud_sightlines');
  await db.schema.dropTable('clouds');
}
