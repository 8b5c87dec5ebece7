import type { Knex } from 'knex';

/** Features and their ranked candidates as rows, so that measured numbers can be searched; the arguments stay beside them as jsonb. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('features', (t) => {
    t.uuid('analysis_id').notNullable().references('analyses.id').onDelete('CASCADE');
    t.integer('feature_index').notNullable();
    t.text('kind').notNullable().checkIn(['dip', 'peak'], 'features_kind');
    t.double('wavelength_nm').notNullable();
    t.double('wavelength_sigma_nm').notNullable();
    t.double('equivalent_width_nm').notNullable();
    t.double('equivalent_width_sigma_nm').notNullable();
    t.double('fwhm_nm').notNullable();
    t.double('depth').notNullable();
    t.double('significance').notNullable();
    t.double('snr').notNullable();
    t.specificType('flags', 'text[]').notNullable();
    t.double('unidentified_probability').notNullable();
    t.primary(['analysis_id', 'feature_index']);
    t.check('feature_index >= 0', [], 'features_index');
    t.check('wavelength_nm > 0 and fwhm_nm > 0', [], 'features_wavelength');
    t.check('wavelength_sigma_nm >= 0 and equivalent_width_sigma_nm >= 0', [], 'features_sigma');
    t.check('unidentified_probability between 0 and 1', [], 'features_probability');
  });
  await db.schema.createTable('candidates', (t) => {
    t.uuid('analysis_id').notNullable();
    t.integer('feature_index').notNullable();
    t.integer('rank').notNullable();
    t.text('line_id').notNullable();
    t.text('species').notNullable();
    t.double('rest_nm').notNullable();
    t.text('family').notNullable().checkIn(['stellar', 'interstellar', 'nebular', 'telluric'], 'candidates_family');
    t.text('system_id').notNullable();
    t.double('velocity_km_s').notNullable();
    t.double('velocity_sigma_km_s').notNullable();
    t.double('probability').notNullable();
    t.double('share').notNullable();
    t.jsonb('evidence').notNullable();
    t.primary(['analysis_id', 'feature_index', 'rank']);
    t.foreign(['analysis_id', 'feature_index']).references(['analysis_id', 'feature_index']).inTable('features').onDelete('CASCADE');
    t.check('rank >= 1 and rest_nm > 0', [], 'candidates_rank');
    t.check('velocity_sigma_km_s >= 0', [], 'candidates_sigma');
    t.check('probability between 0 and 1 and share between 0 and 1', [], 'candidates_probability');
  });
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('candidates');
  await db.schema.dropTable('features');
}
