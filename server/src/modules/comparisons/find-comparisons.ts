import type { ComparisonDetail, ComparisonSummary, SightlineComparison, Verdict } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';
import { findRulings } from './rulings.repository.js';

interface Filter {
  readonly id?: string;
  /** leave out those that a re-run superseded */
  readonly newest?: boolean;
}

interface Row extends Omit<ComparisonSummary, 'a' | 'b' | 'requestedAt' | 'endedAt' | 'counts' | 'progress'> {
  readonly requestedAt: Date;
  readonly endedAt: Date | null;
  readonly counts: { line: string; verdict: Verdict }[] | null;
  readonly spectrumA: string;
  readonly labelA: string;
  readonly targetIdA: string;
  readonly targetNameA: string;
  readonly analysisA: string;
  readonly spectrumB: string;
  readonly labelB: string;
  readonly targetIdB: string;
  readonly targetNameB: string;
  readonly analysisB: string;
}

const COLUMNS = {
  id: 'c.id',
  name: 'c.name',
  phase: 'c.phase',
  error: 'c.error',
  requestedBy: 'u.name',
  requestedAt: 'c.requested_at',
  endedAt: 'c.ended_at',
  programVersion: 'c.program_version',
  lineListName: 'l.name',
  lineListVersion: 'l.version',
  version: 'c.version',
  spectrumA: 'sa.id',
  labelA: 'sa.label',
  targetIdA: 'ta.id',
  targetNameA: 'ta.name',
  analysisA: 'c.analysis_a',
  spectrumB: 'sb.id',
  labelB: 'sb.label',
  targetIdB: 'tb.id',
  targetNameB: 'tb.name',
  analysisB: 'c.analysis_b',
};

const found = (db: Knex, { programmeId }: Scope, { id, newest }: Filter) => {
  const query = db('comparisons as c')
    .join('users as u', 'u.id', 'c.requested_by')
    .join('line_lists as l', 'l.id', 'c.line_list_id')
    .join('spectra as sa', 'sa.id', 'c.spectrum_a')
    .join('spectra as sb', 'sb.id', 'c.spectrum_b')
    .join('targets as ta', 'ta.id', 'sa.target_id')
    .join('targets as tb', 'tb.id', 'sb.target_id')
    .where({ 'c.programme_id': programmeId, 'sa.removed_at': null, 'sb.removed_at': null });
  if (id) query.where('c.id', id);
  if (newest) query.whereNotExists(db('comparisons as later').whereRaw('later.supersedes = c.id').select(db.raw('1')));
  return query.orderBy('c.requested_at', 'desc').orderBy('c.id');
};

const computed = (db: Knex) => [
  db.raw('(c.analysis_a is distinct from sa.current_analysis_id or c.analysis_b is distinct from sb.current_analysis_id) as outdated'),
  db.raw('(select later.id from comparisons later where later.supersedes = c.id) as "supersededBy"'),
  db.raw(`(select json_agg(json_build_object('line', line->>'key', 'verdict', coalesce(r.verdict, line->>'verdict')))
    from json_array_elements(c.result->'lines') as line
    left join verdict_rulings r on r.comparison_id = c.id and r.line_key = line->>'key') as counts`),
];

const NONE: Record<Verdict, number> = { shared: 0, 'only-a': 0, 'only-b': 0, telluric: 0, 'cannot-tell': 0 };

function toSummary(row: Row): ComparisonSummary {
  const counts = { ...NONE };
  for (const { verdict } of row.counts ?? []) counts[verdict]++;
  return {
    id: row.id,
    name: row.name,
    a: { spectrumId: row.spectrumA, label: row.labelA, targetId: row.targetIdA, targetName: row.targetNameA, analysisId: row.analysisA },
    b: { spectrumId: row.spectrumB, label: row.labelB, targetId: row.targetIdB, targetName: row.targetNameB, analysisId: row.analysisB },
    phase: row.phase,
    progress: row.phase === 'COMPLETED' ? 1 : 0,
    error: row.error,
    requestedBy: row.requestedBy,
    requestedAt: row.requestedAt.toISOString(),
    endedAt: row.endedAt?.toISOString() ?? null,
    programVersion: row.programVersion,
    lineListName: row.lineListName,
    lineListVersion: row.lineListVersion,
    counts: row.phase === 'COMPLETED' ? counts : null,
    outdated: row.outdated,
    supersededBy: row.supersededBy,
    version: row.version,
  };
}

/** Comparisons of a programme, newest first, without their results. */
export async function findComparisons(db: Knex, scope: Scope, filter: Filter = {}): Promise<ComparisonSummary[]> {
  return (await found(db, scope, filter).select<Row[]>(COLUMNS, ...computed(db))).map(toSummary);
}

export async function findComparison(db: Knex, scope: Scope, id: string): Promise<ComparisonSummary | null> {
  const [summary] = await findComparisons(db, scope, { id });
  return summary ?? null;
}

/** A comparison with all but its result, and that as the text that was stored. */
export async function findComparisonWithResult(
  db: Knex,
  scope: Scope,
  id: string,
): Promise<(Omit<ComparisonDetail, 'result'> & { resultText: string | null }) | null> {
  const summary = await findComparison(db, scope, id);
  if (!summary) return null;
  const row = await db('comparisons as c')
    .join('spectra as sa', 'sa.id', 'c.spectrum_a')
    .join('targets as ta', 'ta.id', 'sa.target_id')
    .where({ 'c.id': id, 'c.programme_id': scope.programmeId })
    .first<{ settings: ComparisonDetail['settings']; resultText: string | null; simulated: boolean }>(
      { settings: 'c.settings', simulated: 'ta.simulated' },
      db.raw('c.result::text as "resultText"'),
    );
  return { ...summary, settings: row.settings, simulated: row.simulated, rulings: await findRulings(db, id), resultText: row.resultText };
}

/** Whether a line stands in a comparison's result. */
export async function lineOfResult(db: Knex, id: string, lineKey: string): Promise<boolean> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `select 1 from comparisons c, json_array_elements(c.result->'lines') as line where c.id = :id and line->>'key' = :lineKey limit 1`,
    { id, lineKey },
  );
  return rows.length > 0;
}

export const parsedResult = (text: string): SightlineComparison => JSON.parse(text) as SightlineComparison;
