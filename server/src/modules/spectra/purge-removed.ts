import { PURGE_AFTER_DAYS } from '@foreveil/shared';
import type { Knex } from 'knex';
import { inTransaction } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';

interface Row {
  readonly id: string;
  readonly programmeId: string;
  readonly label: string;
  readonly fileName: string;
}

/**
 * Takes spectra that were removed long enough ago away for good, one a transaction, with their analyses, comparisons, decisions and the history
 * of these. The trail of who did what stays, and gets a line. @returns how many
 */
export async function purgeRemovedSpectra(db: Knex, days: number = PURGE_AFTER_DAYS): Promise<number> {
  for (let purged = 0; ; purged++) {
    const found = await inTransaction(db, async (trx) => {
      const row = await trx('spectra')
        .whereRaw(`removed_at < now() - ? * interval '1 day'`, [days])
        .orderBy('removed_at')
        .forUpdate()
        .skipLocked()
        .first<Row | undefined>({ id: 'id', programmeId: 'programme_id', label: 'label', fileName: 'file_name' });
      if (!row) return false;
      const { id, programmeId, label, fileName } = row;
      await trx.raw(`set local foreveil.purging = 'on'`);
      await trx('spectra').where({ programme_id: programmeId, id }).delete();
      await addAudit(trx, { userId: null, programmeId, action: 'spectrum_purged', subject: id, facts: { label, fileName } });
      await sayEvent(trx, { kind: 'spectrum', programmeId, id });
      return true;
    });
    if (!found) return purged;
  }
}
