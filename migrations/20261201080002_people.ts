import type { Knex } from 'knex';

/** Whom the site and a programme let in, and how: administrators, rotating sessions, links by mail, invitations, tokens, a second factor. */
export async function up(db: Knex): Promise<void> {
  await db.schema.alterTable('users', (t) => {
    t.boolean('administrator').notNullable().defaultTo(false);
  });
  await db.schema.alterTable('memberships', (t) => {
    t.integer('version').notNullable().defaultTo(1);
  });
  // A cookie names its generation. One that is older than the present, which was seen in use, was copied: the session ends.
  await db.schema.alterTable('sessions', (t) => {
    t.integer('generation').notNullable().defaultTo(1);
    t.timestamp('rotated_at').notNullable().defaultTo(db.fn.now());
    t.timestamp('confirmed_at').defaultTo(db.fn.now());
    t.text('device').notNullable().defaultTo('');
    t.check('generation >= 1 and char_length(device) <= 200', [], 'sessions_generation');
  });
  await db.schema.createTable('account_links', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('user_id').notNullable().references('users.id').onDelete('CASCADE').index();
    t.text('purpose').notNullable().checkIn(['password_reset', 'email_change'], 'account_links_purpose');
    t.text('secret_hash').notNullable().unique();
    t.text('new_email');
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.timestamp('expires_at').notNullable();
    t.timestamp('used_at');
    t.check(`(purpose = 'email_change') = (new_email is not null)`, [], 'account_links_new_email');
  });
  await db.schema.createTable('invitations', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').references('programmes.id').onDelete('CASCADE').index();
    t.text('email').notNullable();
    t.text('role').checkIn(['reader', 'analyst', 'reviewer', 'lead'], 'invitations_role');
    t.text('secret_hash').notNullable().unique();
    t.uuid('invited_by').notNullable().references('users.id');
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.timestamp('expires_at').notNullable();
    t.timestamp('accepted_at');
    t.uuid('accepted_by').references('users.id');
    t.timestamp('revoked_at');
    t.check('(programme_id is null) = (role is null)', [], 'invitations_role_of_programme');
    t.check('(accepted_at is null) = (accepted_by is null)', [], 'invitations_accepted');
    t.check('accepted_at is null or revoked_at is null', [], 'invitations_one_end');
    t.check('email = lower(email)', [], 'invitations_email_lower');
  });
  await db.raw(`create unique index invitations_one_open on invitations (programme_id, email) nulls not distinct
    where accepted_at is null and revoked_at is null`);
  await db.raw('create index invitations_by on invitations (invited_by, created_at)');
  await db.schema.createTable('access_tokens', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('user_id').notNullable().references('users.id').onDelete('CASCADE').index();
    t.text('name').notNullable();
    t.text('scope').notNullable().checkIn(['read', 'write'], 'access_tokens_scope');
    t.text('secret_hash').notNullable().unique();
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.timestamp('expires_at').notNullable();
    t.timestamp('last_used_at');
    t.check('char_length(name) between 1 and 120', [], 'access_tokens_name');
  });
  await db.schema.createTable('second_factors', (t) => {
    t.uuid('user_id').primary().references('users.id').onDelete('CASCADE');
    t.text('sealed_secret').notNullable();
    t.timestamp('confirmed_at');
    t.bigInteger('last_step').notNullable().defaultTo(0);
    t.integer('failures').notNullable().defaultTo(0);
    t.timestamp('blocked_until');
  });
  await db.schema.createTable('recovery_codes', (t) => {
    t.uuid('user_id').notNullable().references('users.id').onDelete('CASCADE');
    t.text('code_hash').notNullable();
    t.timestamp('used_at');
    t.primary(['user_id', 'code_hash']);
  });
  await db.schema.createTable('first_administrator_secrets', (t) => {
    t.text('secret_hash').primary();
    t.timestamp('expires_at').notNullable();
  });
}

export async function down(db: Knex): Promise<void> {
  for (const table of [
    'first_administrator_secrets',
    'recovery_codes',
    'second_factors',
    'access_tokens',
    'invitations',
    'account_links',
  ]) {
    await db.schema.dropTable(table);
  }
  await db.schema.alterTable('sessions', (t) => {
    t.dropColumns('generation', 'rotated_at', 'confirmed_at', 'device');
  });
  await db.schema.alterTable('memberships', (t) => {
    t.dropColumn('version');
  });
  await db.schema.alterTable('users', (t) => {
    t.dropColumn('administrator');
  });
}
