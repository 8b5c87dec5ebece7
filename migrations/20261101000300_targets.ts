import type { Knex } from 'knex';

/** What was observed. A name is used once in a programme, whatever its capitals. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('targets', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').notNullable().references('programmes.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.text('kind').notNullable().checkIn(['star', 'nebula', 'sightline', 'other'], 'targets_kind');
    t.boolean('simulated').notNullable().defaultTo(false);
    t.double('ra_deg');
    t.double('dec_deg');
    t.text('notes').notNullable().defaultTo('');
    t.integer('version').notNullable().defaultTo(1);
    t.uuid('created_by').notNullable().references('users.id');
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.check('char_length(name) between 1 and 120', [], 'targets_name_length');
    t.check('ra_deg >= 0 and ra_deg < 360', [], 'targets_ra_range');
    t.check('dec_deg between -90 and 90', [], 'targets_dec_range');
    t.check('version >= 1', [], 'targets_version');
    t.unique(['programme_id', 'id']); // so that a spectrum's key can name both: it cannot belong to another programme than its target
  });
  await db.raw('create unique index targets_name_once on targets (programme_id, lower(name))');
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('targets');
}
