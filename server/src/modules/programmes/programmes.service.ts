import { Inject, Injectable } from '@nestjs/common';
import type { NewProgramme, Programme, ProgrammeSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { notFound } from '../../common/errors/domain-error.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { findMembers, findProgrammes, insertMember, insertProgramme } from './programmes.repository.js';

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
}
