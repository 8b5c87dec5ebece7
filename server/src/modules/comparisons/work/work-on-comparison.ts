import type { Analysis, ComparisonSettings, ComparedLine, SightlineComparison } from '@foreveil/shared';
import type { Knex } from 'knex';
import { inTransaction, type Trx } from '../../../database/transaction.js';
import type { AnalysisThread } from '../../analyses/work/analysis-thread.js';
import { sayEvent } from '../../events/say-event.js';
import { loadLineList } from '../../linelists/line-list-store.js';
import { loadSpectrum } from '../../spectra/spectrum-bytes.js';

interface Claim {
  readonly id: string;
  readonly programmeId: string;
  readonly spectrumA: string;
  readonly spectrumB: string;
  readonly analysisA: string;
  readonly analysisB: string;
  readonly lineListId: string;
  readonly settings: ComparisonSettings;
  readonly supersedes: string | null;
  /** the fence: only the latest attempt may write */
  readonly attempt: number;
}

const MOST_ATTEMPTS = 3;
const GIVEN_UP = `The comparison was tried ${MOST_ATTEMPTS} times, and each time its worker ended before it was done.`;

/** Works on one comparison from taking it to storing its result. @throws when the attempt failed and the queue is to hand the job out again */
export async function workOnComparison(db: Knex, thread: AnalysisThread, comparisonId: string, signal: AbortSignal): Promise<void> {
  const claimed = await claim(db, comparisonId);
  if (!claimed) return;
  const [a, b] = [
    await sightline(db, claimed, claimed.spectrumA, claimed.analysisA),
    await sightline(db, claimed, claimed.spectrumB, claimed.analysisB),
  ];
  if (!a || !b) return end(db, claimed, { phase: 'ERROR', error: 'One of the two spectra was removed meanwhile.' });
  if (!thread.knowsList(claimed.lineListId)) thread.keepList(claimed.lineListId, await loadLineList(db, claimed.lineListId));
  const outcome = await thread.compare({ listId: claimed.lineListId, a, b, settings: claimed.settings }, signal);
  if (outcome.end === 'compared') return store(db, claimed, outcome.comparison);
  if (outcome.end === 'failed')
    return end(db, claimed, { phase: 'ERROR', error: `The comparison stopped with an error: ${outcome.reason}` });
  if (outcome.end === 'stopped' && signal.reason === 'too_long')
    return end(db, claimed, { phase: 'ERROR', error: 'The comparison took too long and was stopped.' });
  await db('comparisons').where({ id: claimed.id, attempts: claimed.attempt }).update({ phase: 'QUEUED' });
  throw new Error(outcome.end === 'died' ? outcome.reason : 'its worker was asked to stop');
}

function claim(db: Knex, id: string): Promise<Claim | null> {
  return inTransaction(db, async (trx) => {
    const row = await trx('comparisons').where({ id }).whereIn('phase', ['QUEUED', 'EXECUTING']).forUpdate().first<Claim | undefined>({
      id: 'id',
      programmeId: 'programme_id',
      spectrumA: 'spectrum_a',
      spectrumB: 'spectrum_b',
      analysisA: 'analysis_a',
      analysisB: 'analysis_b',
      lineListId: 'line_list_id',
      settings: 'settings',
      supersedes: 'supersedes',
      attempt: 'attempts',
    });
    if (!row) return null;
    const attempt = row.attempt + 1;
    const given = attempt > MOST_ATTEMPTS;
    const now = given ? { phase: 'ERROR', error: GIVEN_UP, ended_at: trx.fn.now() } : { phase: 'EXECUTING', attempts: attempt };
    await trx('comparisons').where({ id }).update(now);
    await sayEvent(trx, { kind: 'comparison', programmeId: row.programmeId, id });
    return given ? null : { ...row, attempt };
  });
}

async function sightline(db: Knex, scope: { programmeId: string }, spectrumId: string, analysisId: string) {
  const spectrum = await loadSpectrum(db, scope, spectrumId);
  const row = await db('analyses')
    .where({ programme_id: scope.programmeId, id: analysisId })
    .first<{ result: Analysis | null } | undefined>('result');
  return spectrum && row?.result ? { spectrum, analysis: row.result } : null;
}

/** Ends the comparison, if it is still this attempt's. @returns whether it was */
async function ended(trx: Trx, { id, attempt }: Claim, how: Record<string, unknown>): Promise<boolean> {
  const rows = await trx('comparisons')
    .where({ id, attempts: attempt, phase: 'EXECUTING' })
    .update({ ...how, ended_at: trx.fn.now() });
  return rows === 1;
}

async function end(db: Knex, claimed: Claim, how: Record<string, unknown>): Promise<void> {
  await inTransaction(db, async (trx) => {
    if (await ended(trx, claimed, how)) await sayEvent(trx, { kind: 'comparison', programmeId: claimed.programmeId, id: claimed.id });
  });
}

async function store(db: Knex, claimed: Claim, comparison: SightlineComparison): Promise<void> {
  await inTransaction(db, async (trx) => {
    const result = JSON.stringify(comparison);
    if (!(await ended(trx, claimed, { phase: 'COMPLETED', result, program_version: comparison.programVersion }))) return;
    if (claimed.supersedes) await carryRulings(trx, claimed.supersedes, claimed.id, comparison);
    await sayEvent(trx, { kind: 'comparison', programmeId: claimed.programmeId, id: claimed.id });
  });
}

const SAME_PLACE = 3; // km/s: a cloud that a re-run puts within this is the same one

/** Rulings of the superseded comparison go with their lines; those whose line no longer stands stay behind with it. */
async function carryRulings(trx: Trx, from: string, to: string, comparison: SightlineComparison): Promise<void> {
  const before = await trx('comparisons').where({ id: from }).first<{ result: SightlineComparison | null } | undefined>('result');
  const rulings = await trx('verdict_rulings').where({ comparison_id: from }).select<Record<string, unknown>[]>('*');
  for (const ruling of rulings) {
    const old = before?.result?.lines.find((l) => l.key === ruling['line_key']);
    const line = old && comparison.lines.find((l) => isSame(l, old));
    if (!line) continue;
    const { verdict, remark, ruled_by, ruled_at } = ruling;
    const row = { comparison_id: to, line_key: line.key, verdict, remark, ruled_by, ruled_at };
    await trx('verdict_rulings').insert(row).onConflict(['comparison_id', 'line_key']).ignore();
    await trx('verdict_ruling_events').insert(row);
  }
}

const isSame = (l: ComparedLine, old: ComparedLine): boolean =>
  l.lineId === old.lineId && l.family === old.family && Math.abs(l.velocityKmPerS - old.velocityKmPerS) < SAME_PLACE;
