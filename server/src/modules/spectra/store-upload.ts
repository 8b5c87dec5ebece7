import { DomainError } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import type { Trx } from '../../database/transaction.js';
import { queueAnalysis } from '../analyses/queue-analysis.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { settleTarget, type Destination } from '../targets/settle-target.js';
import { sizeOf } from './original.js';
import { findSpectrumIdByHash, insertSpectrum, lockStoredBytes, type NewSpectrum } from './spectra.repository.js';

interface Limits {
  readonly programmeLimitBytes: number;
  readonly analysisSeconds: number;
}

/**
 * All of an upload in the caller's transaction: target, original bytes, reading, columns, audit line and the analysis with its job.
 * @returns the spectrum's id, or null when the programme already has the file (the caller then rolls back)
 */
export async function storeUpload(
  trx: Trx,
  scope: Scope,
  destination: Destination,
  made: Omit<NewSpectrum, 'targetId'>,
  limits: Limits,
): Promise<string | null> {
  const stored = await lockStoredBytes(trx, scope); // from here on uploads into this programme follow one another
  if (stored + sizeOf(made.original) > limits.programmeLimitBytes) {
    throw new DomainError(
      'too_large',
      `The programme may keep ${mib(limits.programmeLimitBytes)} of files, and this one would exceed that.`,
    );
  }
  if (await findSpectrumIdByHash(trx, scope, made.sha256)) return null;
  const { userId } = made;
  const targetId = await settleTarget(trx, scope, destination, userId);
  const id = await insertSpectrum(trx, scope, { ...made, targetId });
  const facts = { targetId, fileName: made.fileName, sha256: made.sha256, corrections: made.corrections, recipe: made.recipe ?? null };
  await addAudit(trx, { ...scope, userId, action: 'spectrum_uploaded', subject: id, facts });
  await sayEvent(trx, { kind: 'spectrum', ...scope, id });
  await queueAnalysis(trx, scope, { spectrumId: id, userId }, limits.analysisSeconds);
  return id;
}

const mib = (bytes: number) => `${Math.round(bytes / 1024 / 1024)} MiB`;
