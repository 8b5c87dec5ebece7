import type { Knex } from 'knex';

/**
 * Mail on its way. A row is written in the transaction of the event it tells of, so there is never one without the other, and its key is
 * unique, so an event told twice is one message. `handed_at` is set just before the first byte of the message leaves: a row that was handed
 * over and got no answer is 'unconfirmed' and is not sent again.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('mail_outbox', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('user_id').references('users.id').onDelete('CASCADE').index();
    t.uuid('programme_id').references('programmes.id').onDelete('CASCADE').index();
    t.text('to_address').notNullable();
    t.text('kind').notNullable();
    t.jsonb('facts').notNullable();
    t.text('dedupe_key').notNullable().unique();
    t.boolean('digest').notNullable().defaultTo(false);
    t.text('status')
      .notNullable()
      .defaultTo('waiting')
      .checkIn(['waiting', 'sending', 'sent', 'unconfirmed', 'failed', 'dropped'], 'mail_outbox_status');
    t.integer('attempts').notNullable().defaultTo(0);
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.timestamp('due_at').notNullable().defaultTo(db.fn.now());
    t.uuid('claim_token');
    t.timestamp('claimed_until');
    t.timestamp('handed_at');
    t.timestamp('ended_at');
    t.text('last_error');
    t.check(`(status = 'sending') = (claim_token is not null)`, [], 'mail_outbox_claim');
    t.check(`(status in ('sent', 'unconfirmed', 'failed', 'dropped')) = (ended_at is not null)`, [], 'mail_outbox_ended');
    t.check(`to_address !~ '[[:cntrl:][:space:]]' and to_address like '%_@_%'`, [], 'mail_outbox_address');
  });
  await db.raw(`create index mail_outbox_due on mail_outbox (due_at) where status in ('waiting', 'sending')`);
  await db.schema.createTable('mail_choices', (t) => {
    t.uuid('user_id').notNullable().references('users.id').onDelete('CASCADE');
    t.text('kind').notNullable();
    t.text('choice').notNullable().checkIn(['at_once', 'daily', 'never'], 'mail_choices_choice');
    t.primary(['user_id', 'kind']);
  });
  // what the mail server of a demonstration or a test took in; empty in production
  await db.schema.createTable('received_mail', (t) => {
    t.bigIncrements('id');
    t.timestamp('received_at').notNullable().defaultTo(db.fn.now());
    t.specificType('envelope_to', 'text[]').notNullable();
    t.binary('raw').notNullable();
  });
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('received_mail');
  await db.schema.dropTable('mail_choices');
  await db.schema.dropTable('mail_outbox');
}
