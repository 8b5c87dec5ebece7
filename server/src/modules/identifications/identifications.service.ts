import { Inject, Injectable } from '@nestjs/common';
import { ROLE_FOR, nextState, readingInWords, type Decision, type Identification } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { KNEX } from '../../database/knex.js';
import { sayEvent } from '../events/say-event.js';
import { spectrumExists } from '../spectra/find-spectra.js';
import { findIdentifications } from './find-identifications.js';
import { insertEvent, insertIdentification, lockFeature, updateIdentification } from './identifications.repository.js';
import type { Reading } from './facts.js';
import { readingOf } from './reading.js';

/** The feature that is decided on, and the version of its identification that the person saw; 0 when there was none. */
export interface Seen {
  readonly analysisId: string;
  readonly featureIndex: number;
  readonly version: number;
}

@Injectable()
export class IdentificationsService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  async list(scope: Scope, spectrumId: string): Promise<Identification[]> {
    if (!(await spectrumExists(this.db, scope, spectrumId))) throw notFound();
    return findIdentifications(this.db, scope, { spectrumId });
  }

  /** A feature nobody decided on counts as proposed by the analysis. Reopening keeps the reading; every other action sets it. */
  decide(actor: Actor, scope: Scope, { analysisId, featureIndex, version }: Seen, decision: Decision): Promise<Identification> {
    const { action, remark = '' } = decision;
    return asMember(this.db, actor, scope.programmeId, ROLE_FOR[action], async (trx) => {
      const feature = await lockFeature(trx, scope, analysisId, featureIndex);
      const [before] = await findIdentifications(trx, scope, { spectrumId: feature.spectrumId, featureIndex });
      refuseStale(version, before);
      const from = before?.state ?? 'proposed';
      const state = nextState(from, action);
      if (!state) throw new DomainError('bad_transition', `A line that is ${from} cannot be changed by "${action}".`, { current: before });
      const reading: Reading = action === 'reopen' ? before! : await readingOf(trx, feature, decision);
      const decided = { userId: actor.userId, state, feature, reading };
      const id = before?.id ?? (await insertIdentification(trx, scope, decided));
      if (before) await updateIdentification(trx, id, decided);
      const words = readingInWords(reading);
      await insertEvent(trx, { identificationId: id, userId: actor.userId, action, from, to: state, reading: words, remark });
      await sayEvent(trx, { kind: 'identification', ...scope, id });
      const [after] = await findIdentifications(trx, scope, { id });
      return after!;
    });
  }
}

function refuseStale(seen: number, now: Identification | undefined): void {
  if (seen === (now?.version ?? 0)) return;
  throw new DomainError('stale_version', 'A teammate decided on this line meanwhile.', { current: now ?? null });
}
