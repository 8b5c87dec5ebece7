import { setTimeout as pause } from 'node:timers/promises';
import type { Knex } from 'knex';
import type { Logger } from 'pino';
import type { Config } from '../../config/config.js';
import { sendDueMail } from './send-due-mail.js';

const LOOK_EVERY_MS = 1_000;

/** The worker's part: looks into the outbox every second until `stopping`. Any number of workers may do so. */
export async function keepSending(db: Knex, config: Config, log: Logger, stopping: AbortSignal): Promise<void> {
  if (!config.smtp) log.warn('SMTP_URL is not set: mail waits in the outbox');
  while (!stopping.aborted && config.smtp) {
    try {
      const ends = await sendDueMail(db, config, stopping);
      if (Object.values(ends).some(Boolean)) log.info(ends, 'mail');
    } catch (error) {
      log.error(error, 'mail could not be sent');
    }
    await pause(LOOK_EVERY_MS, undefined, { signal: stopping }).catch(() => undefined);
  }
}
