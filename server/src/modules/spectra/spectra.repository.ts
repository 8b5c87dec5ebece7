import type { Reading, ReadingCorrections, Spectrum, SpectrumSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';

/** A spectrum as the reader delivers it, ready to be stored. */
export interface NewSpectrum {
  readonly targetId: string;
  readonly userId: string;
  readonly label: string;
  readonly fileName: string;
  readonly original: Uint8Array;
  readonly sha256: string;
  readonly reading: Reading;
  readonly corrections: ReadingCorrections;
  readonly spectrum: Spectrum;
  readonly preview: SpectrumSummary['preview'];
}

const bytesOf = (column: Uint8Array | Float64Array): Buffer => Buffer.from(column.buffer, column.byteOffset, column.byteLength);

/** @returns the new id, or null when the programme already has this file */
export async function insertSpectrum(db: Knex, { programmeId }: Scope, made: NewSpectrum): Promise<string | null> {
  const { spectrum, reading } = made;
  const points = spectrum.wavelength.length;
  const [row] = await db('spectra')
    .insert({
      programme_id: programmeId,
      target_id: made.targetId,
      created_by: made.userId,
      label: made.label,
      file_name: made.fileName,
      size_bytes: made.original.length,
      sha256: made.sha256,
      points,
      from_nm: spectrum.wavelength[0],
      to_nm: spectrum.wavelength[points - 1],
      resolving_power: spectrum.resolvingPower,
      observed_at: reading.observedAt.value,
      instrument: reading.instrument,
      flux_kind: spectrum.fluxKind,
      frame: spectrum.frame,
      reading: JSON.stringify(reading),
      corrections: JSON.stringify(made.corrections),
      preview: made.preview && JSON.stringify(made.preview),
      original: bytesOf(made.original),
      wavelength: bytesOf(spectrum.wavelength),
      flux: bytesOf(spectrum.flux),
      sigma: spectrum.sigma && bytesOf(spectrum.sigma),
      bad: bytesOf(spectrum.bad),
    })
    .onConflict(['programme_id', 'sha256'])
    .ignore()
    .returning<{ id: string }[]>('id');
  return row?.id ?? null;
}

export async function findSpectrumIdByHash(db: Knex, { programmeId }: Scope, sha256: string): Promise<string | null> {
  const row = await db('spectra').where({ programme_id: programmeId, sha256 }).first<{ id: string }>('id');
  return row?.id ?? null;
}

/** Bytes of original files that a programme keeps, its row held so that two uploads cannot both take the last room. */
export async function lockStoredBytes(db: Knex, { programmeId }: Scope): Promise<number> {
  await db('programmes').where({ id: programmeId }).forUpdate().first('id');
  const row = await db('spectra')
    .where({ programme_id: programmeId })
    .first<{ bytes: string }>(db.raw('coalesce(sum(size_bytes), 0) as bytes'));
  return Number(row.bytes);
}
