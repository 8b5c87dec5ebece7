import { Inject, Injectable } from '@nestjs/common';
import {
  PROGRAM_VERSION,
  foundCsv,
  type FoundIdentification,
  type IdentificationQuery,
  type NewSavedSearch,
  type Page,
  type SavedSearch,
} from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { KNEX } from '../../database/knex.js';
import { addAudit } from '../audit/add-audit.js';
import { findByQuery, type PageOf } from './find-by-query.js';

/** A search that takes longer hits no index that helps it; whoever asks is told to ask for less. */
const MOST_SECONDS = 10;
const ROWS_AT_ONCE = 500;
/** Rows of an export; a spreadsheet holds a million. */
const MOST_EXPORTED = 100_000;
const MOST_SAVED = 200;

@Injectable()
export class SearchService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  async find(actor: Actor, query: PageOf): Promise<Page<FoundIdentification>> {
    try {
      return await this.db.transaction(async (trx) => {
        await trx.raw(`set local statement_timeout = ${MOST_SECONDS * 1000}`);
        return findByQuery(trx, actor.userId, query);
      });
    } catch (error) {
      if ((error as { code?: string }).code !== '57014') throw error;
      const detail = `The search took more than ${MOST_SECONDS} s and was stopped. Name a species or a shorter range.`;
      throw new DomainError('unavailable', detail);
    }
  }

  /** Everything a search finds, to a limit that the file names when it is reached. */
  async csv(actor: Actor, query: IdentificationQuery): Promise<string> {
    const rows: FoundIdentification[] = [];
    let next: string | null | undefined;
    do {
      const page: Page<FoundIdentification> = await this.find(actor, { ...query, ...(next ? { after: next } : {}), limit: ROWS_AT_ONCE });
      rows.push(...page.rows);
      next = page.next;
    } while (next && rows.length < MOST_EXPORTED);
    await addAudit(this.db, {
      userId: actor.userId,
      programmeId: query.programmeId ?? null,
      action: 'search_exported',
      subject: 'identifications',
      facts: { query, rows: rows.length },
    });
    return foundCsv({ rows, query, cut: next !== null, programVersion: PROGRAM_VERSION, writtenAt: new Date().toISOString() });
  }

  async saved(actor: Actor): Promise<SavedSearch[]> {
    const rows = await this.db('saved_searches')
      .where({ user_id: actor.userId })
      .orderByRaw('lower(name)')
      .select<(Omit<SavedSearch, 'createdAt'> & { created_at: Date })[]>('id', 'name', 'query', 'created_at');
    return rows.map(({ created_at, ...row }) => ({ ...row, createdAt: created_at.toISOString() }));
  }

  /** A search of the same name is replaced. */
  async save(actor: Actor, { name, query }: NewSavedSearch): Promise<SavedSearch> {
    const [count] = await this.db('saved_searches').where({ user_id: actor.userId }).count<{ count: string }[]>();
    if (Number(count!.count) >= MOST_SAVED)
      throw new DomainError('bad_transition', `You keep ${MOST_SAVED} searches already. Remove one first.`);
    const [row] = await this.db('saved_searches')
      .insert({ user_id: actor.userId, name, query: JSON.stringify(query) })
      .onConflict(this.db.raw('(user_id, lower(name))'))
      .merge(['name', 'query'])
      .returning<{ id: string; created_at: Date }[]>(['id', 'created_at']);
    return { id: row!.id, name, query, createdAt: row!.created_at.toISOString() };
  }

  async remove(actor: Actor, id: string): Promise<void> {
    if ((await this.db('saved_searches').where({ user_id: actor.userId, id }).delete()) === 0) throw notFound();
  }
}
