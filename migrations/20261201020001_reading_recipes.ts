import type { Knex } from 'knex';

/** How files of one kind are to be read: a team's corrections under a name, found again by the signature of the files. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('reading_recipes', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').notNullable().references('programmes.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.jsonb('signature').notNullable();
    t.jsonb('corrections').notNullable();
    t.uuid('created_by').notNullable().references('users.id');
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.uuid('changed_by').notNullable().references('users.id');
    t.timestamp('changed_at').notNullable().defaultTo(db.raw('clock_timestamp()'));
    t.integer('version').notNullable().defaultTo(1);
    t.check('char_length(name) between 1 and 120', [], 'reading_recipes_name_length');
    t.check(`jsonb_typeof(signature) = 'object' and jsonb_typeof(corrections) = 'object'`, [], 'reading_recipes_objects');
    t.check('version >= 1', [], 'reading_recipes_version');
    t.unique(['programme_id', 'id']);
  });
  await db.raw('create unique index reading_recipes_name_once on reading_recipes (programme_id, lower(name))');
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('reading_recipes');
}
