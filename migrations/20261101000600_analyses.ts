import type { Knex } from 'knex';

/**
 * Runs of the pipeline, with the phases of the IVOA Universal Worker Service. `attempt_token` is the fence: a worker may write only while
 * it still holds the token of its attempt. `result` is kept as the text that the pipeline made (json, not jsonb), digit by digit.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('analyses', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').notNullable();
    t.uuid('spectrum_id').notNullable();
    t.uuid('line_list_id').notNullable().references('line_lists.id');
    t.text('phase').notNullable().defaultTo('QUEUED').checkIn(['QUEUED', 'EXECUTING', 'COMPLETED', 'ERROR', 'ABORTED'], 'analyses_phase');
    t.double('progress').notNullable().defaultTo(0);
    t.text('step').checkIn(['continuum', 'noise', 'detection', 'measurement', 'systems', 'identification'], 'analyses_step');
    t.jsonb('settings').notNullable();
    t.text('program_version').notNullable();
    t.text('error');
    t.uuid('requested_by').notNullable().references('users.id');
    t.timestamp('requested_at').notNullable().defaultTo(db.raw('clock_timestamp()'));
    t.timestamp('started_at');
    t.timestamp('ended_at');
    t.integer('attempts').notNullable().defaultTo(0);
    t.uuid('attempt_token');
    t.timestamp('heartbeat_at');
    t.uuid('job_id');
    t.json('result');
    t.integer('feature_count');
    t.double('temperature_k');
    t.double('temperature_sigma_k');
    t.boolean('temperature_constrained');
    t.foreign(['programme_id', 'spectrum_id']).references(['programme_id', 'id']).inTable('spectra').onDelete('CASCADE');
    t.unique(['programme_id', 'id']);
    t.index(['spectrum_id', 'requested_at']);
    t.check('progress between 0 and 1', [], 'analyses_progress');
    t.check(`(phase = 'COMPLETED') = (result is not null) and (phase = 'COMPLETED') = (feature_count is not null)`, [], 'analyses_result');
    t.check(`(phase = 'ERROR') = (error is not null)`, [], 'analyses_error');
    t.check(`(phase in ('COMPLETED', 'ERROR', 'ABORTED')) = (ended_at is not null)`, [], 'analyses_ended');
    t.check(`(phase = 'EXECUTING') = (attempt_token is not null)`, [], 'analyses_token');
    t.check('temperature_k > 0 and temperature_sigma_k >= 0 and feature_count >= 0', [], 'analyses_numbers');
  });
  await db.raw(`create unique index analyses_one_active on analyses (spectrum_id) where phase in ('QUEUED', 'EXECUTING')`);
  await db.raw(`create index analyses_heartbeat on analyses (heartbeat_at) where phase in ('QUEUED', 'EXECUTING')`);
  await db.raw(`
    create function analyses_phase_may_follow() returns trigger language plpgsql as $$
    begin
      if old.phase in ('COMPLETED', 'ERROR', 'ABORTED') then
        raise exception 'an analysis that is % is not changed any more', old.phase using errcode = 'check_violation';
      end if;
      if old.phase = 'QUEUED' and new.phase = 'COMPLETED' then
        raise exception 'an analysis cannot be COMPLETED before it was EXECUTING' using errcode = 'check_violation';
      end if;
      return new;
    end $$`);
  await db.raw('create trigger analyses_phase before update on analyses for each row execute function analyses_phase_may_follow()');
  // The newest completed run of a spectrum: what screens and reports show.
  await db.schema.alterTable('spectra', (t) => {
    t.uuid('current_analysis_id').references('analyses.id').onDelete('SET NULL');
  });
}

export async function down(db: Knex): Promise<void> {
  await db.schema.alterTable('spectra', (t) => {
    t.dropColumn('current_analysis_id');
  });
  await db.schema.dropTable('analyses');
  await db.raw('drop function analyses_phase_may_follow()');
}
