import { readFileSync } from 'node:fs';
import { parseDefaultList } from '@foreveil/shared';
import type { Knex } from '../server/src/database/knex.js';
import { inTransaction } from '../server/src/database/transaction.js';
import { insertLineList } from '../server/src/modules/linelists/line-list-store.js';

export const seedData = (name: string): URL => new URL(`./data/${name}`, import.meta.url);
const text = (name: string) => readFileSync(seedData(name), 'utf8');

/** Installs the default line list unless this version of it is there already. @returns whether it was installed */
export async function seedLineList(db: Knex): Promise<boolean> {
  const list = parseDefaultList(text('lines.csv'), text('telluric.csv'));
  return inTransaction(db, async (trx) => {
    if (await trx('line_lists').where({ name: list.name, version: list.version }).first('id')) return false;
    await insertLineList(trx, list, { isDefault: true });
    return true;
  });
}
