import type { Knex } from 'knex';
import PgBoss from 'pg-boss';

/** The tables of the job queue (pg-boss) and its one queue, made here so that no running program needs the right to create tables. */
export async function up(db: Knex): Promise<void> {
  // pg-boss wraps its script in a transaction of its own; here the migration's transaction takes that place
  const script = PgBoss.getConstructionPlans('jobs')
    .replace(/^\s*BEGIN;/, '')
    .replace(/COMMIT;\s*$/, '');
  await db.raw(script);
  await db.raw(`select jobs.create_queue('analyse', :options)`, { options: JSON.stringify({ policy: 'standard' }) });
}

export async function down(db: Knex): Promise<void> {
  await db.raw('drop schema jobs cascade');
}
