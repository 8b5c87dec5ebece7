import type { Knex } from 'knex';

/** Programmes and the people in them. Everything a team makes belongs to one programme. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('programmes', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.text('name').notNullable();
    t.text('description').notNullable().defaultTo('');
    t.boolean('simulated').notNullable().defaultTo(false);
    t.uuid('created_by').notNullable().references('users.id');
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.check('char_length(name) between 1 and 120', [], 'programmes_name_length');
  });
  await db.schema.createTable('memberships', (t) => {
    t.uuid('programme_id').notNullable().references('programmes.id').onDelete('CASCADE');
    t.uuid('user_id').notNullable().references('users.id').onDelete('CASCADE').index();
    t.text('role').notNullable().checkIn(['reader', 'analyst', 'reviewer', 'lead'], 'memberships_role');
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.primary(['programme_id', 'user_id']);
  });
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('memberships');
  await db.schema.dropTable('programmes');
}
