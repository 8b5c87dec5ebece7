import type { ComparisonDetail, VerdictRuling } from '../contract/index.js';
import type { Column, ComparedLine, LineMeasure, SightlineComparison } from '../sightlines/index.js';
import { digits, text, writeCsv, type Cell } from './csv.js';
import { roundedToError } from './rounding.js';

type Reported = ComparisonDetail & { readonly result: SightlineComparison };

const PM_PER_NM = 1000;

const pair = (value: number | null | undefined, sigma: number | null | undefined, scale = 1): Cell[] => {
  if (value == null || !Number.isFinite(value)) return [digits(''), digits('')];
  const r = roundedToError(value * scale, sigma == null ? null : sigma * scale);
  return [digits(r.value), digits(r.sigma)];
};
const number = (value: number | null | undefined, places: number): Cell =>
  digits(value == null || !Number.isFinite(value) ? '' : String(Number(value.toFixed(places))));

const measure = (m: LineMeasure | null): Cell[] => [
  ...pair(m?.equivalentWidthNm, m?.equivalentWidthSigmaNm, PM_PER_NM),
  number(m && m.limitNm * PM_PER_NM, 4),
  ...pair(m?.velocityKmPerS, m?.velocitySigmaKmPerS),
];

const MEASURED = ['ew_pm', 'ew_err_pm', 'ew_limit_2sigma_pm', 'rv_km_s', 'rv_err_km_s'];
const NAMES = [
  ...[
    'part',
    'species',
    'lambda_rest_vac_nm',
    'family',
    'system_velocity_km_s',
    'verdict',
    'verdict_by',
    'computed_verdict',
    'probability',
  ],
  ...MEASURED.map((n) => `a_${n}`),
  ...MEASURED.map((n) => `b_${n}`),
  ...['ew_ratio_b_a', 'ew_ratio_err', 'rv_difference_km_s', 'rv_difference_err_km_s'],
  ...['a_log_n', 'a_log_n_err', 'a_log_n_kind', 'b_log_n', 'b_log_n_err', 'b_log_n_kind', 'remark'],
];

/** Verdicts on all lines, then the columns of every cloud, as one table with comments before it. @param writtenAt ISO 8601, UTC */
export function comparisonCsv(c: Reported, writtenAt: string): string {
  const rulings = new Map(c.rulings.map((r) => [r.lineKey, r]));
  const rows = [...c.result.lines.map((l) => lineRow(l, rulings.get(l.key))), ...columnRows(c.result)];
  return writeCsv(comments(c, writtenAt), NAMES, rows);
}

function comments(c: Reported, writtenAt: string): string[] {
  const { settings: s } = c.result;
  return [
    'Comparison of two sightlines',
    `name: ${c.name}`,
    ...(c.simulated ? ['simulated: yes, these data were computed and are no observation'] : []),
    `A: ${c.a.targetName}, ${c.a.label}, frame ${c.result.a.frame}, resolving power ${Math.round(c.result.a.resolvingPower)}`,
    `B: ${c.b.targetName}, ${c.b.label}, frame ${c.result.b.frame}, resolving power ${Math.round(c.result.b.resolvingPower)}`,
    'verdict: shared, only-a, only-b, telluric, cannot-tell; by a person where verdict_by names one; probability is of the computed one',
    'equivalent width: pm (1 pm = 10 mA), positive in absorption; limits 2 sigma; errors 1 sigma',
    'velocity: relativistic Doppler velocity, km/s, positive when receding, both spectra on one scale',
    'log_n: log10 of the column density per cm2; kind upper_limit (2 sigma, not seen), lower_limit (saturated), apparent-depth (Savage & Sembach 1991, ApJ 379, 245) or curve-of-growth',
    `settings: clouds within ${s.matchKmPerS} km/s are one; offsets A ${s.offsetAKmPerS}, B ${s.offsetBKmPerS} km/s`,
    `line list: ${c.result.lineListName} ${c.result.lineListVersion}`,
    `program: Foreveil ${c.result.programVersion}`,
    `asked for by: ${c.requestedBy}, ${c.requestedAt}`,
    `written: ${writtenAt}`,
    ...c.result.cautions.map((caution) => `caution: ${caution}`),
  ];
}

function lineRow(l: ComparedLine, ruling: VerdictRuling | undefined): Cell[] {
  const ruled = ruling?.verdict ?? null;
  return [
    ...[text('line'), text(l.species), number(l.restNm, 6), text(l.family), number(l.velocityKmPerS, 3)],
    ...[text(ruled ?? l.verdict), text(ruled ? ruling!.by : ''), text(l.verdict), number(l.probability, 4)],
    ...measure(l.a),
    ...measure(l.b),
    ...pair(l.ratio, l.ratioSigma),
    ...pair(l.differenceKmPerS, l.differenceSigmaKmPerS),
    ...Array.from({ length: 6 }, () => text('')),
    text(ruled ? ruling!.remark : ''),
  ];
}

const kind = (c: Column | null) => (!c ? '' : c.method === 'limit' ? 'upper_limit' : c.saturated ? 'lower_limit' : c.method);
const column = (c: Column | null): Cell[] => [...pair(c?.logN, c?.logNSigma ?? 0.01), text(kind(c))];

function columnRows({ clouds }: SightlineComparison): Cell[][] {
  return clouds.flatMap((cloud) =>
    cloud.columns.map((s) => [
      ...[text('column'), text(s.species), digits(''), text('interstellar'), number(cloud.velocityKmPerS, 3)],
      ...[text(cloud.verdict), text(''), text(cloud.verdict), number(cloud.probability, 4)],
      ...Array.from({ length: 14 }, () => text('')),
      ...column(s.a),
      ...column(s.b),
      text([s.a?.sentence, s.b?.sentence].filter(Boolean).join(' ')),
    ]),
  );
}
