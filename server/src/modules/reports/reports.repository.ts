import type { Analysis, LineReport, Reading, ReportedSpectrum } from '@foreveil/shared';
import type { Knex } from 'knex';
import { groupBy } from '../../common/group-by.js';
import type { Scope } from '../../common/scope.js';
import { findIdentifications } from '../identifications/find-identifications.js';

interface SpectrumRow {
  readonly id: string;
  readonly label: string;
  readonly fileName: string;
  readonly sha256: string;
  readonly reading: Reading;
  readonly result: Analysis | null;
}

/** Which spectra a report is about. */
export type About = { readonly spectrumId: string } | { readonly targetId: string };

export type Heading = Pick<LineReport, 'programmeName' | 'targetName' | 'simulated'>;

/** Names for the head of a report; null when the programme has no such target or spectrum. */
export async function findHeading(db: Knex, { programmeId }: Scope, about: About): Promise<Heading | null> {
  const query = db('targets as t').join('programmes as p', 'p.id', 't.programme_id').where('t.programme_id', programmeId);
  if ('targetId' in about) query.where('t.id', about.targetId);
  else query.join('spectra as s', 's.target_id', 't.id').where({ 's.id': about.spectrumId, 's.removed_at': null });
  const row = await query.first<Heading | undefined>({ programmeName: 'p.name', targetName: 't.name', simulated: 't.simulated' });
  return row ?? null;
}

/** Spectra with their current analyses and decisions, in the order in which they were delivered. */
export async function findReported(db: Knex, scope: Scope, about: About): Promise<ReportedSpectrum[]> {
  const [spectra, decisions] = await Promise.all([
    db('spectra as s')
      .leftJoin('analyses as a', 'a.id', 's.current_analysis_id')
      .where({ 's.programme_id': scope.programmeId, 's.removed_at': null })
      .where('targetId' in about ? { 's.target_id': about.targetId } : { 's.id': about.spectrumId })
      .orderBy(['s.created_at', 's.id'])
      .select<SpectrumRow[]>({
        id: 's.id',
        label: 's.label',
        fileName: 's.file_name',
        sha256: 's.sha256',
        reading: 's.reading',
        result: 'a.result',
      }),
    findIdentifications(db, scope, about),
  ]);
  const bySpectrum = groupBy(decisions, ({ spectrumId }) => spectrumId);
  return spectra.map(({ id, result, ...facts }) => ({ ...facts, analysis: result, identifications: bySpectrum.get(id) ?? [] }));
}

/** Ids of the lines that a report names: first candidates and decisions. */
export function namedLines(spectra: readonly ReportedSpectrum[]): string[] {
  const ids = spectra.flatMap(({ analysis, identifications }) => [
    ...(analysis?.features ?? []).flatMap(({ candidates }) => candidates[0]?.lineId ?? []),
    ...identifications.flatMap(({ lineId }) => lineId ?? []),
  ]);
  return [...new Set(ids)];
}

/** Lists that the current analyses and the decisions of these spectra rest on. */
export async function findListsUsed(db: Knex, { programmeId }: Scope, about: About): Promise<string[]> {
  const ofThese = 'targetId' in about ? { 's.target_id': about.targetId } : { 's.id': about.spectrumId };
  const within = (table: string, on: string) =>
    db('spectra as s').join(table, on, 's.id').where('s.programme_id', programmeId).where(ofThese);
  const rows = await within('analyses as a', 'a.spectrum_id')
    .whereRaw('a.id = s.current_analysis_id')
    .select<{ id: string }[]>({ id: 'a.line_list_id' })
    .union(within('identifications as i', 'i.spectrum_id').select({ id: 'i.line_list_id' }));
  return rows.map(({ id }) => id);
}
