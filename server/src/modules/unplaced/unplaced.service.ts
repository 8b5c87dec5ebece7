import { Inject, Injectable } from '@nestjs/common';
import type { Identification, PlaceDecision, UnplacedDecision } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember, checkRole } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { KNEX } from '../../database/knex.js';
import type { Trx } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { findIdentifications } from '../identifications/find-identifications.js';
import { spectrumExists } from '../spectra/find-spectra.js';
import { findKept, holdSpectrum, insertKept, isTaken, setFeature, type Held } from './unplaced.repository.js';

/** A decision, and the version of it that the caller saw. */
export interface SeenDecision {
  readonly id: string;
  readonly version: number;
}

/** Decisions that a new analysis left without a feature: each is to be kept as it stands, or put on a feature by hand. */
@Injectable()
export class UnplacedService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  async list(scope: Scope, spectrumId: string): Promise<UnplacedDecision[]> {
    if (!(await spectrumExists(this.db, scope, spectrumId))) throw notFound();
    const all = await findIdentifications(this.db, scope, { spectrumId });
    const kept = await findKept(this.db, spectrumId);
    return all
      .filter(({ featureIndex }) => featureIndex === null)
      .map((identification) => ({ identification, kept: kept.get(identification.id) ?? null }));
  }

  keep(actor: Actor, scope: Scope, seen: SeenDecision): Promise<Identification> {
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const { analysisId } = await this.hold(trx, scope, seen);
      await insertKept(trx, { identificationId: seen.id, analysisId, userId: actor.userId });
      return this.tell(trx, actor, scope, seen.id, 'decision_kept', { analysisId });
    });
  }

  place(actor: Actor, scope: Scope, seen: SeenDecision, to: PlaceDecision): Promise<Identification> {
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const { analysisId, decision, spectrumId } = await this.hold(trx, scope, seen);
      if (decision.state !== 'proposed') await checkRole(trx, actor.userId, scope.programmeId, 'reviewer');
      if (analysisId !== to.analysisId) {
        throw new DomainError(
          'bad_transition',
          'The spectrum was analysed again meanwhile. Choose among the features of the new analysis.',
        );
      }
      const [kind] = await trx('features').where({ analysis_id: analysisId, feature_index: to.featureIndex }).pluck<string[]>('kind');
      if (!kind) throw notFound();
      if (kind !== decision.kind) throw new DomainError('bad_transition', `A decision on a ${decision.kind} cannot stand on a ${kind}.`);
      if (await isTaken(trx, spectrumId, to.featureIndex)) {
        throw new DomainError('bad_transition', 'That feature has a decision of its own already.');
      }
      await setFeature(trx, seen.id, to.featureIndex);
      return this.tell(trx, actor, scope, seen.id, 'decision_placed', { ...to });
    });
  }

  /** The decision and its spectrum, held. @throws not_found, stale_version, and bad_transition when it has a feature */
  private async hold(trx: Trx, scope: Scope, { id, version }: SeenDecision): Promise<Held & { decision: Identification }> {
    const held = await holdSpectrum(trx, scope, id);
    if (!held) throw notFound();
    const [decision] = await findIdentifications(trx, scope, { id });
    if (decision!.version !== version) {
      throw new DomainError('stale_version', 'A teammate changed this decision.', { current: decision });
    }
    if (decision!.featureIndex !== null) throw new DomainError('bad_transition', 'This decision has a feature in the current analysis.');
    return { ...held, decision: decision! };
  }

  private async tell(
    trx: Trx,
    actor: Actor,
    scope: Scope,
    id: string,
    action: string,
    facts: Record<string, unknown>,
  ): Promise<Identification> {
    await addAudit(trx, { ...scope, userId: actor.userId, action, subject: id, facts });
    await sayEvent(trx, { kind: 'identification', ...scope, id });
    const [after] = await findIdentifications(trx, scope, { id });
    return after!;
  }
}
