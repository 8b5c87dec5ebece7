import type { Knex } from 'knex';
import { linkOriginHost, type Config } from '../../config/config.js';
import { stopMailToken } from '../../common/auth/one-time.js';
import { render } from './letters/render.js';
import { writeDigest, writeLetter } from './letters/write-letter.js';
import { dropForbidden, markFailed, markHanded, markSent, markUnconfirmed, putBack, takeBackLost, takeDue, type Parcel } from './outbox.js';
import { post, type Message, type Posted } from './post.js';
import { isChoosable } from './queue-mail.js';

export type SendSettings = Pick<Config, 'smtp' | 'mailFrom' | 'mailRetrySeconds' | 'linkOrigin'> & Config;

/**
 * Sends everything that is due, one message after the other. A message is sent at most once: it is marked just before it leaves, and one that
 * left without an answer is kept as 'unconfirmed' for a person to look at. Without a mail server everything waits.
 * @returns how many dialogues ended how
 */
export async function sendDueMail(db: Knex, config: SendSettings, stopping?: AbortSignal): Promise<Record<Posted['end'], number>> {
  const ends = { sent: 0, refused: 0, not_sent: 0, unconfirmed: 0 };
  if (!config.smtp) return ends;
  await takeBackLost(db);
  while (!stopping?.aborted) {
    const taken = await takeDue(db);
    if (!taken) return ends;
    const parcel = await dropForbidden(db, taken);
    if (!parcel.rows.length) continue;
    const posted = await post(config.smtp, config.mailFrom, messageOf(parcel, config), () => markHanded(db, parcel));
    ends[posted.end]++;
    await settle(db, parcel, posted, config.mailRetrySeconds);
  }
  return ends;
}

async function settle(db: Knex, parcel: Parcel, posted: Posted, retrySeconds: number): Promise<void> {
  if (posted.end === 'sent') await markSent(db, parcel);
  else if (posted.end === 'refused') await markFailed(db, parcel, posted.error);
  else if (posted.end === 'unconfirmed') await markUnconfirmed(db, parcel, posted.error);
  else await putBack(db, parcel, posted.error, retrySeconds);
}

function messageOf({ rows }: Parcel, config: SendSettings): Message {
  const first = rows[0]!;
  const letter = first.digest ? writeDigest(rows, config) : writeLetter(first.kind, first.facts, config);
  const stop =
    first.user_id && isChoosable(first.kind)
      ? `${config.linkOrigin}/mail-choice#${stopMailToken(config, first.user_id, first.digest ? 'daily' : first.kind)}`
      : null;
  return { ...render(letter, stop), to: first.to_address, messageId: `<${first.id}@${linkOriginHost(config)}>`, stop };
}
