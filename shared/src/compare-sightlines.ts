import type { LineList } from './linelist/index.js';
import { PROGRAM_VERSION } from './version.js';
import { columnsOf } from './sightlines/columns.js';
import type { ComparedCloud, ComparisonSettings, Side, SightlineComparison } from './sightlines/comparison.js';
import { measureGas, type Gas } from './sightlines/clouds.js';
import { cloudChances, comparedBands, comparedGas, jointVelocity } from './sightlines/gas-lines.js';
import type { Pair } from './sightlines/gather.js';
import { SEEN_AT } from './sightlines/judge.js';
import { lightOf, summaryOf, type Sightline } from './sightlines/light.js';
import { comparedAir, comparedStars } from './sightlines/other-lines.js';
import { cautionsOf, emissionMatches, readingOffers, velocityProfiles } from './sightlines/rest.js';
import { kmPerS } from './sightlines/say.js';

/** Told at the start of each step, with the fraction done; may throw to stop. */
export type OnCompared = (done: number) => void;

/**
 * Two spectra seen through what may be one cloud: their gas on one velocity scale, a verdict with odds for each line, the clouds' columns.
 * Deterministic; reads no clock and no chance.
 */
export function compareSightlines(
  a: Sightline,
  b: Sightline,
  list: LineList,
  settings: ComparisonSettings,
  onProgress: OnCompared = () => {},
): SightlineComparison {
  onProgress(0);
  const pair: Pair = { a: lightOf(a, settings.offsetAKmPerS), b: lightOf(b, settings.offsetBKmPerS) };
  onProgress(0.2);
  const gas = measureGas(list, pair, settings);
  onProgress(0.7);
  const chances = cloudChances(gas);
  const gasLines = comparedGas(gas, pair, chances);
  const lines = [...gasLines, ...comparedBands(list, gas, pair, chances, gasLines), ...comparedStars(pair), ...comparedAir(pair)];
  const clouds = gas.drafts.map((_, k) => cloudOf(gas, pair, k, chances[k]!));
  onProgress(0.9);
  const [sideA, sideB] = [summaryOf(pair.a), summaryOf(pair.b)];
  return {
    programVersion: PROGRAM_VERSION,
    lineListName: list.name,
    lineListVersion: list.version,
    settings,
    a: sideA,
    b: sideB,
    lines: lines.sort((p, q) => p.restNm - q.restNm || p.velocityKmPerS - q.velocityKmPerS || (p.key < q.key ? -1 : 1)),
    clouds,
    emission: emissionMatches(clouds, pair),
    offers: readingOffers(lines, pair),
    profiles: velocityProfiles(lines, gas, pair, list, settings.profileRangeKmPerS),
    cautions: cautionsOf(sideA, sideB, clouds, settings.offsetAKmPerS !== 0 || settings.offsetBKmPerS !== 0),
  };
}

function cloudOf(gas: Gas, pair: Pair, k: number, chance: number): ComparedCloud {
  const { at } = gas.drafts[k]!;
  const seen = (side: Side) => gas.measured[side].filter((row) => row[k] && row[k].width > SEEN_AT * row[k].error).length;
  const [inA, inB] = [seen('a'), seen('b')];
  const verdict = inA && inB && chance > 0.6 ? 'shared' : inA && chance < 0.3 ? 'only-a' : inB && chance < 0.3 ? 'only-b' : 'cannot-tell';
  const velocity = jointVelocity(at);
  const one = at.a === at.b;
  const of = (side: Side, n: number) =>
    n === 0 ? null : { velocityKmPerS: at[side].velocity, sigmaKmPerS: at[side].sigma, bKmPerS: gas.growth[side][k]?.bKmPerS ?? 2 };
  const words = {
    shared: `Both sightlines cross gas at ${kmPerS(velocity)}: ${inA} lines of it in A, ${inB} in B.`,
    'only-a': `Gas at ${kmPerS(velocity)} shows in ${inA} lines of A and not in B.`,
    'only-b': `Gas at ${kmPerS(velocity)} shows in ${inB} lines of B and not in A.`,
    'cannot-tell': `Gas at ${kmPerS(velocity)}: the two spectra together do not decide whether both cross it.`,
  };
  return {
    velocityKmPerS: velocity,
    velocitySigmaKmPerS: one ? at.a.sigma : 1 / Math.sqrt(at.a.sigma ** -2 + at.b.sigma ** -2),
    verdict,
    probability: verdict === 'shared' ? chance : verdict === 'cannot-tell' ? Math.max(chance, 1 - chance) : 1 - chance,
    a: of('a', verdict === 'only-b' ? 0 : inA),
    b: of('b', verdict === 'only-a' ? 0 : inB),
    columns: columnsOf(gas, pair, k),
    sentence: words[verdict],
  };
}
