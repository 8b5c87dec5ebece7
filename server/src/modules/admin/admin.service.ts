import { Inject, Injectable } from '@nestjs/common';
import type { AccountPage, AccountRow, MailState } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction, type Trx } from '../../database/transaction.js';
import { endSessions } from '../accounts/end-sessions.js';
import { tellSecurity } from '../accounts/tell-security.js';
import { addAudit } from '../audit/add-audit.js';
import { revokeInvitationsOf } from '../invitations/revoke-invitations.js';
import { nameSuccessors } from '../members/name-successors.js';
import type { ChangeAccountDto } from './change-account.dto.js';

const PAGE = 100;

interface Row extends Omit<AccountRow, 'createdAt' | 'lastSeenAt'> {
  readonly created_at: Date;
  readonly last_seen_at: Date | null;
}

/** What administrators do: they manage accounts, and see no programme but those that they are members of like anybody else. */
@Injectable()
export class AdminService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  /** @param after the address that the last page ended with @param find part of a name or an address */
  async accounts(after: string, find: string): Promise<AccountPage> {
    const rows = await this.rows()
      .where('u.email', '>', after)
      .modify((query) => void (find && query.whereRaw(`strpos(lower(u.name) || ' ' || u.email, ?) > 0`, [find.toLowerCase()])))
      .orderBy('u.email')
      .limit(PAGE + 1)
      .then((found) => found.map(asAccount));
    return { rows: rows.slice(0, PAGE), next: rows.length > PAGE ? rows[PAGE - 1]!.email : null };
  }

  async change(actor: Actor, userId: string, wanted: ChangeAccountDto): Promise<AccountRow> {
    await inTransaction(this.db, async (trx) => {
      // one after the other, so that two administrators cannot take the right from each other at the same moment
      await trx.raw('select pg_advisory_xact_lock(?)', [ADMINISTRATORS]);
      const before = await trx('users')
        .where({ id: userId })
        .forUpdate()
        .first<{ active: boolean; administrator: boolean }>('active', 'administrator');
      if (!before) throw notFound();
      const after = { active: wanted.active ?? before.active, administrator: wanted.administrator ?? before.administrator };
      await trx('users').where({ id: userId }).update(after);
      if (!(await trx('users').where({ active: true, administrator: true }).first('id'))) {
        throw new DomainError('last_administrator', 'The site needs an administrator who can sign in.');
      }
      await this.follow(trx, actor, userId, before, after);
    });
    return asAccount((await this.rows().where({ 'u.id': userId }).first())!);
  }

  async mail(): Promise<MailState> {
    const rows = await this.db('mail_outbox')
      .groupBy('status')
      .select<{ status: string; count: string }[]>('status', this.db.raw('count(*) as count'));
    const count = (...which: string[]) =>
      rows.filter(({ status }) => which.includes(status)).reduce((sum, row) => sum + Number(row.count), 0);
    return { waiting: count('waiting', 'sending'), unconfirmed: count('unconfirmed'), failed: count('failed') };
  }

  private async follow(trx: Trx, actor: Actor, userId: string, before: State, after: State): Promise<void> {
    const tell = (action: string) => addAudit(trx, { userId: actor.userId, programmeId: null, action, subject: userId, facts: {} });
    if (before.active && !after.active) {
      await endSessions(trx, userId);
      await trx('account_links').where({ user_id: userId }).whereNull('used_at').delete();
      await revokeInvitationsOf(trx, userId);
      await nameSuccessors(trx, userId);
      await tell('account_closed');
    }
    if (!before.active && after.active) {
      await tell('account_opened');
      await tellSecurity(trx, userId, 'account_opened_again');
    }
    if (before.administrator === after.administrator) return;
    await endSessions(trx, userId, userId === actor.userId ? { butNot: actor.sessionId } : {}); // new rights, new session
    await tell(after.administrator ? 'administrator_made' : 'administrator_unmade');
    await tellSecurity(trx, userId, after.administrator ? 'administrator_made' : 'administrator_unmade');
  }

  private rows() {
    return this.db('users as u').select<Row[]>(
      ...['u.id', 'u.email', 'u.name', 'u.active', 'u.administrator', 'u.created_at'],
      this.db.raw('(select max(last_seen_at) from sessions where user_id = u.id) as last_seen_at'),
      this.db.raw('(select count(*)::int from memberships where user_id = u.id) as programmes'),
      this.db.raw('exists (select 1 from second_factors where user_id = u.id and confirmed_at is not null) as "secondFactor"'),
    );
  }
}

interface State {
  readonly active: boolean;
  readonly administrator: boolean;
}

/** Any number; all that changes who administers agrees on it. */
const ADMINISTRATORS = 7_305_118;

const asAccount = ({ created_at: made, last_seen_at: seen, ...row }: Row): AccountRow => ({
  ...row,
  createdAt: made.toISOString(),
  lastSeenAt: seen?.toISOString() ?? null,
});
