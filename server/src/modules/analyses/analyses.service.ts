import { Inject, Injectable } from '@nestjs/common';
import type { AnalysisRun, AnalysisSummary, NewAnalysis } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asMember } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { spectrumExists } from '../spectra/find-spectra.js';
import type { Scope } from '../../common/scope.js';
import { abortAnalysis } from './abort-analysis.js';
import { findAnalysisWithResult } from './analyses.repository.js';
import { checkSettings } from './check-settings.js';
import { findAnalysis, findRuns } from './find-analyses.js';
import { queueAnalysis } from './queue-analysis.js';

@Injectable()
export class AnalysesService {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  async list(scope: Scope, spectrumId: string): Promise<AnalysisRun[]> {
    if (!(await spectrumExists(this.db, scope, spectrumId))) throw notFound();
    return findRuns(this.db, scope, spectrumId);
  }

  /** @returns an AnalysisDetail as JSON text; its result goes out as it is stored, unparsed */
  async getAsJson(scope: Scope, id: string): Promise<string> {
    const found = await findAnalysisWithResult(this.db, scope, id);
    if (!found) throw notFound();
    const { resultText, ...detail } = found;
    return `${JSON.stringify(detail).slice(0, -1)},"result":${resultText ?? 'null'}}`;
  }

  async request(actor: Actor, scope: Scope, spectrumId: string, { settings, lineListId }: NewAnalysis): Promise<AnalysisSummary> {
    if (settings) checkSettings(settings);
    const wanted = { spectrumId, userId: actor.userId, settings, lineListId };
    const id = await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      if (!(await spectrumExists(trx, scope, spectrumId))) throw notFound();
      const made = await queueAnalysis(trx, scope, wanted, this.config.analysisSeconds);
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'analysis_requested', subject: made, facts: { spectrumId, settings } });
      return made;
    });
    return this.get(scope, id);
  }

  /** Cancelled at once in the record; a worker that is at it stops within two seconds and can no longer write. */
  async cancel(actor: Actor, scope: Scope, id: string): Promise<AnalysisSummary> {
    await asMember(this.db, actor, scope.programmeId, 'analyst', async (trx) => {
      if (!(await findAnalysis(trx, scope, id))) throw notFound();
      if (!(await abortAnalysis(trx, scope, id))) throw new DomainError('analysis_not_running', 'This analysis has ended already.');
      await addAudit(trx, { ...scope, userId: actor.userId, action: 'analysis_cancelled', subject: id, facts: {} });
      await sayEvent(trx, { kind: 'analysis_cancelled', id });
      await sayEvent(trx, { kind: 'analysis', ...scope, id });
    });
    return this.get(scope, id);
  }

  private async get(scope: Scope, id: string): Promise<AnalysisSummary> {
    const summary = await findAnalysis(this.db, scope, id);
    if (!summary) throw notFound();
    return summary;
  }
}
