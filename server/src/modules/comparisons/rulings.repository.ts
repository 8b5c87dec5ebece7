import type { Verdict, VerdictRuling } from '@foreveil/shared';
import type { Knex } from 'knex';
import { groupBy } from '../../common/group-by.js';
import type { Trx } from '../../database/transaction.js';

interface EventRow {
  readonly lineKey: string;
  readonly verdict: Verdict | null;
  readonly remark: string;
  readonly by: string;
  readonly at: Date;
}

/** People's rulings on the lines of a comparison, each with its history, oldest first. */
export async function findRulings(db: Knex, comparisonId: string, lineKey?: string): Promise<VerdictRuling[]> {
  const where = { 'r.comparison_id': comparisonId, ...(lineKey !== undefined && { 'r.line_key': lineKey }) };
  const facts = { lineKey: 'r.line_key', verdict: 'r.verdict', remark: 'r.remark', by: 'u.name', at: 'r.ruled_at' };
  const rows = await db('verdict_rulings as r')
    .join('users as u', 'u.id', 'r.ruled_by')
    .where(where)
    .orderBy('r.line_key')
    .select<(EventRow & { version: number })[]>({ ...facts, version: 'r.version' });
  const events = await db('verdict_ruling_events as r')
    .join('users as u', 'u.id', 'r.ruled_by')
    .where(where)
    .orderBy('r.id')
    .select<EventRow[]>(facts);
  const history = groupBy(events, (e) => e.lineKey);
  return rows.map(({ at, ...row }) => ({
    ...row,
    at: at.toISOString(),
    history: (history.get(row.lineKey) ?? []).map(({ verdict, remark, by, at: when }) => ({ verdict, remark, by, at: when.toISOString() })),
  }));
}

export interface Ruled {
  readonly comparisonId: string;
  readonly lineKey: string;
  readonly verdict: Verdict | null;
  readonly remark: string;
  readonly userId: string;
}

/** Writes a ruling over the one before and adds it to the history. */
export async function writeRuling(trx: Trx, { comparisonId, lineKey, verdict, remark, userId }: Ruled): Promise<void> {
  const row = { comparison_id: comparisonId, line_key: lineKey, verdict, remark, ruled_by: userId };
  await trx('verdict_rulings')
    .insert(row)
    .onConflict(['comparison_id', 'line_key'])
    .merge({ verdict, remark, ruled_by: userId, ruled_at: trx.raw('clock_timestamp()'), version: trx.raw('verdict_rulings.version + 1') });
  await trx('verdict_ruling_events').insert(row);
}
