import type { Line, LineList } from '../linelist/index.js';
import type { ComparedLine, LineMeasure } from './comparison.js';
import { SIDES, type Gas } from './clouds.js';
import type { Pair } from './gather.js';
import { gaussianImprint } from './imprint.js';
import { chanceOf, judge, lineLogOdds, SEEN_AT, velocityLogOdds, type Judgement } from './judge.js';
import type { Light } from './light.js';
import { measureLine, type Measured } from './measure-lines.js';
import { lineSentence } from './say.js';

const widthOf = ({ width, error }: Measured) => ({ width, error });
const MOST_EVIDENCE = 12;
const PRIOR_SHARED = 0;

/** Chance that each cloud is on both sightlines: from velocities where both analyses have it, and from all its lines. */
export function cloudChances(gas: Gas): number[] {
  return gas.drafts.map((d, k) => {
    let logOdds = PRIOR_SHARED;
    // each analysis has a cloud there: that both show lines is no news, whether it is one cloud is told by how near they are
    if (d.found.length === 2) {
      logOdds += velocityLogOdds(d.at.a.velocity - d.at.b.velocity, Math.hypot(d.at.a.sigma, d.at.b.sigma));
      return chanceOf(Math.max(-MOST_EVIDENCE, logOdds));
    }
    for (let i = 0; i < gas.lines.length; i++) {
      const [a, b] = [gas.measured.a[i]![k], gas.measured.b[i]![k]];
      if (a && b && (a.width > SEEN_AT * a.error || b.width > SEEN_AT * b.error)) logOdds += lineLogOdds(widthOf(a), widthOf(b));
    }
    return chanceOf(Math.max(-MOST_EVIDENCE, Math.min(MOST_EVIDENCE, logOdds)));
  });
}

/** Verdicts on every line of gas: those seen on a side, and their partners of the same species in the same cloud. */
export function comparedGas(gas: Gas, pair: Pair, chances: readonly number[]): ComparedLine[] {
  const out: ComparedLine[] = [];
  gas.drafts.forEach((_, k) => {
    const shown = new Set(gas.lines.filter((_, i) => SIDES.some((s) => isSeen(gas.measured[s][i]![k]))).map((l) => l.species));
    gas.lines.forEach((line, i) => {
      const [a, b] = [gas.measured.a[i]![k] ?? null, gas.measured.b[i]![k] ?? null];
      if (!shown.has(line.species) || (!a && !b) || !isExpected(a, b)) return;
      out.push(comparedLine(line, k, gas, pair, a, b, chances[k]!));
    });
  });
  return out;
}

const isSeen = (m: Measured | null | undefined): boolean => !!m && m.width > SEEN_AT * m.error;
const isExpected = (a: Measured | null, b: Measured | null) => [a, b].some((m) => m && m.width > 2 * m.error);

export function comparedLine(
  line: Line,
  k: number,
  { drafts }: Pick<Gas, 'drafts'>,
  pair: Pair,
  a: Measured | null,
  b: Measured | null,
  chance: number,
): ComparedLine {
  const at = drafts[k]!.at;
  const j: Judgement | null = a && b ? judge(widthOf(a), widthOf(b), chance) : null;
  const sides = { a: a && measureOf(a, pair.a, at.a), b: b && measureOf(b, pair.b, at.b) };
  const verdict = j?.verdict ?? 'cannot-tell';
  const both = isSeen(a) && isSeen(b) && a && b;
  const ratio = both ? b.width / a.width : null;
  const [va, vb] = [sides.a, sides.b].map((m) => m?.velocityKmPerS ?? null);
  const moved = va != null && vb != null;
  return {
    key: `${line.id} cloud${k + 1}`,
    lineId: line.id,
    species: line.species,
    restNm: line.wavelengthNm,
    family: 'interstellar',
    cloud: k,
    velocityKmPerS: jointVelocity(at),
    verdict,
    probability: j?.probability ?? chance,
    a: sides.a,
    b: sides.b,
    ratio,
    ratioSigma: both ? Math.abs(ratio!) * Math.hypot(a.error / a.width, b.error / b.width) : null,
    differenceKmPerS: moved ? vb - va : null,
    differenceSigmaKmPerS: moved ? Math.hypot(sides.a!.velocitySigmaKmPerS!, sides.b!.velocitySigmaKmPerS!) : null,
    sentence: lineSentence(verdict, sides.a, sides.b),
  };
}

