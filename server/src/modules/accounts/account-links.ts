import { randomUUID } from 'node:crypto';
import type { Config } from '../../config/config.js';
import { hashSecret, linkSecret, type LinkPurpose } from '../../common/auth/one-time.js';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Trx } from '../../database/transaction.js';

type AccountPurpose = Exclude<LinkPurpose, 'invitation'>;

/** A link that works once, for a while. Earlier links of the same purpose stop working. @returns its id, from which the mail makes the secret */
export async function makeAccountLink(
  trx: Trx,
  config: Config,
  { purpose, userId, newEmail = null }: { purpose: AccountPurpose; userId: string; newEmail?: string | null },
): Promise<{ linkId: string; expiresAt: string }> {
  await trx('account_links').where({ user_id: userId, purpose }).whereNull('used_at').delete();
  const id = randomUUID();
  const [row] = await trx('account_links')
    .insert({
      ...{ id, user_id: userId, purpose, new_email: newEmail, secret_hash: hashSecret(linkSecret(config, purpose, id)) },
      expires_at: trx.raw(`now() + ? * interval '1 minute'`, [config.resetMinutes]),
    })
    .returning<{ expires_at: Date }[]>('expires_at');
  return { linkId: id, expiresAt: row!.expires_at.toISOString() };
}

/** Uses a link up. @throws link_not_valid when it is unknown, used, too old, or of a closed account: one sentence for all, they are not told apart */
export async function useAccountLink(
  trx: Trx,
  purpose: AccountPurpose,
  secret: string,
): Promise<{ userId: string; newEmail: string | null }> {
  const row = await trx('account_links as l')
    .join('users as u', 'u.id', 'l.user_id')
    .where({ 'l.secret_hash': hashSecret(secret), 'l.purpose': purpose, 'u.active': true })
    .whereNull('l.used_at')
    .whereRaw('l.expires_at > now()')
    .forUpdate('l')
    .first<{ id: string; user_id: string; new_email: string | null }>('l.id', 'l.user_id', 'l.new_email');
  if (!row) throw linkNotValid();
  await trx('account_links').where({ id: row.id }).update({ used_at: trx.fn.now() });
  return { userId: row.user_id, newEmail: row.new_email };
}

export const linkNotValid = () =>
  new DomainError('link_not_valid', 'This link was used already, was taken back, or is too old. Ask for a new one.');
