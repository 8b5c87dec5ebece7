import { Inject, Injectable } from '@nestjs/common';
import {
  comparisonCsv,
  DEFAULT_COMPARISON_SETTINGS,
  PROGRAM_VERSION,
  roleAllows,
  type ComparisonRerun,
  type ComparisonSettings,
  type ComparisonSummary,
  type NewComparison,
} from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember, roleIn } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { KNEX } from '../../database/knex.js';
import type { Trx } from '../../database/transaction.js';
import { sendCompareJob } from '../analyses/job-queue.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { findAnalysed, insertComparison, lockComparison, type Analysed } from './comparisons.repository.js';
import { findComparison, findComparisons, findComparisonWithResult, parsedResult } from './find-comparisons.js';

interface Wanted {
  readonly name?: string;
  readonly spectrumA: string;
  readonly spectrumB: string;
  readonly settings: ComparisonSettings;
  readonly supersedes: string | null;
}

@Injectable()
export class ComparisonsService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  list(scope: Scope): Promise<ComparisonSummary[]> {
    return findComparisons(this.db, scope, { newest: true });
  }

  /** @returns a ComparisonDetail as JSON text; its result goes out as it is stored, unparsed */
  async getAsJson(scope: Scope, id: string): Promise<string> {
    const found = await findComparisonWithResult(this.db, scope, id);
    if (!found) throw notFound();
    const { resultText, ...detail } = found;
    return `${JSON.stringify(detail).slice(0, -1)},"result":${resultText ?? 'null'}}`;
  }

  create(actor: Actor, scope: Scope, { settings, ...asked }: NewComparison): Promise<ComparisonSummary> {
    const wanted = { ...asked, settings: { ...DEFAULT_COMPARISON_SETTINGS, ...onlySet(settings ?? {}) }, supersedes: null };
    return asMember(this.db, actor, scope.programmeId, 'analyst', (trx) => this.queue(trx, actor, scope, wanted));
  }

  rerun(actor: Actor, scope: Scope, id: string, asked: ComparisonRerun): Promise<ComparisonSummary> {
    return asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const before = await lockComparison(trx, scope, id);
      if (!before) throw notFound();
      if (before.phase === 'QUEUED' || before.phase === 'EXECUTING')
        throw new DomainError('bad_transition', 'This comparison is still at work. Wait for it before comparing again.');
      const { spectrumA, spectrumB } = before;
      const name = asked.name ?? before.name;
      const wanted = { name, spectrumA, spectrumB, settings: { ...before.settings, ...onlySet(asked.settings ?? {}) }, supersedes: id };
      return this.queue(trx, actor, scope, wanted);
    });
  }

  async remove(actor: Actor, scope: Scope, id: string, version: number): Promise<void> {
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      const row = await lockComparison(trx, scope, id);
      if (!row) throw notFound();
      const role = await roleIn(trx, actor.userId, scope.programmeId);
      if (row.requestedBy !== actor.userId && !(role && roleAllows(role, 'reviewer')))
        throw new DomainError('forbidden_role', 'A comparison that somebody else asked for is deleted by a reviewer.');
      if (row.version !== version)
        throw new DomainError('stale_version', 'This comparison changed meanwhile.', { current: await findComparison(trx, scope, id) });
      await trx('comparisons').where({ programme_id: scope.programmeId, id }).delete();
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'comparison_deleted', subject: id, facts: { name: row.name } });
      await sayEvent(trx, { kind: 'comparison', ...scope, id });
    });
  }

  async report(actor: Actor, scope: Scope, id: string): Promise<{ fileName: string; csv: string }> {
    const found = await findComparisonWithResult(this.db, scope, id);
    if (!found) throw notFound();
    const { resultText, ...detail } = found;
    if (!resultText) throw new DomainError('analysis_not_complete', 'This comparison is not complete, so there is nothing to report yet.');
    await addAudit(this.db, { ...scope, userId: actor.userId, action: 'comparison_exported', subject: id, facts: {} });
    return {
      fileName: `${detail.name}.csv`,
      csv: comparisonCsv({ ...detail, result: parsedResult(resultText) }, new Date().toISOString()),
    };
  }

  private async queue(trx: Trx, actor: Actor, scope: Scope, wanted: Wanted): Promise<ComparisonSummary> {
    if (wanted.spectrumA === wanted.spectrumB) {
      const errors = [{ pointer: '/spectrumB', detail: 'must be another spectrum than spectrumA' }];
      throw new DomainError('invalid_request', 'A spectrum is compared with another one.', { errors });
    }
    const [a, b] = [await analysed(trx, scope, wanted.spectrumA), await analysed(trx, scope, wanted.spectrumB)];
    const name = wanted.name ?? `${a.label} and ${b.label}`.slice(0, 200);
    const { settings, supersedes } = wanted;
    const id = await insertComparison(trx, scope, {
      name,
      a,
      b,
      settings,
      supersedes,
      programVersion: PROGRAM_VERSION,
      userId: actor.userId,
    });
    if (!id) throw new DomainError('bad_transition', 'This comparison was made again already. Open the newer one.');
    await sendCompareJob(trx, { comparisonId: id });
    const facts = { a: a.spectrumId, b: b.spectrumId, settings, supersedes };
    await addAudit(trx, { ...scope, userId: actor.userId, action: 'comparison_requested', subject: id, facts });
    await sayEvent(trx, { kind: 'comparison', ...scope, id });
    return (await findComparison(trx, scope, id))!;
  }
}

async function analysed(trx: Trx, scope: Scope, spectrumId: string): Promise<Analysed> {
  const found = await findAnalysed(trx, scope, spectrumId);
  if (!found) throw notFound();
  if (!found.analysisId)
    throw new DomainError('analysis_not_complete', `${found.label} has no finished analysis yet. Compare when it is done.`);
  return found;
}

/** A request's shape holds undefined for what was left out, and that must not cover a default. */
const onlySet = (settings: Partial<ComparisonSettings>): Partial<ComparisonSettings> =>
  Object.fromEntries(Object.entries(settings).filter(([, value]) => value !== undefined));
