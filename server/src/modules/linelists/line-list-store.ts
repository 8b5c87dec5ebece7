import type { Family, Line, LineList } from '@foreveil/shared';
import type { Knex } from 'knex';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';

export async function defaultLineListId(db: Knex): Promise<string | null> {
  const row = await db('line_lists').where({ is_default: true }).first<{ id: string }>('id');
  return row?.id ?? null;
}

/**
 * The list an analysis is to use. @param chosen one that the programme may use; the default when left out
 * @throws not_found, bad_transition when the list was put away, unavailable without a default
 */
export async function lineListFor(db: Knex, { programmeId }: Scope, chosen: string | undefined): Promise<string> {
  if (chosen === undefined) {
    const id = await defaultLineListId(db);
    if (!id) throw new DomainError('unavailable', 'No line list is installed: npm run db -- seed');
    return id;
  }
  const list = await db('line_lists')
    .where({ id: chosen })
    .where((query) => void query.where({ programme_id: programmeId }).orWhereNull('programme_id'))
    .first<{ archived_at: Date | null } | undefined>('archived_at');
  if (!list) throw notFound();
  if (list.archived_at) throw new DomainError('bad_transition', 'This line list was put away. Bring it back first, or choose another.');
  return chosen;
}

export interface LineListRow {
  readonly id: string;
  readonly name: string;
  readonly version: string;
  readonly isDefault: boolean;
  readonly lines: number;
}

/** The lists that all programmes share. */
export const findLineLists = (db: Knex): Promise<LineListRow[]> =>
  db('line_lists as l')
    .whereNull('l.programme_id')
    .orderBy('l.is_default', 'desc')
    .orderBy('l.name')
    .orderBy('l.created_at', 'desc')
    .select<LineListRow[]>(
      { id: 'l.id', name: 'l.name', version: 'l.version', isDefault: 'l.is_default' },
      db.raw('(select count(*)::int from lines where line_list_id = l.id) as lines'),
    );

/** Columns of the table by the fields of a line. */
export const LINE: Record<Exclude<keyof Line, 'asked'>, string> = {
  id: 'line_id',
  species: 'species',
  element: 'element',
  ionStage: 'ion_stage',
  wavelengthNm: 'wavelength_nm',
  type: 'type',
  lowerEnergyPerCm: 'lower_energy_per_cm',
  upperEnergyPerCm: 'upper_energy_per_cm',
  lowerJ: 'lower_j',
  upperJ: 'upper_j',
  logGf: 'log_gf',
  oscillatorStrength: 'oscillator_strength',
  einsteinA: 'einstein_a_per_s',
  bandFwhmNm: 'band_fwhm_nm',
  settings: 'settings',
  multiplet: 'multiplet',
  relativeIntensity: 'relative_intensity',
  relativeIntensityScale: 'relative_intensity_scale',
  tier: 'tier',
  source: 'source',
};

/** A whole list as the analysis takes it. */
export async function loadLineList(db: Knex, id: string): Promise<LineList> {
  const list = await db('line_lists').where({ id }).first<{ name: string; version: string }>('name', 'version');
  if (!list) throw new Error(`no line list ${id}`);
  return { ...list, lines: await db('lines').where({ line_list_id: id }).orderBy('position').select<Line[]>(LINE) };
}

/** One line of a list, or null. */
export async function findLine(db: Knex, listId: string, lineId: string): Promise<Line | null> {
  return (await db('lines').where({ line_list_id: listId, line_id: lineId }).first<Line | undefined>(LINE)) ?? null;
}

/** Lines of the given lists by their ids; where several of these lists hold an id, as the newest one has it. */
export async function findLines(db: Knex, listIds: readonly string[], lineIds: readonly string[]): Promise<Map<string, Line>> {
  const rows = await db('lines')
    .join('line_lists as l', 'l.id', 'lines.line_list_id')
    .whereIn('l.id', listIds)
    .whereIn('line_id', lineIds)
    .orderBy('l.created_at')
    .select<Line[]>(LINE);
  return new Map(rows.map((line) => [line.id, line]));
}

const ROWS_AT_ONCE = 1000;

/** Stores a list, as the one default when asked, and @returns its id. A list of this name and version must not exist yet. */
export async function insertLineList(db: Knex, list: LineList, { isDefault }: { isDefault: boolean }): Promise<string> {
  if (isDefault) await db('line_lists').where({ is_default: true }).update({ is_default: false });
  const [row] = await db('line_lists')
    .insert({ name: list.name, version: list.version, is_default: isDefault })
    .returning<{ id: string }[]>('id');
  await insertLines(db, row!.id, list.lines);
  return row!.id;
}

/** Lines of a list in its order. */
export async function insertLines(db: Knex, listId: string, lines: readonly Line[]): Promise<void> {
  const rows = lines.map((line, position) => toRow(listId, line, position));
  for (let from = 0; from < rows.length; from += ROWS_AT_ONCE) await db('lines').insert(rows.slice(from, from + ROWS_AT_ONCE));
}

function toRow(listId: string, line: Line, position: number): Record<string, unknown> {
  const columns = Object.entries(LINE).map(([key, column]) => [column, line[key as keyof Line]]);
  return { ...Object.fromEntries(columns), line_list_id: listId, position, settings: [...line.settings] satisfies Family[] };
}
