import { Inject, Injectable } from '@nestjs/common';
import type { NewTarget, Target, TargetSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { groupBy } from '../../common/group-by.js';
import { KNEX } from '../../database/knex.js';
import { addAudit } from '../audit/add-audit.js';
import { findIdentifications } from '../identifications/find-identifications.js';
import { findSpectra } from '../spectra/find-spectra.js';
import { findTargets, insertTarget, lockTarget, updateTarget } from './targets.repository.js';
import type { Scope } from '../../common/scope.js';

@Injectable()
export class TargetsService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  async list(scope: Scope): Promise<TargetSummary[]> {
    const [targets, spectra] = await Promise.all([findTargets(this.db, scope), findSpectra(this.db, scope)]);
    const byTarget = groupBy(spectra, (spectrum) => spectrum.targetId);
    return targets.map((target) => ({ ...target, spectra: byTarget.get(target.id) ?? [] }));
  }

  async get(scope: Scope, id: string): Promise<Target> {
    const [[target], spectra, identifications] = await Promise.all([
      findTargets(this.db, scope, id),
      findSpectra(this.db, scope, { targetId: id }),
      findIdentifications(this.db, scope, { targetId: id }),
    ]);
    if (!target) throw notFound();
    return { ...target, spectra, identifications };
  }

  async create(actor: Actor, scope: Scope, wanted: NewTarget): Promise<Target> {
    const id = await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const made = await insertTarget(trx, scope, { ...wanted, userId: actor.userId });
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'target_created', subject: made, facts: { name: wanted.name } });
      return made;
    });
    return this.get(scope, id);
  }

  /** @param version the version that the caller saw */
  async change(actor: Actor, scope: Scope, id: string, version: number, change: Partial<NewTarget>): Promise<Target> {
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const now = await lockTarget(trx, scope, id);
      if (now === null) throw notFound();
      if (now !== version) {
        throw new DomainError('stale_version', 'A teammate changed this target.', { current: await this.get(scope, id) });
      }
      await updateTarget(trx, scope, id, change);
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'target_changed', subject: id, facts: { ...change } });
    });
    return this.get(scope, id);
  }
}
