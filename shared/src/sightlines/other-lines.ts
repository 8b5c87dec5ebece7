import type { Candidate, Feature } from '../identify/index.js';
import type { ComparedLine, LineMeasure, Side } from './comparison.js';
import { SIDES } from './clouds.js';
import type { Pair } from './gather.js';
import type { Light } from './light.js';
import { lineSentence } from './say.js';

const STELLAR_AT = 0.5;
const TELLURIC_AT = 0.12;

/** The lines of each star: they move with it, so no two stars share one, even when their velocities are alike. */
export function comparedStars(pair: Pair): ComparedLine[] {
  return SIDES.flatMap((side) =>
    pair[side].features.flatMap((f) => {
      const [first] = f.candidates;
      if (!first || first.family !== 'stellar' || first.probability < STELLAR_AT) return [];
      const measure = measureOf(f, first, pair[side]);
      return [{ ...blank(first, `${first.lineId} star-${side}`), ...sided(side, measure), ...stellarVerdict(side, first, measure) }];
    }),
  ).filter((line, i, all) => all.findIndex((l) => l.key === line.key) === i);
}

function stellarVerdict(side: Side, c: Candidate, m: LineMeasure) {
  const name = side.toUpperCase();
  return {
    velocityKmPerS: m.velocityKmPerS!,
    verdict: side === 'a' ? ('only-a' as const) : ('only-b' as const),
    probability: c.probability,
    sentence: `A line of star ${name}: it moves with that star and says nothing of the gas between.`,
  };
}

/** Lines of the Earth's air seen in either spectrum, each once. */
export function comparedAir(pair: Pair): ComparedLine[] {
  const found = new Map<string, Partial<Record<Side, { feature: Feature; candidate: Candidate }>>>();
  for (const side of SIDES)
    for (const feature of pair[side].features)
      for (const candidate of feature.candidates) {
        if (candidate.family !== 'telluric' || candidate.probability < TELLURIC_AT) continue;
        const entry = found.get(candidate.lineId) ?? {};
        const before = entry[side];
        if (!before || before.candidate.probability < candidate.probability) entry[side] = { feature, candidate };
        found.set(candidate.lineId, entry);
      }
  return [...found.values()].map((entry): ComparedLine => {
    const { candidate } = (entry.a ?? entry.b)!;
    const measures = { a: measured(entry.a, pair.a), b: measured(entry.b, pair.b) };
    return {
      ...blank(candidate, `${candidate.lineId} air`),
      ...measures,
      velocityKmPerS: (measures.a ?? measures.b)!.velocityKmPerS!,
      verdict: 'telluric',
      probability: Math.max(entry.a?.candidate.probability ?? 0, entry.b?.candidate.probability ?? 0),
      sentence: lineSentence('telluric', measures.a, measures.b),
    };
  });
}

const measured = (entry: { feature: Feature; candidate: Candidate } | undefined, light: Light) =>
  entry ? measureOf(entry.feature, entry.candidate, light) : null;

const sided = (side: Side, m: LineMeasure) => ({ a: side === 'a' ? m : null, b: side === 'b' ? m : null });

const blank = (c: Candidate, key: string) => ({
  key,
  lineId: c.lineId,
  species: c.species,
  restNm: c.restNm,
  family: c.family,
  cloud: null,
  ratio: null,
  ratioSigma: null,
  differenceKmPerS: null,
  differenceSigmaKmPerS: null,
});

function measureOf(f: Feature, c: Candidate, light: Light): LineMeasure {
  return {
    equivalentWidthNm: f.equivalentWidthNm,
    equivalentWidthSigmaNm: f.equivalentWidthSigmaNm,
    limitNm: 2 * f.equivalentWidthSigmaNm,
    velocityKmPerS: light.velocityOf(f.wavelengthNm, c.restNm),
    velocitySigmaKmPerS: c.velocitySigmaKmPerS,
    elementKmPerS: light.elementV,
    featureIndex: f.index,
    foreignNm: (1 - Math.min(1, c.share)) * Math.abs(f.equivalentWidthNm),
  };
}
