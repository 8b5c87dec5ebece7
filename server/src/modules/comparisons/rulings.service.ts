import { Inject, Injectable } from '@nestjs/common';
import { ROLE_FOR, type NewRuling, type VerdictRuling } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { KNEX } from '../../database/knex.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { lockComparison } from './comparisons.repository.js';
import { lineOfResult } from './find-comparisons.js';
import { findRulings, writeRuling } from './rulings.repository.js';

/** The line that is ruled on, and the version of its ruling that the person saw; 0 when there was none. */
export interface SeenLine {
  readonly id: string;
  readonly lineKey: string;
  readonly version: number;
}

@Injectable()
export class RulingsService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  /** Overrules the verdict on a line, or takes an earlier ruling back. The computed verdict stays beside it. */
  rule(actor: Actor, scope: Scope, { id, lineKey, version }: SeenLine, { verdict, remark }: NewRuling): Promise<VerdictRuling> {
    return asMember(this.db, actor, scope.programmeId, ROLE_FOR.accept, async (trx) => {
      const row = await lockComparison(trx, scope, id);
      if (!row) throw notFound();
      if (row.phase !== 'COMPLETED')
        throw new DomainError('analysis_not_complete', 'This comparison is not complete, so it has no verdicts yet.');
      if (!(await lineOfResult(trx, id, lineKey))) throw notFound();
      const [before] = await findRulings(trx, id, lineKey);
      if (version !== (before?.version ?? 0))
        throw new DomainError('stale_version', 'A teammate ruled on this line meanwhile.', { current: before ?? null });
      await writeRuling(trx, { comparisonId: id, lineKey, verdict, remark, userId: actor.userId });
      const facts = { lineKey, from: before?.verdict ?? null, to: verdict, remark };
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'verdict_overruled', subject: id, facts });
      await sayEvent(trx, { kind: 'comparison', ...scope, id });
      const [after] = await findRulings(trx, id, lineKey);
      return after!;
    });
  }
}
