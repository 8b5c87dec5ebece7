import { Inject, Injectable } from '@nestjs/common';
import { PURGE_AFTER_DAYS, type NewProgramme, type Programme, type ProgrammeSummary, type StagedProgramme } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asLead } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction, type Trx } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { queueMail } from '../mail/queue-mail.js';
import type { ChangeProgrammeDto } from './dto/change-programme.dto.js';
import { findMembers, findProgrammes, findStaged, insertMember, insertProgramme } from './programmes.repository.js';

@Injectable()
export class ProgrammesService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  list(actor: Actor): Promise<ProgrammeSummary[]> {
    return findProgrammes(this.db, actor.userId);
  }

  async get(actor: Actor, programmeId: string): Promise<Programme> {
    const [summary] = await findProgrammes(this.db, actor.userId, programmeId);
    if (!summary) throw notFound();
    return { ...summary, members: await findMembers(this.db, programmeId) };
  }

  /** Whoever starts a programme leads it. */
  async create(actor: Actor, wanted: NewProgramme): Promise<Programme> {
    const id = await inTransaction(this.db, async (trx) => {
      const programmeId = await insertProgramme(trx, actor.userId, wanted);
      await insertMember(trx, programmeId, actor.userId, 'lead');
      await addAudit(trx, {
        userId: actor.userId,
        programmeId,
        action: 'programme_created',
        subject: programmeId,
        facts: { name: wanted.name },
      });
      return programmeId;
    });
    return this.get(actor, id);
  }

  staged(actor: Actor): Promise<StagedProgramme[]> {
    return findStaged(this.db, actor.userId);
  }

  async change(actor: Actor, programmeId: string, wanted: ChangeProgrammeDto, version: number): Promise<Programme> {
    await asLead(this.db, actor, programmeId, async (trx) => {
      const before = await this.seen(trx, actor, programmeId, version);
      const after = { name: wanted.name ?? before.name, description: wanted.description ?? before.description };
      await trx('programmes')
        .where({ id: programmeId })
        .update({ ...after, version: version + 1 });
      const from = { name: before.name, description: before.description };
      await addAudit(trx, {
        userId: actor.userId,
        programmeId,
        action: 'programme_changed',
        subject: programmeId,
        facts: { from, to: after },
      });
      await sayEvent(trx, { kind: 'programme', programmeId });
    });
    return this.get(actor, programmeId);
  }

  /** Takes the programme out of sight; leads can have it back for a while. */
  async stage(actor: Actor, programmeId: string, version: number): Promise<void> {
    await asLead(this.db, actor, programmeId, async (trx) => {
      const { name } = await this.seen(trx, actor, programmeId, version);
      await this.mark(trx, programmeId, { deleted_at: trx.fn.now(), deleted_by: actor.userId });
      await addAudit(trx, { userId: actor.userId, programmeId, action: 'programme_deleted', subject: programmeId, facts: { name } });
      await this.tellLeads(
        trx,
        actor,
        programmeId,
        'was deleted',
        `${actor.name} deleted ${name}. Leads can have it back for ${PURGE_AFTER_DAYS} days.`,
      );
    });
  }

  async recover(actor: Actor, programmeId: string): Promise<Programme> {
    await asLead(
      this.db,
      actor,
      programmeId,
      async (trx) => {
        const row = await trx('programmes')
          .where({ id: programmeId })
          .first<{ name: string; deleted_at: Date | null }>('name', 'deleted_at');
        if (!row!.deleted_at) return;
        await this.mark(trx, programmeId, { deleted_at: null, deleted_by: null });
        await addAudit(trx, {
          userId: actor.userId,
          programmeId,
          action: 'programme_recovered',
          subject: programmeId,
          facts: { name: row!.name },
        });
        await this.tellLeads(trx, actor, programmeId, 'is back', `${actor.name} took ${row!.name} back; everything in it is as it was.`);
      },
      true,
    );
    return this.get(actor, programmeId);
  }

  private async mark(trx: Trx, programmeId: string, state: object): Promise<void> {
    await trx('programmes')
      .where({ id: programmeId })
      .update({ ...state, version: trx.raw('version + 1') });
    await sayEvent(trx, { kind: 'programme', programmeId });
  }

  private async tellLeads(trx: Trx, actor: Actor, programmeId: string, about: string, sentence: string): Promise<void> {
    const leads = await trx('memberships')
      .where({ programme_id: programmeId, role: 'lead' })
      .whereNot({ user_id: actor.userId })
      .pluck<string[]>('user_id');
    const { name, version } = (await trx('programmes')
      .where({ id: programmeId })
      .first<{ name: string; version: number }>('name', 'version'))!;
    const facts = { programmeName: name, about: `${name} ${about}`, sentence, path: '/programmes' };
    for (const userId of leads)
      await queueMail(trx, { kind: 'programme', userId, programmeId, facts, dedupeKey: `${programmeId} ${version}` });
  }

  private async seen(trx: Trx, actor: Actor, programmeId: string, version: number): Promise<ProgrammeSummary> {
    const [programme] = await findProgrammes(trx, actor.userId, programmeId);
    if (!programme) throw notFound();
    if (programme.version === version) return programme;
    throw new DomainError('stale_version', 'Somebody changed the programme in the meantime.', { current: programme });
  }
}
