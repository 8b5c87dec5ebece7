import type { Knex } from 'knex';

export interface AuditEntry {
  readonly userId: string | null;
  readonly programmeId: string | null;
  /** what was done, in the past or as a noun: 'sign_in', 'spectrum_uploaded' */
  readonly action: string;
  /** id of the row it was done to, or a word where there is none */
  readonly subject: string;
  readonly facts: Record<string, unknown>;
}

/** Adds a line to the trail; in the transaction of the act, so that there is never one without the other. */
export async function addAudit(db: Knex, { userId, programmeId, action, subject, facts }: AuditEntry): Promise<void> {
  await db('audit').insert({ user_id: userId, programme_id: programmeId, action, subject, facts: JSON.stringify(facts) });
}
