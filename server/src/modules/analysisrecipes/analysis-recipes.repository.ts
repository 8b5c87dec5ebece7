import type { AnalysisRecipe, AnalysisRecipeChange, NewAnalysisRecipe } from '@foreveil/shared';
import type { Knex } from 'knex';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';

type Row = Omit<AnalysisRecipe, 'changedAt'> & { changedAt: Date };

/** Recipes of a programme by name. @param id only this one */
export async function findRecipes(db: Knex, { programmeId }: Scope, id?: string): Promise<AnalysisRecipe[]> {
  const rows = await db('analysis_recipes as r')
    .join('users as c', 'c.id', 'r.created_by')
    .join('users as u', 'u.id', 'r.changed_by')
    .where('r.programme_id', programmeId)
    .modify((query) => void (id && query.where('r.id', id)))
    .orderByRaw('lower(r.name)')
    .select<Row[]>(
      { id: 'r.id', name: 'r.name', settings: 'r.settings', version: 'r.version' },
      { createdBy: 'c.name', changedBy: 'u.name', changedAt: 'r.changed_at' },
    );
  return rows.map((row) => ({ ...row, changedAt: row.changedAt.toISOString() }));
}

/** The version of a recipe, its row held against other changes; null when the programme has no such recipe. */
export async function lockRecipe(db: Knex, { programmeId }: Scope, id: string): Promise<number | null> {
  const row = await db('analysis_recipes').where({ programme_id: programmeId, id }).forUpdate().first<{ version: number }>('version');
  return row?.version ?? null;
}

/** @throws name_taken */
export async function insertRecipe(
  db: Knex,
  { programmeId }: Scope,
  { name, settings, userId }: NewAnalysisRecipe & { userId: string },
): Promise<string> {
  const who = { created_by: userId, changed_by: userId };
  const values = { programme_id: programmeId, name, settings: JSON.stringify(settings), ...who };
  const [row] = await unlessNameTaken(name, () => db('analysis_recipes').insert(values).returning<{ id: string }[]>('id'));
  return row!.id;
}

/** Changes what is named and counts the version up. @throws name_taken */
export async function updateRecipe(
  db: Knex,
  { programmeId }: Scope,
  id: string,
  { name, settings, userId }: AnalysisRecipeChange & { userId: string },
): Promise<void> {
  const values = {
    name,
    settings: settings && JSON.stringify(settings),
    version: db.raw('version + 1'),
    changed_by: userId,
    changed_at: db.fn.now(),
  };
  await unlessNameTaken(name ?? '', () => db('analysis_recipes').where({ programme_id: programmeId, id }).update(values));
}

export async function deleteRecipe(db: Knex, { programmeId }: Scope, id: string): Promise<void> {
  await db('analysis_recipes').where({ programme_id: programmeId, id }).delete();
}

async function unlessNameTaken<T>(name: string, write: () => PromiseLike<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    if ((error as { constraint?: string }).constraint !== 'analysis_recipes_name_once') throw error;
    throw new DomainError('name_taken', `The programme already has a recipe called "${name}".`, {
      errors: [{ pointer: '/name', detail: 'is already used in this programme' }],
    });
  }
}
