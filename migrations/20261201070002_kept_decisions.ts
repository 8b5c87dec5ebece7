import type { Knex } from 'knex';

/** Decisions of which someone said that they stand although an analysis does not find their feature. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('kept_decisions', (t) => {
    t.uuid('identification_id').notNullable().references('identifications.id').onDelete('CASCADE');
    t.uuid('analysis_id').notNullable().references('analyses.id').onDelete('CASCADE');
    t.uuid('kept_by').notNullable().references('users.id');
    t.timestamp('kept_at').notNullable().defaultTo(db.fn.now());
    t.primary(['identification_id', 'analysis_id']);
  });
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('kept_decisions');
}
