import { PURGE_AFTER_DAYS } from '@foreveil/shared';
import type { Knex } from 'knex';
import { inTransaction } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';

/**
 * Takes programmes that were deleted long enough ago away for good, one a transaction, with everything in them: decisions and their history
 * too, which otherwise only grow. The trail of who did what stays, and gets a last line. @returns how many
 */
export async function purgeProgrammes(db: Knex, days: number = PURGE_AFTER_DAYS): Promise<number> {
  for (let purged = 0; ; purged++) {
    const found = await inTransaction(db, async (trx) => {
      const row = await trx('programmes')
        .whereRaw(`deleted_at < now() - ? * interval '1 day'`, [days])
        .orderBy('deleted_at')
        .forUpdate()
        .skipLocked()
        .first<{ id: string; name: string }>('id', 'name');
      if (!row) return false;
      await trx.raw(`set local foreveil.purging = 'on'`);
      await trx('programmes').where({ id: row.id }).delete();
      await addAudit(trx, { userId: null, programmeId: row.id, action: 'programme_purged', subject: row.id, facts: { name: row.name } });
      return true;
    });
    if (!found) return purged;
  }
}
