import { passwordFault } from '@foreveil/shared';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Trx } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';

export interface NewAccount {
  readonly email: string;
  readonly name: string;
  /** hashed before the transaction, since that takes its time */
  readonly passwordHash: string;
  readonly administrator?: boolean;
}

/** @throws weak_password with the reason */
export function checkPassword(password: string, own: readonly string[], pointer = '/password'): void {
  const fault = passwordFault(password, own);
  if (fault) throw new DomainError('weak_password', fault, { errors: [{ pointer, detail: fault }] });
}

/** @throws email_taken @returns the id of the account */
export async function createAccount(trx: Trx, { email, name, passwordHash, administrator = false }: NewAccount): Promise<string> {
  const [row] = await trx('users')
    .insert({ email: email.toLowerCase(), name, password_hash: passwordHash, administrator })
    .onConflict('email')
    .ignore()
    .returning<{ id: string }[]>('id');
  if (!row) throw new DomainError('email_taken', 'An account with this address exists already. Sign in instead.');
  await addAudit(trx, { userId: row.id, programmeId: null, action: 'account_made', subject: row.id, facts: { administrator } });
  return row.id;
}
