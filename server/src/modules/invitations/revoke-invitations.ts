import type { Trx } from '../../database/transaction.js';

/** Takes back what a person invited others to, when they may not invite any more. */
export const revokeInvitationsOf = (trx: Trx, userId: string, programmeId?: string) =>
  trx('invitations')
    .where({ invited_by: userId, ...(programmeId ? { programme_id: programmeId } : {}) })
    .whereNull('accepted_at')
    .whereNull('revoked_at')
    .update({ revoked_at: trx.fn.now() });
