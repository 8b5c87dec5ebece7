import type { Trx } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { queueMail } from '../mail/queue-mail.js';

interface Orphan {
  readonly programme_id: string;
  readonly name: string;
  readonly successor: string;
}

/**
 * When the account of a programme's only lead is closed, somebody has to lead: the member with the strongest role, among equals the one who
 * has been there longest. A programme with nobody else stays as it is until the account is opened again.
 */
export async function nameSuccessors(trx: Trx, closedUserId: string): Promise<void> {
  const { rows } = await trx.raw<{ rows: Orphan[] }>(
    `select p.id as programme_id, p.name, (
       select m.user_id from memberships m join users u on u.id = m.user_id and u.active
       where m.programme_id = p.id
       order by array_position(array['lead', 'reviewer', 'analyst', 'reader'], m.role), m.created_at, m.user_id limit 1) as successor
     from programmes p
     where exists (select 1 from memberships m where m.programme_id = p.id and m.user_id = ? and m.role = 'lead')
       and not exists (
         select 1 from memberships m join users u on u.id = m.user_id and u.active where m.programme_id = p.id and m.role = 'lead')
     order by p.id for update of p`,
    [closedUserId],
  );
  for (const { programme_id: programmeId, name, successor } of rows) {
    if (!successor) continue;
    await trx('memberships')
      .where({ programme_id: programmeId, user_id: successor })
      .update({ role: 'lead', version: trx.raw('version + 1') });
    await addAudit(trx, { userId: null, programmeId, action: 'lead_succeeded', subject: successor, facts: { instead: closedUserId } });
    const sentence = `You lead ${name} now, since the account of its only lead was closed.`;
    const facts = { programmeName: name, about: 'You lead this programme now', sentence, path: `/programmes/${programmeId}/members` };
    await queueMail(trx, {
      kind: 'membership',
      userId: successor,
      programmeId,
      facts,
      dedupeKey: `successor ${closedUserId} ${programmeId}`,
    });
    await sayEvent(trx, { kind: 'programme', programmeId });
  }
}
