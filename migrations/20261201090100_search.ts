import type { Knex } from 'knex';

/** What a row of a search is ordered by, with and without a species named; a page is found by the key of the one before. */
const ORDERS = ['wavelength_nm', 'velocity_km_s', 'equivalent_width_nm'];

/** Searches of a person's own, and the indexes that answer one over millions of identifications page by page. */
export async function up(db: Knex): Promise<void> {
  for (const order of ORDERS) {
    await db.raw(`create index identifications_by_${order} on identifications (programme_id, state, ${order}, id)`);
    await db.raw(`create index identifications_by_species_${order} on identifications (programme_id, state, species, ${order}, id)`);
  }
  await db.raw('create index identifications_of_target on identifications (target_id, species, state, velocity_km_s)');
  await db.schema.createTable('saved_searches', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('user_id').notNullable().references('users.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.jsonb('query').notNullable();
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.check('char_length(name) between 1 and 120', [], 'saved_searches_name');
  });
  await db.raw('create unique index saved_searches_name_once on saved_searches (user_id, lower(name))');
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('saved_searches');
  await db.raw('drop index identifications_of_target');
  for (const order of ORDERS) {
    await db.raw(`drop index identifications_by_species_${order}`);
    await db.raw(`drop index identifications_by_${order}`);
  }
}
