import type { Knex } from 'knex';

/** Who did what, when: only grows. `facts` holds what is needed to understand the act without the rows it touched. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('audit', (t) => {
    t.bigIncrements('id');
    t.timestamp('at').notNullable().defaultTo(db.fn.now());
    t.uuid('user_id').references('users.id');
    t.uuid('programme_id').index();
    t.text('action').notNullable();
    t.text('subject').notNullable();
    t.jsonb('facts').notNullable();
  });
  await db.raw(`
    create trigger audit_only_grows before update or delete or truncate on audit
    for each statement execute function refuse_change()`);
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('audit');
}
