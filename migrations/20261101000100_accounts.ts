import type { Knex } from 'knex';

/** People and their sign-in sessions. A session row is looked up on every request, so deleting it ends the session at once. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('users', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.text('email').notNullable();
    t.text('name').notNullable();
    t.text('password_hash').notNullable();
    t.boolean('active').notNullable().defaultTo(true);
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.check(`email = lower(email) and email like '%_@_%'`, [], 'users_email_lower');
    t.check('char_length(name) between 1 and 120', [], 'users_name_length');
    t.unique(['email']);
  });
  await db.schema.createTable('sessions', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('user_id').notNullable().references('users.id').onDelete('CASCADE').index();
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.timestamp('last_seen_at').notNullable().defaultTo(db.fn.now());
    t.timestamp('expires_at').notNullable();
    t.check('expires_at > created_at', [], 'sessions_expire_later');
  });
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('sessions');
  await db.schema.dropTable('users');
}
