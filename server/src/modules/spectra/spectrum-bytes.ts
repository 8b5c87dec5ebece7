import type { Spectrum } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';

type Column = 'original' | 'wavelength' | 'flux' | 'sigma' | 'bad';

/** pg gives bytea as text of twice the size, so bytes come in slices; the columns are stored uncompressed, which makes a slice cheap. */
const SLICE = 4 * 1024 * 1024;

/** The bytes of a column in slices, in order; none when the column is null. */
export async function* slicesOf(db: Knex, { programmeId }: Scope, id: string, column: Column): AsyncGenerator<Buffer> {
  for (let from = 1; ; from += SLICE) {
    const row = await db('spectra')
      .where({ programme_id: programmeId, id })
      .first<{ slice: Buffer | null } | undefined>(db.raw('substring(?? from ? for ?) as slice', [column, from, SLICE]));
    if (!row?.slice?.length) return;
    yield row.slice;
    if (row.slice.length < SLICE) return;
  }
}

/** A whole column in memory of its own, so that it can be handed to a thread. */
async function bytesOf(db: Knex, scope: Scope, id: string, column: Column): Promise<ArrayBuffer> {
  const slices: Buffer[] = [];
  for await (const slice of slicesOf(db, scope, id, column)) slices.push(slice);
  const all = new Uint8Array(slices.reduce((sum, slice) => sum + slice.length, 0));
  let at = 0;
  for (const slice of slices) {
    all.set(slice, at);
    at += slice.length;
  }
  return all.buffer;
}

/** The columns of a stored spectrum as the analysis takes them; null when the programme has no such spectrum. */
export async function loadSpectrum(db: Knex, scope: Scope, id: string): Promise<Spectrum | null> {
  const row = await db('spectra')
    .where({ programme_id: scope.programmeId, id })
    .first<Pick<Spectrum, 'fluxKind' | 'frame' | 'resolvingPower'> & { hasSigma: boolean }>(
      { fluxKind: 'flux_kind', frame: 'frame', resolvingPower: 'resolving_power' },
      db.raw('sigma is not null as "hasSigma"'),
    );
  if (!row) return null;
  const { hasSigma, ...facts } = row;
  const [wavelength, flux, bad] = await Promise.all(
    (['wavelength', 'flux', 'bad'] as const).map((column) => bytesOf(db, scope, id, column)),
  );
  const sigma = hasSigma ? new Float64Array(await bytesOf(db, scope, id, 'sigma')) : null;
  return { ...facts, wavelength: new Float64Array(wavelength!), flux: new Float64Array(flux!), sigma, bad: new Uint8Array(bad!) };
}
