import { Inject, Injectable } from '@nestjs/common';
import type { Cloud, CloudChange, CloudSummary, NewCloud } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { KNEX } from '../../database/knex.js';
import type { Trx } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import {
  deleteCloud,
  deleteSightline,
  findClouds,
  hasSpectrum,
  insertCloud,
  insertSightline,
  lockCloud,
  updateCloud,
} from './clouds.repository.js';
import { findSightlines } from './find-sightlines.js';

/** A cloud, and the version of it that the caller saw. */
export interface SeenCloud {
  readonly id: string;
  readonly version: number;
}

@Injectable()
export class CloudsService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  list(scope: Scope): Promise<CloudSummary[]> {
    return findClouds(this.db, scope);
  }

  get(scope: Scope, id: string): Promise<Cloud> {
    return this.one(this.db, scope, id);
  }

  create(actor: Actor, scope: Scope, wanted: NewCloud): Promise<Cloud> {
    checkRange(wanted);
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const id = await insertCloud(trx, scope, wanted, actor.userId);
      for (const spectrumId of wanted.spectrumIds ?? []) await this.put(trx, scope, id, spectrumId);
      await this.tell(trx, actor, scope, 'cloud_created', id, { ...wanted });
      return this.one(trx, scope, id);
    });
  }

  change(actor: Actor, scope: Scope, seen: SeenCloud, change: CloudChange): Promise<Cloud> {
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const before = await this.hold(trx, scope, seen);
      checkRange({ fromKmPerS: change.fromKmPerS ?? before.fromKmPerS, toKmPerS: change.toKmPerS ?? before.toKmPerS });
      await updateCloud(trx, scope, seen.id, change, actor.userId);
      const from = Object.fromEntries(Object.keys(change).map((key) => [key, before[key as keyof CloudChange]]));
      await this.tell(trx, actor, scope, 'cloud_changed', seen.id, { from, to: change });
      return this.one(trx, scope, seen.id);
    });
  }

  remove(actor: Actor, scope: Scope, seen: SeenCloud): Promise<void> {
    return asMember(this.db, actor, scope.programmeId, 'reviewer', async (trx) => {
      const { name, fromKmPerS, toKmPerS, frame, notes, sightlines } = await this.hold(trx, scope, seen);
      await deleteCloud(trx, scope, seen.id);
      const facts = { name, fromKmPerS, toKmPerS, frame, notes, spectrumIds: sightlines.map(({ spectrumId }) => spectrumId) };
      await this.tell(trx, actor, scope, 'cloud_deleted', seen.id, facts);
    });
  }

  addSightline(actor: Actor, scope: Scope, id: string, spectrumId: string): Promise<Cloud> {
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      if ((await lockCloud(trx, scope, id)) === null) throw notFound();
      if (await this.put(trx, scope, id, spectrumId)) await this.tell(trx, actor, scope, 'cloud_sightline_added', id, { spectrumId });
      return this.one(trx, scope, id);
    });
  }

  removeSightline(actor: Actor, scope: Scope, id: string, spectrumId: string): Promise<void> {
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      if ((await lockCloud(trx, scope, id)) === null) throw notFound();
      if (!(await deleteSightline(trx, scope, id, spectrumId))) throw notFound();
      await this.tell(trx, actor, scope, 'cloud_sightline_removed', id, { spectrumId });
    });
  }

  private async put(trx: Trx, scope: Scope, id: string, spectrumId: string): Promise<boolean> {
    if (!(await hasSpectrum(trx, scope, spectrumId))) throw notFound();
    return insertSightline(trx, scope, id, spectrumId);
  }

  /** @throws not_found, stale_version with the cloud as it is now */
  private async hold(trx: Trx, scope: Scope, { id, version }: SeenCloud): Promise<Cloud> {
    const now = await lockCloud(trx, scope, id);
    if (now === null) throw notFound();
    const current = await this.one(trx, scope, id);
    if (now !== version) throw new DomainError('stale_version', 'A teammate changed this cloud.', { current });
    return current;
  }

  private async one(db: Knex, scope: Scope, id: string): Promise<Cloud> {
    const [cloud] = await findClouds(db, scope, id);
    if (!cloud) throw notFound();
    return { ...cloud, sightlines: await findSightlines(db, scope, cloud) };
  }

  private async tell(trx: Trx, actor: Actor, scope: Scope, action: string, id: string, facts: Record<string, unknown>): Promise<void> {
    await addAudit(trx, { ...scope, userId: actor.userId, action, subject: id, facts });
    await sayEvent(trx, { kind: 'cloud', ...scope, id });
  }
}

function checkRange({ fromKmPerS, toKmPerS }: Pick<NewCloud, 'fromKmPerS' | 'toKmPerS'>): void {
  if (fromKmPerS < toKmPerS) return;
  const errors = [{ pointer: '/toKmPerS', detail: 'must be more than fromKmPerS' }];
  throw new DomainError('invalid_request', 'The range of a cloud goes from a lower to a higher velocity.', { errors });
}
