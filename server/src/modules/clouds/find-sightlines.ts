import type { CloudMeasure, CloudSightline, CloudSummary, ComparedCloud, Side } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';

type Member = Omit<CloudSightline, 'measured'>;

/** The sightlines of a cloud by target, with what was measured on each. */
export async function findSightlines(db: Knex, scope: Scope, cloud: CloudSummary): Promise<CloudSightline[]> {
  const members = await db('cloud_sightlines as m')
    .join('spectra as s', 's.id', 'm.spectrum_id')
    .join('targets as t', 't.id', 's.target_id')
    .where({ 'm.programme_id': scope.programmeId, 'm.cloud_id': cloud.id, 's.removed_at': null })
    .orderByRaw('lower(t.name), s.label, s.id')
    .select<Member[]>(
      { spectrumId: 's.id', spectrumLabel: 's.label', targetId: 't.id', targetName: 't.name' },
      { simulated: 't.simulated', raDeg: 't.ra_deg', decDeg: 't.dec_deg' },
    );
  const measured = await findMeasures(db, scope, cloud);
  return members.map((member) => ({ ...member, measured: measured.get(member.spectrumId) ?? null }));
}

interface MeasureRow extends Omit<CloudMeasure, 'components'> {
  readonly spectrumId: string;
  readonly side: Side;
  readonly clouds: ComparedCloud[];
}

/**
 * Of each sightline the newest completed comparison that has clouds within the range. The velocities of a comparison stand in the frame that its
 * sides share; where their frames differ, an offset given by a person brings a side to its partner's, and without one nothing is taken.
 */
const MEASURES = `
  select distinct on (m.spectrum_id) m.spectrum_id as "spectrumId", c.id as "comparisonId", c.name as "comparisonName",
    case when c.spectrum_a = m.spectrum_id then 'a' else 'b' end as side, inside.clouds,
    case when c.spectrum_a = m.spectrum_id then c.analysis_a else c.analysis_b end as "analysisId",
    case when c.spectrum_a = m.spectrum_id then c.analysis_a is distinct from sa.current_analysis_id
      else c.analysis_b is distinct from sb.current_analysis_id end as outdated
  from cloud_sightlines m
  join comparisons c on c.programme_id = m.programme_id and m.spectrum_id in (c.spectrum_a, c.spectrum_b)
  join spectra sa on sa.id = c.spectrum_a and sa.removed_at is null
  join spectra sb on sb.id = c.spectrum_b and sb.removed_at is null
  cross join lateral (
    select json_agg(one order by (one->>'velocityKmPerS')::float8) as clouds from json_array_elements(c.result->'clouds') as one
    where (one->>'velocityKmPerS')::float8 between :from and :to
  ) as inside
  where m.programme_id = :programmeId and m.cloud_id = :cloudId and c.phase = 'COMPLETED' and inside.clouds is not null
    and (c.result->'a'->>'frame' = :frame or (c.settings->>'offsetAKmPerS')::float8 <> 0)
    and (c.result->'b'->>'frame' = :frame or (c.settings->>'offsetBKmPerS')::float8 <> 0)
    and :frame in (c.result->'a'->>'frame', c.result->'b'->>'frame')
  order by m.spectrum_id, c.ended_at desc, c.id`;

async function findMeasures(db: Knex, { programmeId }: Scope, cloud: CloudSummary): Promise<Map<string, CloudMeasure>> {
  const asked = { programmeId, cloudId: cloud.id, from: cloud.fromKmPerS, to: cloud.toKmPerS, frame: cloud.frame };
  const { rows } = await db.raw<{ rows: MeasureRow[] }>(MEASURES, asked);
  return new Map(
    rows.map(({ spectrumId, side, clouds, ...from }) => [spectrumId, { ...from, components: clouds.map((one) => componentOf(one, side)) }]),
  );
}

const componentOf = ({ velocityKmPerS, velocitySigmaKmPerS, columns }: ComparedCloud, side: Side): CloudMeasure['components'][number] => ({
  velocityKmPerS,
  velocitySigmaKmPerS,
  columns: columns.flatMap((each) => (each[side] ? [{ species: each.species, column: each[side] }] : [])),
});
