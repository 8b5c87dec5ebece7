import type { Line, LineListDetail, LineListSummary, LineQuery, Page } from '@foreveil/shared';
import type { Knex } from 'knex';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { LINE, insertLines } from './line-list-store.js';

type Row = Omit<LineListSummary, 'createdAt'> & { createdAt: Date };

/** Lists a programme may use: the shared ones and its own, the default first, the newest version of a name first. */
export async function findProgrammeLists(db: Knex, { programmeId }: Scope, id?: string): Promise<LineListSummary[]> {
  const rows = await db('line_lists as l')
    .leftJoin('users as u', 'u.id', 'l.created_by')
    .where((query) => void query.where('l.programme_id', programmeId).orWhereNull('l.programme_id'))
    .modify((query) => void (id && query.where('l.id', id)))
    .orderBy('l.is_default', 'desc')
    .orderByRaw('lower(l.name)')
    .orderBy('l.created_at', 'desc')
    .select<Row[]>(
      { id: 'l.id', name: 'l.name', version: 'l.version', citation: 'l.citation', isDefault: 'l.is_default', previousId: 'l.previous_id' },
      { createdBy: 'u.name', createdAt: 'l.created_at' },
      db.raw('l.programme_id is not null as own'),
      db.raw('l.archived_at is not null as archived'),
      db.raw('(select count(*)::int from lines where line_list_id = l.id) as lines'),
    );
  return rows.map((row) => ({ ...row, createdAt: row.createdAt.toISOString() }));
}

type Uses = Pick<LineListDetail, 'fromNm' | 'toNm' | 'species' | 'analyses' | 'decisions'>;

/** What a list holds, and what of the programme rests on it. */
export async function findUses(db: Knex, { programmeId }: Scope, id: string): Promise<Uses> {
  const [species, range, analyses, states] = await Promise.all([
    db('lines')
      .where({ line_list_id: id })
      .groupBy('species')
      .orderBy('species')
      .select<{ species: string; lines: number }[]>('species', db.raw('count(*)::int as lines')),
    db('lines')
      .where({ line_list_id: id })
      .first<{ fromNm: number | null; toNm: number | null }>(
        db.raw('min(wavelength_nm) as "fromNm"'),
        db.raw('max(wavelength_nm) as "toNm"'),
      ),
    db('analyses').where({ programme_id: programmeId, line_list_id: id }).first<{ n: number }>(db.raw('count(*)::int as n')),
    db('identifications')
      .where({ programme_id: programmeId, line_list_id: id })
      .groupBy('state')
      .select<{ state: string; n: number }[]>('state', db.raw('count(*)::int as n')),
  ]);
  const count = (wanted: (state: string) => boolean) => states.filter(({ state }) => wanted(state)).reduce((sum, { n }) => sum + n, 0);
  const decisions = {
    accepted: count((state) => state === 'accepted'),
    rejected: count((state) => state === 'rejected'),
    other: count((state) => state !== 'accepted' && state !== 'rejected'),
  };
  return { ...range, species, analyses: analyses.n, decisions };
}

const PAGE = 100;

/** Lines of a list by wavelength, a page at a time; the key of a page is the place of its last line. */
export async function findLinePage(db: Knex, listId: string, wanted: LineQuery): Promise<Page<Line>> {
  const { fromNm, toNm, species, lowerEnergyTo, after, limit = PAGE } = wanted;
  const rows = await db('lines')
    .where({ line_list_id: listId })
    .modify((query) => {
      if (fromNm !== undefined) query.where('wavelength_nm', '>=', fromNm);
      if (toNm !== undefined) query.where('wavelength_nm', '<=', toNm);
      if (species !== undefined) query.whereRaw('starts_with(lower(species), lower(?))', [species]);
      if (lowerEnergyTo !== undefined) query.where('lower_energy_per_cm', '<=', lowerEnergyTo);
      if (after !== undefined) query.where('position', '>', placeOf(after));
    })
    .orderBy('position')
    .limit(limit + 1)
    .select<(Line & { position: number })[]>({ ...LINE, position: 'position' });
  const page = rows.slice(0, limit);
  const next = rows.length > limit ? String(page.at(-1)!.position) : null;
  return { rows: page.map(({ position: _, ...line }) => line), next };
}

function placeOf(after: string): number {
  if (/^\d{1,9}$/.test(after)) return Number(after);
  throw new DomainError('invalid_request', 'after must be the "next" of a page.', { errors: [{ pointer: '/after', detail: 'is no key' }] });
}

export interface ListMaking {
  readonly name: string;
  readonly version: string;
  readonly citation: string;
  readonly previousId: string | null;
  readonly userId: string;
  readonly lines: readonly Line[];
}

/** @throws name_taken when this programme, or the shared lists, have this version of the name */
export async function insertProgrammeList(trx: Knex, { programmeId }: Scope, list: ListMaking): Promise<string> {
  const { name, version, citation, previousId, userId } = list;
  const shared = await trx('line_lists').whereNull('programme_id').whereRaw('lower(name) = lower(?)', [name]).first('id');
  if (shared) throw taken(`"${name}" is the name of a shared list.`);
  const [row] = await trx('line_lists')
    .insert({ programme_id: programmeId, name, version, citation, previous_id: previousId, created_by: userId })
    .onConflict(trx.raw(`(coalesce(programme_id, '00000000-0000-0000-0000-000000000000'), lower(name), version)`))
    .ignore()
    .returning<{ id: string }[]>('id');
  if (!row) throw taken(`The programme already has version ${version} of "${name}". Choose another version.`);
  await insertLines(trx, row.id, list.lines);
  return row.id;
}

const taken = (detail: string) => new DomainError('name_taken', detail, { errors: [{ pointer: '/version', detail }] });

/** Takes an own list out of the choice, or back in. @returns false when the programme has no such list of its own */
export async function setArchived(trx: Knex, { programmeId }: Scope, id: string, archived: boolean): Promise<boolean> {
  const changed = await trx('line_lists')
    .where({ programme_id: programmeId, id })
    .update({ archived_at: archived ? trx.fn.now() : null });
  return changed > 0;
}
