import {
  DEFAULT_COMPARISON_SETTINGS,
  PROGRAM_VERSION,
  type ComparedLine,
  type SightlineComparison,
  type SpectrumDetail,
} from '@foreveil/shared';
import { analysisOf, complete, feature, SODIUM } from './analyses.js';
import type { Api } from './api.js';
import type { Person, Team } from './person.js';
import { stored } from './spectra.js';

/** A second analysed spectrum in the programme. */
export async function anotherSpectrum(api: Api, team: Team): Promise<SpectrumDetail> {
  const spectrum = await stored(api, team, 'Other star');
  await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
  return spectrum;
}

const measure = (width: number) => ({
  equivalentWidthNm: width,
  equivalentWidthSigmaNm: 0.0004,
  limitNm: 0.0008,
  velocityKmPerS: -12.4,
  velocitySigmaKmPerS: 0.1,
  elementKmPerS: 5,
  featureIndex: 0,
  foreignNm: 0,
});

/** One made-up line: sodium D2 in a cloud that both stars show. */
export const comparedLine = (changes: Partial<ComparedLine> = {}): ComparedLine => ({
  key: `${SODIUM.lineId} cloud1`,
  ...SODIUM,
  family: 'interstellar',
  cloud: 0,
  velocityKmPerS: -12.4,
  verdict: 'shared',
  probability: 0.998,
  a: measure(0.0124),
  b: measure(0.0118),
  ratio: 0.952,
  ratioSigma: 0.045,
  differenceKmPerS: 0.05,
  differenceSigmaKmPerS: 0.14,
  sentence: 'Both sightlines show it.',
  ...changes,
});

const side = { frame: 'barycentric' as const, resolvingPower: 60_000, snr: 100, fromNm: 500, toNm: 504, starKmPerS: 12, airKmPerS: null };

/** A made-up result with one line and one cloud. */
export const comparisonOf = (lines: readonly ComparedLine[] = [comparedLine()]): SightlineComparison => ({
  programVersion: PROGRAM_VERSION,
  lineListName: 'Foreveil default',
  lineListVersion: '2026.1',
  settings: DEFAULT_COMPARISON_SETTINGS,
  a: side,
  b: side,
  lines,
  clouds: [
    {
      velocityKmPerS: -12.4,
      velocitySigmaKmPerS: 0.07,
      verdict: 'shared',
      probability: 0.999,
      a: { velocityKmPerS: -12.42, sigmaKmPerS: 0.1, bKmPerS: 2 },
      b: { velocityKmPerS: -12.37, sigmaKmPerS: 0.1, bKmPerS: 2 },
      columns: [],
      sentence: 'Both sightlines cross gas at −12.40 km/s.',
    },
  ],
  emission: [],
  offers: [],
  profiles: [],
  cautions: [],
});

/** A completed comparison as a worker leaves it, without the work. @returns its id */
export async function aComparison(
  api: Api,
  { programmeId, analyst }: Team,
  a: SpectrumDetail,
  b: SpectrumDetail,
  { result = comparisonOf(), by = analyst }: { result?: SightlineComparison; by?: Person } = {},
): Promise<string> {
  const list = await api.db('line_lists').where({ is_default: true }).first<{ id: string }>('id');
  const [row] = await api
    .db('comparisons')
    .insert({
      ...{ programme_id: programmeId, name: 'Star and other star', spectrum_a: a.id, spectrum_b: b.id },
      ...{ analysis_a: a.analysis!.id, analysis_b: b.analysis!.id, line_list_id: list!.id, phase: 'COMPLETED' },
      ...{ settings: JSON.stringify(DEFAULT_COMPARISON_SETTINGS), program_version: PROGRAM_VERSION, result: JSON.stringify(result) },
      ...{ requested_by: by.userId, ended_at: api.db.fn.now(), attempts: 1 },
    })
    .returning<{ id: string }[]>('id');
  return row!.id;
}
