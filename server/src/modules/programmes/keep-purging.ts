import { setTimeout as pause } from 'node:timers/promises';
import type { Knex } from 'knex';
import type { Logger } from 'pino';
import { purgeRemovedSpectra } from '../spectra/purge-removed.js';
import { purgeProgrammes } from './purge-programmes.js';

const EVERY_MS = 3_600_000;

/** The worker's part: looks once an hour until `stopping`. */
export async function keepPurging(db: Knex, log: Logger, stopping: AbortSignal): Promise<void> {
  while (!stopping.aborted) {
    await purgeProgrammes(db).then(
      (purged) => purged && log.info({ purged }, 'deleted programmes are gone'),
      (error: unknown) => log.error(error, 'deleted programmes could not be purged'),
    );
    await purgeRemovedSpectra(db).then(
      (purged) => purged && log.info({ purged }, 'removed spectra are gone'),
      (error: unknown) => log.error(error, 'removed spectra could not be purged'),
    );
    await pause(EVERY_MS, undefined, { signal: stopping, ref: false }).catch(() => undefined);
  }
}