/** Weighted mean of a cloud's velocities on both sides. */
export function jointVelocity(at: Gas['drafts'][number]['at']): number {
  const [wa, wb] = [at.a.sigma ** -2, at.b.sigma ** -2];
  return (wa * at.a.velocity + wb * at.b.velocity) / (wa + wb);
}

function measureOf(m: Measured, light: Light, at: { velocity: number }): LineMeasure {
  const own = Number.isFinite(m.offset) && m.width > SEEN_AT * m.error;
  return {
    equivalentWidthNm: m.width,
    equivalentWidthSigmaNm: m.error,
    limitNm: 2 * m.error,
    velocityKmPerS: own ? at.velocity + m.offset : null,
    velocitySigmaKmPerS: own ? m.offsetSigma : null,
    elementKmPerS: light.elementV,
    featureIndex: m.feature,
    foreignNm: Math.max(0, m.foreign),
  };
}

const BAND_WIDTH_DOUBT = 0.06; // of a band's width: bands are no Gaussians, and the continuum bends under them
const BAND_BASELINE_DOUBT = 0.0012;
const BAND_REST_V = 8; // km/s by which a band may stand off its listed place
const OFF = 3;

/** Diffuse bands: wider than the spacing of clouds, so each is looked at once in the cloud that holds most gas, or in one cloud a side. */
export function comparedBands(
  list: LineList,
  gas: Gas,
  pair: Pair,
  chances: readonly number[],
  lines: readonly ComparedLine[],
): ComparedLine[] {
  const isShared = (k: number) => lines.some((l) => l.cloud === k && l.verdict === 'shared');
  const main = mainClouds(gas, chances);
  const bands = list.lines.filter((l) => l.type === 'band' && l.bandFwhmNm !== null && l.settings.includes('interstellar'));
  return bands.flatMap((band) =>
    main.flatMap((k) => {
      const made = comparedBand(band, k, gas, pair, chances[k]!);
      return made ? [isShared(k) ? made : undecided(made)] : [];
    }),
  );
}

/** A band is wider than clouds are apart: it is not called shared through a cloud of which no single line is. */
const undecided = (l: ComparedLine): ComparedLine =>
  l.verdict === 'shared' ? { ...l, verdict: 'cannot-tell', sentence: lineSentence('cannot-tell', l.a, l.b) } : l;

function comparedBand(band: Line, k: number, gas: Gas, pair: Pair, chance: number): ComparedLine | null {
  const measure = (side: 'a' | 'b') => {
    const light = pair[side];
    const fwhm = Math.hypot(light.elementV, (band.bandFwhmNm! / band.wavelengthNm) * 299_792.458);
    const [m] = measureLine(light, band, [gas.drafts[k]!], side, () => gaussianImprint(fwhm), true);
    return m && { ...m, error: Math.hypot(m.error, BAND_WIDTH_DOUBT * m.width, BAND_BASELINE_DOUBT * band.bandFwhmNm!) };
  };
  const [a, b] = [measure('a') ?? null, measure('b') ?? null];
  if (![a, b].some((m) => isSeen(m))) return null;
  const [offA, offB] = [a?.offset ?? NaN, b?.offset ?? NaN];
  const apart = Math.abs(offA - offB) / Math.hypot(a?.offsetSigma ?? NaN, b?.offsetSigma ?? NaN, BAND_REST_V);
  return comparedLine(band, k, gas, pair, a, b, apart > OFF ? Math.min(chance, 0.5) : chance);
}

/** The cloud with most gas among the shared ones; without one, the strongest of each side. */
function mainClouds(gas: Gas, chances: readonly number[]): number[] {
  const weight = (k: number, side: 'a' | 'b') => gas.measured[side].reduce((sum, row) => sum + Math.max(0, row[k]?.width ?? 0), 0);
  const all = gas.drafts.map((_, k) => k);
  const strongest = (of: number[], weigh: (k: number) => number) => [...of].sort((p, q) => weigh(q) - weigh(p)).slice(0, 1);
  const shared = strongest(
    all.filter((k) => chances[k]! > 0.5),
    (k) => weight(k, 'a') + weight(k, 'b'),
  );
  if (shared.length) return shared;
  const own = SIDES.flatMap((s) =>
    strongest(
      all.filter((k) => gas.drafts[k]!.found.includes(s)),
      (k) => weight(k, s),
    ),
  );
  return [...new Set(own)];
}
