import { completeSettings, PROGRAM_VERSION, type AnalysisSettings } from '@foreveil/shared';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Trx } from '../../database/transaction.js';
import { sayEvent } from '../events/say-event.js';
import { lineListFor } from '../linelists/line-list-store.js';
import type { Scope } from '../../common/scope.js';
import { insertAnalysis } from './analyses.repository.js';
import { sendAnalyseJob } from './job-queue.js';

interface Wanted {
  readonly spectrumId: string;
  readonly userId: string;
  readonly settings?: Partial<AnalysisSettings>;
  /** the default list when left out */
  readonly lineListId?: string;
}

/** Puts an analysis of a spectrum into the queue. One at a time: a second one has to wait until the first ends or is cancelled. */
export async function queueAnalysis(
  trx: Trx,
  scope: Scope,
  { spectrumId, userId, settings, lineListId: chosen }: Wanted,
  analysisSeconds: number,
): Promise<string> {
  const lineListId = await lineListFor(trx, scope, chosen);
  const id = await insertAnalysis(trx, scope, {
    spectrumId,
    lineListId,
    userId,
    settings: completeSettings(settings ?? {}),
    programVersion: PROGRAM_VERSION,
  });
  if (!id) throw new DomainError('bad_transition', 'An analysis of this spectrum is still at work. Wait for it, or cancel it first.');
  const jobId = await sendAnalyseJob(trx, { analysisId: id }, analysisSeconds);
  await trx('analyses').where({ id }).update({ job_id: jobId });
  await sayEvent(trx, { kind: 'analysis', programmeId: scope.programmeId, id });
  return id;
}
