import type { Knex } from 'knex';

/**
 * Reduced 1-D spectra: the bytes as delivered, what was read from them, and the columns as little-endian arrays
 * (wavelength in vacuum nm, flux and sigma as float64; bad as one byte each). A spectrum is never changed after it is stored.
 */
export async function up(db: Knex): Promise<void> {
  await db.schema.createTable('spectra', (t) => {
    t.uuid('id').primary().defaultTo(db.fn.uuid());
    t.uuid('programme_id').notNullable();
    t.uuid('target_id').notNullable();
    t.text('label').notNullable();
    t.text('file_name').notNullable();
    t.integer('size_bytes').notNullable();
    t.text('sha256').notNullable();
    t.integer('points').notNullable();
    t.double('from_nm').notNullable();
    t.double('to_nm').notNullable();
    t.double('resolving_power');
    t.text('observed_at');
    t.text('instrument');
    t.text('flux_kind').notNullable().checkIn(['per_wavelength', 'per_frequency', 'normalised', 'counts', 'unknown'], 'spectra_flux_kind');
    t.text('frame')
      .notNullable()
      .checkIn(['topocentric', 'geocentric', 'heliocentric', 'barycentric', 'lsrk', 'lsrd', 'source', 'unknown'], 'spectra_frame');
    t.jsonb('reading').notNullable();
    t.jsonb('corrections').notNullable();
    t.jsonb('preview');
    t.binary('original').notNullable();
    t.binary('wavelength').notNullable();
    t.binary('flux').notNullable();
    t.binary('sigma');
    t.binary('bad').notNullable();
    t.uuid('created_by').notNullable().references('users.id');
    t.timestamp('created_at').notNullable().defaultTo(db.raw('clock_timestamp()'));
    t.foreign(['programme_id', 'target_id']).references(['programme_id', 'id']).inTable('targets').onDelete('CASCADE');
    t.unique(['programme_id', 'sha256'], { indexName: 'spectra_file_once' });
    t.unique(['programme_id', 'id']);
    t.index(['target_id', 'created_at']);
    t.check(`sha256 ~ '^[0-9a-f]{64}$'`, [], 'spectra_sha256');
    t.check('points > 0 and from_nm > 0 and to_nm >= from_nm', [], 'spectra_range');
    t.check('resolving_power > 0', [], 'spectra_resolving_power');
    t.check('size_bytes = octet_length(original)', [], 'spectra_size');
    t.check(
      'octet_length(wavelength) = 8 * points and octet_length(flux) = 8 * points and octet_length(bad) = points and ' +
        'coalesce(octet_length(sigma) = 8 * points, true)',
      [],
      'spectra_columns_equally_long',
    );
    t.check('char_length(file_name) between 1 and 255 and char_length(label) between 1 and 120', [], 'spectra_names');
  });
  // Float columns do not compress, and uncompressed storage lets a slice be read without reading the whole.
  for (const column of ['original', 'wavelength', 'flux', 'sigma', 'bad']) {
    await db.raw('alter table spectra alter column ?? set storage external', [column]);
  }
}

export async function down(db: Knex): Promise<void> {
  await db.schema.dropTable('spectra');
}
