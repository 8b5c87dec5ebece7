import type { Knex } from 'knex';

/**
 * Two spectra of a programme set side by side. The analyses that a comparison rests on are noted, and its result is kept as the text that the
 * program made; a re-run is a new row that supersedes the one before, so that an address keeps showing what was seen there.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('comparisons', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').notNullable();
    t.text('name').notNullable();
    t.uuid('spectrum_a').notNullable();
    t.uuid('spectrum_b').notNullable();
    t.uuid('analysis_a').notNullable().references('analyses.id').onDelete('CASCADE');
    t.uuid('analysis_b').notNullable().references('analyses.id').onDelete('CASCADE');
    t.uuid('line_list_id').notNullable().references('line_lists.id');
    t.uuid('supersedes').unique().references('comparisons.id').onDelete('SET NULL');
    t.text('phase')
      .notNullable()
      .defaultTo('QUEUED')
      .checkIn(['QUEUED', 'EXECUTING', 'COMPLETED', 'ERROR', 'ABORTED'], 'comparisons_phase');
    t.jsonb('settings').notNullable();
    t.text('program_version').notNullable();
    t.text('error');
    t.uuid('requested_by').notNullable().references('users.id');
    t.timestamp('requested_at').notNullable().defaultTo(db.raw('clock_timestamp()'));
    t.timestamp('ended_at');
    t.integer('attempts').notNullable().defaultTo(0);
    t.json('result');
    t.integer('version').notNullable().defaultTo(1);
    t.foreign(['programme_id', 'spectrum_a']).references(['programme_id', 'id']).inTable('spectra').onDelete('CASCADE');
    t.foreign(['programme_id', 'spectrum_b']).references(['programme_id', 'id']).inTable('spectra').onDelete('CASCADE');
    t.unique(['programme_id', 'id']);
    t.index(['programme_id', 'requested_at']);
    t.index(['spectrum_a']);
    t.index(['spectrum_b']);
    t.check('spectrum_a <> spectrum_b', [], 'comparisons_two_spectra');
    t.check('char_length(name) between 1 and 200', [], 'comparisons_name_length');
    t.check(`(phase = 'COMPLETED') = (result is not null)`, [], 'comparisons_result');
    t.check(`(phase = 'ERROR') = (error is not null)`, [], 'comparisons_error');
    t.check(`(phase in ('COMPLETED', 'ERROR', 'ABORTED')) = (ended_at is not null)`, [], 'comparisons_ended');
  });
  await db.schema.createTable('verdict_rulings', (t) => {
    t.uuid('comparison_id').notNullable().references('comparisons.id').onDelete('CASCADE');
    t.text('line_key').notNullable();
    t.text('verdict').checkIn(['shared', 'only-a', 'only-b', 'telluric', 'cannot-tell'], 'verdict_rulings_verdict');
    t.text('remark').notNullable();
    t.uuid('ruled_by').notNullable().references('users.id');
    t.timestamp('ruled_at').notNullable().defaultTo(db.raw('clock_timestamp()'));
    t.integer('version').notNullable().defaultTo(1);
    t.primary(['comparison_id', 'line_key']);
    t.check('char_length(remark) <= 2000 and char_length(line_key) <= 200', [], 'verdict_rulings_lengths');
  });
  // what was ruled and when: this table only grows, and goes with its comparison
  await db.schema.createTable('verdict_ruling_events', (t) => {
    t.bigIncrements('id');
    t.uuid('comparison_id').notNullable().references('comparisons.id').onDelete('CASCADE');
    t.text('line_key').notNullable();
    t.text('verdict');
    t.text('remark').notNullable();
    t.uuid('ruled_by').notNullable().references('users.id');
    t.timestamp('ruled_at').notNullable().defaultTo(db.raw('clock_timestamp()'));
    t.index(['comparison_id', 'line_key']);
  });
  await db.raw(`
    create trigger verdict_ruling_events_only_grow before update or truncate on verdict_ruling_events
    for each statement execute function refuse_change()`);
  await db.raw(`select jobs.create_queue('compare', :options)`, { options: JSON.stringify({ policy: 'standard' }) });
}

export async function down(db: Knex): Promise<void> {
  await db.raw(`select jobs.delete_queue('compare')`);
  await db.schema.dropTable('verdict_ruling_events');
  await db.schema.dropTable('verdict_rulings');
  await db.schema.dropTable('comparisons');
}
