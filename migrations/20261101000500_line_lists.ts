import type { Knex } from 'knex';

/** Named, versioned, citable sets of lines. `position` keeps the order of the list: ascending in vacuum wavelength. */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('line_lists', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.text('name').notNullable();
    t.text('version').notNullable();
    t.boolean('is_default').notNullable().defaultTo(false);
    t.timestamp('created_at').notNullable().defaultTo(db.fn.now());
    t.unique(['name', 'version']);
  });
  await db.raw('create unique index line_lists_one_default on line_lists (is_default) where is_default');
  await db.schema.createTable('lines', (t) => {
    t.uuid('line_list_id').notNullable().references('line_lists.id').onDelete('CASCADE');
    t.text('line_id').notNullable();
    t.integer('position').notNullable();
    t.text('species').notNullable();
    t.text('element').notNullable();
    t.integer('ion_stage').notNullable();
    t.double('wavelength_nm').notNullable();
    t.text('type').notNullable();
    t.double('lower_energy_per_cm');
    t.double('upper_energy_per_cm');
    t.double('lower_j');
    t.double('upper_j');
    t.double('log_gf');
    t.double('oscillator_strength');
    t.double('einstein_a_per_s');
    t.double('band_fwhm_nm');
    t.specificType('settings', 'text[]').notNullable();
    t.text('multiplet').notNullable();
    t.double('relative_intensity');
    t.text('relative_intensity_scale').notNullable();
    t.smallint('tier').notNullable().checkIn(['1', '2'], 'lines_tier');
    t.text('source').notNullable();
    t.primary(['line_list_id', 'line_id']);
    t.unique(['line_list_id', 'position']);
    t.index(['line_list_id', 'wavelength_nm']);
    t.check('wavelength_nm > 0', [], 'lines_wavelength');
    t.check('ion_stage >= 0', [], 'lines_ion_stage');
    t.check('lower_energy_per_cm >= 0 and upper_energy_per_cm >= 0', [], 'lines_energies');
    t.check('oscillator_strength >= 0 and einstein_a_per_s >= 0 and band_fwhm_nm > 0', [], 'lines_strengths');
    t.check(`settings <@ array['stellar','interstellar','nebular','telluric']`, [], 'lines_settings');
  });
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('lines');
  await db.schema.dropTable('line_lists');
}
