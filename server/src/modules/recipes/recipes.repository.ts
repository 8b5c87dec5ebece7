import type { ChangeReadingRecipe, NewReadingRecipe, ReadingRecipe } from '@foreveil/shared';
import type { Knex } from 'knex';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';

type Row = Omit<ReadingRecipe, 'createdAt' | 'changedAt'> & { createdAt: Date; changedAt: Date };

/** Recipes of a programme by name. @param id only this one */
export async function findRecipes(db: Knex, { programmeId }: Scope, id?: string): Promise<ReadingRecipe[]> {
  const rows = await db('reading_recipes as r')
    .join('users as c', 'c.id', 'r.created_by')
    .join('users as u', 'u.id', 'r.changed_by')
    .where('r.programme_id', programmeId)
    .modify((query) => void (id && query.where('r.id', id)))
    .orderByRaw('lower(r.name)')
    .select<Row[]>({
      ...{ id: 'r.id', name: 'r.name', signature: 'r.signature', corrections: 'r.corrections', version: 'r.version' },
      ...{ createdBy: 'c.name', createdAt: 'r.created_at', changedBy: 'u.name', changedAt: 'r.changed_at' },
    });
  return rows.map(({ createdAt, changedAt, ...row }) => ({
    ...row,
    createdAt: createdAt.toISOString(),
    changedAt: changedAt.toISOString(),
  }));
}

/** The version of a recipe, its row held against other changes; null when the programme has no such recipe. */
export async function lockRecipe(db: Knex, { programmeId }: Scope, id: string): Promise<number | null> {
  const row = await db('reading_recipes').where({ programme_id: programmeId, id }).forUpdate().first<{ version: number }>('version');
  return row?.version ?? null;
}

/** @throws name_taken */
export async function insertRecipe(db: Knex, { programmeId }: Scope, made: NewReadingRecipe, userId: string): Promise<string> {
  const values = { programme_id: programmeId, ...columnsOf(made), created_by: userId, changed_by: userId };
  const [row] = await unlessNameTaken(made.name, () => db('reading_recipes').insert(values).returning<{ id: string }[]>('id'));
  return row!.id;
}

/** Changes what is named and counts the version up. @throws name_taken */
export async function updateRecipe(
  db: Knex,
  { programmeId }: Scope,
  id: string,
  change: ChangeReadingRecipe,
  userId: string,
): Promise<void> {
  const counted = { changed_by: userId, changed_at: db.raw('clock_timestamp()'), version: db.raw('version + 1') };
  const where = { programme_id: programmeId, id };
  await unlessNameTaken(change.name ?? '', () =>
    db('reading_recipes')
      .where(where)
      .update({ ...columnsOf(change), ...counted }),
  );
}

export async function deleteRecipe(db: Knex, { programmeId }: Scope, id: string): Promise<void> {
  await db('reading_recipes').where({ programme_id: programmeId, id }).delete();
}

const columnsOf = ({ name, signature, corrections }: ChangeReadingRecipe) => ({
  name,
  signature: signature && JSON.stringify(signature),
  corrections: corrections && JSON.stringify(corrections),
});

async function unlessNameTaken<T>(name: string, write: () => PromiseLike<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    if ((error as { constraint?: string }).constraint !== 'reading_recipes_name_once') throw error;
    throw new DomainError('name_taken', `The programme already has a recipe called "${name}".`, {
      errors: [{ pointer: '/name', detail: 'is already used in this programme' }],
    });
  }
}
