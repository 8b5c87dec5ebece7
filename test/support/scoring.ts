import type { Candidate, Feature } from '@foreveil/shared';

// How an analysis is held against the truth of a simulation. A true feature is what a fit with one free profile sees: lines that the data
// cannot tell apart are one. Reported features are matched to true ones one to one, by place, width and strength together.

/** A line that went into a simulated spectrum, as the truth file writes it. */
export interface TrueLine {
  readonly species: string;
  readonly rest_nm: number;
  readonly obs_nm: number;
  /** positive in absorption */
  readonly ew_nm: number;
  readonly fwhm_nm: number;
  readonly setting: string;
  readonly system: string;
  /** whether the line list has it */
  readonly listed: boolean;
  /** significance that a perfect detection would give it */
  readonly snr: number;
  readonly covered: boolean;
}

export interface TrueFeature {
  readonly nm: number;
  readonly fwhmNm: number;
  readonly widthNm: number;
  readonly snr: number;
  readonly covered: boolean;
  /** its main contributors: 30 % of it, or where there are none, nearly as strong as the strongest */
  readonly main: readonly TrueLine[];
  readonly lines: readonly TrueLine[];
}

const DETECTABLE = 2; // sigma
const sum = (values: readonly number[]) => values.reduce((a, b) => a + b, 0);
const strength = (line: TrueLine) => Math.abs(line.ew_nm);

/** Separation, in FWHM of the narrower, below which one profile fits two equal lines as well as two do. */
const inseparable = (snrOfWeaker: number) => (snrOfWeaker >= 5 ? Math.max(1, 0.62 + 7 / snrOfWeaker) : 1);

/** The lines of the truth above 2 sigma gathered into features. */
export function trueFeatures(lines: readonly TrueLine[]): TrueFeature[] {
  const gathered: TrueLine[][] = [];
  for (const line of lines.filter(({ snr }) => snr >= DETECTABLE).toSorted((a, b) => a.obs_nm - b.obs_nm)) {
    const last = gathered.at(-1);
    if (last && belongsTo(last, line)) last.push(line);
    else gathered.push([line]);
  }
  return gathered.map(featureOf).filter(({ widthNm }) => widthNm !== 0);
}

/** Mean place and width of lines that make one feature; the width is that of the broadest which takes a real part. */
function extentOf(lines: readonly TrueLine[]) {
  const total = sum(lines.map(strength));
  const part = lines.filter((line) => strength(line) > 0.2 * total);
  return {
    nm: sum(lines.map((line) => line.obs_nm * strength(line))) / total,
    fwhmNm: Math.max(lines[0]!.fwhm_nm, ...part.map(({ fwhm_nm }) => fwhm_nm)),
  };
}

function belongsTo(feature: readonly TrueLine[], line: TrueLine): boolean {
  const { nm, fwhmNm } = extentOf(feature);
  const narrow = Math.min(line.fwhm_nm, fwhmNm);
  const wide = Math.max(line.fwhm_nm, fwhmNm);
  const weaker = Math.min(line.snr, Math.max(...feature.map(({ snr }) => snr)));
  if (line.obs_nm - nm >= Math.max(inseparable(weaker) * narrow, 0.25 * wide)) return false;
  const last = feature.at(-1)!;
  const narrowOnBroad = wide > 4 * narrow && line.obs_nm - last.obs_nm > Math.min(line.fwhm_nm, last.fwhm_nm);
  return !narrowOnBroad;
}

function featureOf(lines: readonly TrueLine[]): TrueFeature {
  const total = sum(lines.map(strength));
  const strongest = Math.max(...lines.map(strength));
  return {
    ...extentOf(lines),
    widthNm: sum(lines.map(({ ew_nm }) => ew_nm)),
    snr: Math.max(...lines.map(({ snr }) => snr)),
    covered: lines.every(({ covered }) => covered),
    main: lines.filter((line) => strength(line) >= Math.min(0.3 * total, 0.7 * strongest)),
    lines,
  };
}

const WORST_FACTOR = 8; // in equivalent width

/** Distance of a reported feature from a true one in place, width and strength; null when they cannot be the same. */
function distance(found: Feature, truth: TrueFeature): number | null {
  if (truth.widthNm > 0 !== (found.kind === 'dip')) return null;
  // a program's own error bar widens the reach by no more than half
  const reach = Math.max(0.5 * truth.fwhmNm, 3 * Math.min(found.wavelengthSigmaNm || 0, 0.25 * truth.fwhmNm));
  const place = Math.abs(found.wavelengthNm - truth.nm) / reach;
  const factor = Math.log(Math.max(Math.abs(found.equivalentWidthNm), 1e-12) / Math.abs(truth.widthNm));
  if (place > 1 || Math.abs(factor) > Math.log(WORST_FACTOR)) return null;
  const width = Math.log(Math.max(found.fwhmNm, 1e-9) / truth.fwhmNm);
  return place ** 2 + (width / 0.8) ** 2 + (factor / 1.2) ** 2;
}

/** Pairs of reported and true features, nearest first, each taken once. */
export function matched(found: readonly Feature[], truths: readonly TrueFeature[]): Map<Feature, TrueFeature> {
  const pairs = found.flatMap((feature) =>
    truths.flatMap((truth) => {
      const d = distance(feature, truth);
      return d === null ? [] : [{ feature, truth, d }];
    }),
  );
  const out = new Map<Feature, TrueFeature>();
  const taken = new Set<TrueFeature>();
  for (const { feature, truth } of pairs.sort((a, b) => a.d - b.d)) {
    if (out.has(feature) || taken.has(truth)) continue;
    out.set(feature, truth);
    taken.add(truth);
  }
  return out;
}

/** Reported features without a match that a further line of a blend explains, or the sum of lines too weak singly: at least 40 % of it. */
export function furtherExplained(found: readonly Feature[], pairs: ReadonlyMap<Feature, TrueFeature>, lines: readonly TrueLine[]): number {
  const taken = new Set<TrueLine>();
  for (const [feature, truth] of pairs) {
    const cost = (line: TrueLine) => Math.abs(line.obs_nm - feature.wavelengthNm) / line.fwhm_nm - 0.05 * Math.log(strength(line));
    taken.add(truth.lines.reduce((best, line) => (cost(line) < cost(best) ? line : best)));
  }
  let count = 0;
  for (const feature of found) {
    if (pairs.has(feature)) continue;
    const own = lines.filter(
      (line) =>
        !taken.has(line) &&
        line.ew_nm > 0 === (feature.kind === 'dip') &&
        line.fwhm_nm < 2.5 * feature.fwhmNm &&
        Math.abs(line.obs_nm - feature.wavelengthNm) < 0.5 * Math.max(feature.fwhmNm, line.fwhm_nm),
    );
    if (Math.abs(sum(own.map(({ ew_nm }) => ew_nm))) < 0.4 * Math.abs(feature.equivalentWidthNm)) continue;
    count++;
    own.forEach((line) => taken.add(line));
  }
  return count;
}

/** Whether a reading names a main contributor. Centres of diffuse bands are known to a tenth of a nanometre at best. */
export const isRight = (reading: Candidate | undefined, { main }: TrueFeature): boolean =>
  reading !== undefined &&
  main.some(
    (line) =>
      line.listed && line.species === reading.species && Math.abs(line.rest_nm - reading.restNm) < (line.species === 'DIB' ? 0.15 : 0.003),
  );
