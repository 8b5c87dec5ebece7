import { randomUUID } from 'node:crypto';
import type { KnownFile, Reading, ReadingCorrections, Spectrum, SpectrumSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';
import { asBytea, asFloat8, asInt4, asJsonb, asText, asUuid, copyRow } from '../../database/copy-row.js';
import type { Trx } from '../../database/transaction.js';
import { asOriginal, sizeOf, type Original } from './original.js';

/** A spectrum as the reader delivers it, ready to be stored. */
export interface NewSpectrum {
  readonly targetId: string;
  readonly userId: string;
  readonly label: string;
  readonly fileName: string;
  readonly original: Original;
  readonly sha256: string;
  readonly reading: Reading;
  readonly corrections: ReadingCorrections;
  /** name of the recipe that the corrections come from */
  readonly recipe?: string | null;
  readonly spectrum: Spectrum;
  readonly preview: SpectrumSummary['preview'];
}

/** @returns the new id */
export async function insertSpectrum(trx: Trx, { programmeId }: Scope, made: NewSpectrum): Promise<string> {
  const id = randomUUID();
  const { spectrum, reading, recipe = null } = made;
  const points = spectrum.wavelength.length;
  const [fromNm, toNm] = [spectrum.wavelength[0]!, spectrum.wavelength[points - 1]!];
  await copyRow(trx, 'spectra', {
    id: asUuid(id),
    programme_id: asUuid(programmeId),
    target_id: asUuid(made.targetId),
    created_by: asUuid(made.userId),
    label: asText(made.label),
    file_name: asText(made.fileName),
    size_bytes: asInt4(sizeOf(made.original)),
    sha256: asText(made.sha256),
    points: asInt4(points),
    from_nm: asFloat8(fromNm),
    to_nm: asFloat8(toNm),
    resolving_power: asFloat8(spectrum.resolvingPower),
    observed_at: asText(reading.observedAt.value),
    instrument: asText(reading.instrument),
    flux_kind: asText(spectrum.fluxKind),
    frame: asText(spectrum.frame),
    reading: asJsonb(reading),
    corrections: asJsonb(made.corrections),
    recipe_name: asText(recipe),
    preview: asJsonb(made.preview),
    original: asOriginal(made.original),
    wavelength: asBytea(spectrum.wavelength),
    flux: asBytea(spectrum.flux),
    sigma: asBytea(spectrum.sigma),
    bad: asBytea(spectrum.bad),
  });
  await insertReading(trx, { programmeId }, { ...made, recipe, id, revision: 1 });
  return id;
}

type ReadingRow = Pick<NewSpectrum, 'userId' | 'reading' | 'corrections' | 'spectrum' | 'recipe'> & {
  readonly id: string;
  readonly revision: number;
};

/** One more way in which the file of a spectrum was read; the record only grows. */
export async function insertReading(trx: Trx, { programmeId }: Scope, row: ReadingRow): Promise<void> {
  const { wavelength } = row.spectrum;
  await trx('spectrum_readings').insert({
    programme_id: programmeId,
    spectrum_id: row.id,
    revision: row.revision,
    user_id: row.userId,
    reading: JSON.stringify(row.reading),
    corrections: JSON.stringify(row.corrections),
    recipe_name: row.recipe ?? null,
    points: wavelength.length,
    from_nm: wavelength[0],
    to_nm: wavelength[wavelength.length - 1],
  });
}

const bytesOf = (column: Uint8Array | Float64Array): Buffer => Buffer.from(column.buffer, column.byteOffset, column.byteLength);

/** Puts a new reading in the place of the one before; its analyses no longer count as those of the spectrum. */
export async function updateReading(trx: Trx, { programmeId }: Scope, row: ReadingRow & Pick<NewSpectrum, 'preview'>): Promise<void> {
  const { spectrum, reading } = row;
  const points = spectrum.wavelength.length;
  await trx('spectra')
    .where({ programme_id: programmeId, id: row.id })
    .update({
      points,
      from_nm: spectrum.wavelength[0],
      to_nm: spectrum.wavelength[points - 1],
      resolving_power: spectrum.resolvingPower,
      observed_at: reading.observedAt.value,
      instrument: reading.instrument,
      flux_kind: spectrum.fluxKind,
      frame: spectrum.frame,
      reading: JSON.stringify(reading),
      corrections: JSON.stringify(row.corrections),
      recipe_name: row.recipe ?? null,
      preview: row.preview && JSON.stringify(row.preview),
      wavelength: bytesOf(spectrum.wavelength),
      flux: bytesOf(spectrum.flux),
      sigma: spectrum.sigma && bytesOf(spectrum.sigma),
      bad: bytesOf(spectrum.bad),
      reading_revision: row.revision,
      current_analysis_id: null,
      version: trx.raw('version + 1'),
    });
  await insertReading(trx, { programmeId }, row);
}

export async function findSpectrumIdByHash(db: Knex, { programmeId }: Scope, sha256: string): Promise<string | null> {
  const row = await db('spectra').where({ programme_id: programmeId, sha256, removed_at: null }).first<{ id: string }>('id');
  return row?.id ?? null;
}

/** Which of these files the programme has. */
export async function findKnownFiles(db: Knex, { programmeId }: Scope, hashes: readonly string[]): Promise<KnownFile[]> {
  return db('spectra as s')
    .join('targets as t', 't.id', 's.target_id')
    .where({ 's.programme_id': programmeId, 's.removed_at': null })
    .whereIn('s.sha256', hashes)
    .select<KnownFile[]>({ sha256: 's.sha256', spectrumId: 's.id', label: 's.label', targetId: 't.id', targetName: 't.name' });
}

/** Bytes of original files that a programme keeps, its row held so that two uploads cannot both take the last room. */
export async function lockStoredBytes(db: Knex, { programmeId }: Scope): Promise<number> {
  await db('programmes').where({ id: programmeId }).forUpdate().first('id');
  const row = await db('spectra')
    .where({ programme_id: programmeId })
    .first<{ bytes: string }>(db.raw('coalesce(sum(size_bytes), 0) as bytes'));
  return Number(row.bytes);
}
