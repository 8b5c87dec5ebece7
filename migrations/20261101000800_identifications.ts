import type { Knex } from 'knex';

/**
 * People's decisions. The facts of the feature and of the line are copied, so that a decision keeps its meaning when the spectrum is
 * analysed again; `feature_index` points into the spectrum's current analysis, or is null when that no longer finds the feature.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('identifications', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').notNullable();
    t.uuid('target_id').notNullable();
    t.uuid('spectrum_id').notNullable();
    t.integer('feature_index');
    t.text('kind').notNullable().checkIn(['dip', 'peak'], 'identifications_kind');
    t.double('wavelength_nm').notNullable();
    t.double('wavelength_sigma_nm').notNullable();
    t.double('equivalent_width_nm').notNullable();
    t.double('equivalent_width_sigma_nm').notNullable();
    t.double('fwhm_nm').notNullable();
    t.double('depth').notNullable();
    t.double('snr').notNullable();
    t.specificType('flags', 'text[]').notNullable();
    t.uuid('line_list_id').notNullable().references('line_lists.id');
    t.text('line_id');
    t.text('species');
    t.double('rest_nm');
    t.text('line_source');
    t.text('family').checkIn(['stellar', 'interstellar', 'nebular', 'telluric'], 'identifications_family');
    t.text('system_id');
    t.double('velocity_km_s');
    t.double('velocity_sigma_km_s');
    t.double('probability').notNullable();
    t.text('state').notNullable().checkIn(['proposed', 'accepted', 'rejected'], 'identifications_state');
    t.integer('version').notNullable().defaultTo(1);
    t.uuid('decided_by').notNullable().references('users.id');
    t.timestamp('decided_at').notNullable().defaultTo(db.fn.now());
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.foreign(['programme_id', 'target_id']).references(['programme_id', 'id']).inTable('targets');
    t.foreign(['programme_id', 'spectrum_id']).references(['programme_id', 'id']).inTable('spectra');
    t.foreign(['line_list_id', 'line_id']).references(['line_list_id', 'line_id']).inTable('lines');
    t.index(['spectrum_id']);
    t.index(['target_id']);
    t.index(['programme_id', 'state']);
    t.check('feature_index >= 0 and version >= 1', [], 'identifications_index');
    t.check('wavelength_nm > 0 and fwhm_nm > 0 and rest_nm > 0', [], 'identifications_wavelength');
    t.check('wavelength_sigma_nm >= 0 and equivalent_width_sigma_nm >= 0 and velocity_sigma_km_s >= 0', [], 'identifications_sigma');
    t.check('probability between 0 and 1', [], 'identifications_probability');
    // an unidentified feature names no line, an identified one names all of it
    t.check(
      '(line_id is null) = (species is null) and (line_id is null) = (rest_nm is null) and (line_id is null) = (family is null) and ' +
        '(line_id is null) = (velocity_km_s is null)',
      [],
      'identifications_line_whole',
    );
  });
  await db.raw(
    'create unique index identifications_one_per_feature on identifications (spectrum_id, feature_index) where feature_index is not null',
  );
  await db.schema.createTable('identification_events', (t) => {
    t.bigIncrements('id');
    t.uuid('identification_id').notNullable().references('identifications.id').index();
    t.timestamp('at').notNullable().defaultTo(db.fn.now());
    t.uuid('user_id').notNullable().references('users.id');
    t.text('action').notNullable().checkIn(['propose', 'accept', 'reject', 'reopen'], 'identification_events_action');
    t.text('from_state').notNullable();
    t.text('to_state').notNullable();
    t.text('reading').notNullable();
    t.text('remark').notNullable().defaultTo('');
    t.check('char_length(remark) <= 2000', [], 'identification_events_remark');
  });
  await db.raw(`
    create function refuse_change() returns trigger language plpgsql as $$
    begin
      raise exception '% only grows: % is refused', tg_table_name, lower(tg_op) using errcode = 'restrict_violation';
    end $$`);
  await db.raw(`
    create trigger identification_events_only_grow before update or delete or truncate on identification_events
    for each statement execute function refuse_change()`);
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('identification_events');
  await db.schema.dropTable('identifications');
  await db.raw('drop function refuse_change()');
}
