import type { Knex } from 'knex';

/** Settings of an analysis that a programme keeps under a name. A run keeps its own copy, so a recipe may change or go. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('analysis_recipes', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').notNullable().references('programmes.id').onDelete('CASCADE');
    t.text('name').notNullable();
    t.jsonb('settings').notNullable();
    t.integer('version').notNullable().defaultTo(1);
    t.uuid('created_by').notNullable().references('users.id');
    t.uuid('changed_by').notNullable().references('users.id');
    t.timestamp('changed_at').notNullable().defaultTo(db.fn.now());
    t.check('char_length(name) between 1 and 120', [], 'analysis_recipes_name_length');
    t.check(`jsonb_typeof(settings) = 'object'`, [], 'analysis_recipes_settings');
    t.check('version >= 1', [], 'analysis_recipes_version');
  });
  await db.raw('create unique index analysis_recipes_name_once on analysis_recipes (programme_id, lower(name))');
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('analysis_recipes');
}
