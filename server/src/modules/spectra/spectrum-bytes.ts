import type { Reading, Spectrum } from '@foreveil/shared';
import type { Knex } from 'knex';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';

type Column = 'original' | 'wavelength' | 'flux' | 'sigma' | 'bad';

/** pg gives bytea as text of twice the size, so bytes come in slices; the columns are stored uncompressed, which makes a slice cheap. */
const SLICE = 4 * 1024 * 1024;

/**
 * The bytes of a column in slices, in order; none when the column is null.
 * @param revision of the reading that is meant. @throws unavailable when the file is read anew in between: the slices would not fit together
 */
export async function* slicesOf(db: Knex, { programmeId }: Scope, id: string, column: Column, revision?: number): AsyncGenerator<Buffer> {
  for (let from = 1; ; from += SLICE) {
    const row = await db('spectra')
      .where({ programme_id: programmeId, id, ...(revision === undefined ? {} : { reading_revision: revision }) })
      .first<{ slice: Buffer | null } | undefined>(db.raw('substring(?? from ? for ?) as slice', [column, from, SLICE]));
    if (!row && revision !== undefined) throw new DomainError('unavailable', 'The file is being read anew. Try again.', { retryAfter: 1 });
    if (!row?.slice?.length) return;
    yield row.slice;
    if (row.slice.length < SLICE) return;
  }
}

/** A whole column in memory of its own, so that it can be handed to a thread. */
async function bytesOf(slices: AsyncIterable<Buffer>, length: number): Promise<ArrayBuffer> {
  const all = new Uint8Array(length);
  let at = 0;
  for await (const slice of slices) {
    all.set(slice, at);
    at += slice.length;
  }
  return all.buffer;
}

interface Shape {
  readonly points: number;
  readonly revision: number;
  readonly hasSigma: boolean;
  readonly segments: Reading['segments'] | null;
  readonly observerVelocityKmPerS: number | null;
  readonly fluxCalibration: Spectrum['fluxCalibration'];
}
type Facts = Pick<Spectrum, 'fluxKind' | 'frame' | 'resolvingPower'>;

const findShape = (db: Knex, { programmeId }: Scope, id: string) =>
  db('spectra')
    .where({ programme_id: programmeId, id, removed_at: null })
    .first<(Facts & Shape) | undefined>(
      { fluxKind: 'flux_kind', frame: 'frame', resolvingPower: 'resolving_power', points: 'points', revision: 'reading_revision' },
      db.raw('sigma is not null as "hasSigma"'),
      db.raw(`reading->'segments' as segments`),
      db.raw(`(reading->'observerVelocityKmPerS'->>'value')::float8 as "observerVelocityKmPerS"`),
      db.raw(`reading->'fluxCalibration'->>'value' as "fluxCalibration"`),
    );

/** The columns of a stored spectrum as the analysis takes them; null when the programme has no such spectrum. */
export async function loadSpectrum(db: Knex, scope: Scope, id: string): Promise<Spectrum | null> {
  const row = await findShape(db, scope, id);
  if (!row) return null;
  const { hasSigma, points, revision, segments, ...facts } = row;
  const column = (name: Column, width: number) => bytesOf(slicesOf(db, scope, id, name, revision), width * points);
  // one after the other: within a transaction they share a connection
  const [wavelength, flux, bad] = [await column('wavelength', 8), await column('flux', 8), await column('bad', 1)];
  const sigma = hasSigma ? new Float64Array(await column('sigma', 8)) : null;
  const columns = { wavelength: new Float64Array(wavelength), flux: new Float64Array(flux), sigma, bad: new Uint8Array(bad) };
  return { ...facts, ...(segments?.length ? { segments } : {}), ...columns };
}

export interface SampleStream {
  readonly revision: number;
  readonly sizeBytes: number;
  readonly chunks: () => AsyncGenerator<Uint8Array>;
}

/** The columns as contract/samples.ts describes them, piece by piece; null when the programme has no such spectrum. */
export async function openSamples(db: Knex, scope: Scope, id: string): Promise<SampleStream | null> {
  const shape = await findShape(db, scope, id);
  if (!shape) return null;
  const { points, revision, hasSigma } = shape;
  const sizeBytes = 8 + points * (hasSigma ? 17 : 13);
  async function* chunks(): AsyncGenerator<Uint8Array> {
    yield new Uint8Array(Uint32Array.of(points, hasSigma ? 1 : 0).buffer);
    yield* slicesOf(db, scope, id, 'wavelength', revision);
    for await (const slice of slicesOf(db, scope, id, 'flux', revision)) yield singles(slice);
    if (hasSigma) for await (const slice of slicesOf(db, scope, id, 'sigma', revision)) yield singles(slice);
    yield* slicesOf(db, scope, id, 'bad', revision);
  }
  return { revision, sizeBytes, chunks };
}

/** Little-endian doubles as single precision: enough for drawing, and half the way. */
function singles(doubles: Buffer): Uint8Array {
  const values = new Float64Array(doubles.length / 8);
  new Uint8Array(values.buffer).set(doubles);
  return new Uint8Array(Float32Array.from(values).buffer);
}
