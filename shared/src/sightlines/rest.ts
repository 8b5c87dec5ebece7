import { dopplerFactor, type KmPerS } from '../units/index.js';
import type {
  ComparedCloud,
  ComparedLine,
  EmissionMatch,
  ProfileSamples,
  ReadingOffer,
  Side,
  SightlineSummary,
  VelocityProfile,
} from './comparison.js';
import { SIDES, type Gas } from './clouds.js';
import { jointVelocity } from './gas-lines.js';
import type { Pair } from './gather.js';
import { chanceOf, velocityLogOdds } from './judge.js';
import { featuresWithin, sampleAt, type Light } from './light.js';
import { addComponent } from '../profiles/index.js';
import { kmPerS } from './say.js';
import type { LineList } from '../linelist/index.js';

const EMITTING = 0.5;

/** Clouds seen in absorption on one side at whose velocity the other spectrum shows a nebula's emission. */
export function emissionMatches(clouds: readonly ComparedCloud[], pair: Pair): EmissionMatch[] {
  return SIDES.flatMap((side) => {
    const light = pair[side];
    const absorbing: Side = side === 'a' ? 'b' : 'a';
    return light.analysis.systems
      .filter((s) => s.family === 'nebular')
      .flatMap((system) => {
        const v = light.velocityOf(dopplerFactor(system.velocityKmPerS as KmPerS), 1);
        return clouds.flatMap((cloud, k) => {
          const seen = cloud[absorbing];
          if (!seen) return [];
          const sigma = Math.hypot(system.velocitySigmaKmPerS, seen.sigmaKmPerS);
          const difference = v - seen.velocityKmPerS;
          const probability = chanceOf(velocityLogOdds(difference, Math.hypot(sigma, SHEAR)));
          if (probability < 0.1) return [];
          const peaks = light.features
            .filter((f) => f.kind === 'peak' && f.candidates[0]?.systemId === system.id && f.candidates[0].probability > EMITTING)
            .map((f) => ({ species: f.candidates[0]!.species, restNm: f.candidates[0]!.restNm, featureIndex: f.index }));
          const sentence = `Gas that absorbs at ${kmPerS(seen.velocityKmPerS)} in ${absorbing.toUpperCase()} shines at ${kmPerS(v)} in ${side.toUpperCase()}, in ${peaks.length} lines: ${Math.abs(difference).toFixed(1)} ± ${sigma.toFixed(1)} km/s apart.`;
          const match = { velocityKmPerS: v, velocitySigmaKmPerS: system.velocitySigmaKmPerS, differenceKmPerS: difference };
          return [{ cloud: k, side, ...match, differenceSigmaKmPerS: sigma, probability, peaks, sentence }];
        });
      });
  });
}

/** km/s by which the warm and the cold gas of one cloud move against each other (common practice, a few km/s). */
const SHEAR = 3;

const WORTH = 0.05;

/** Readings of features that the other sightline makes likelier: a line at one velocity before two unlike stars is gas. */
export function readingOffers(lines: readonly ComparedLine[], pair: Pair): ReadingOffer[] {
  return lines
    .filter((l) => l.verdict === 'shared' && l.family === 'interstellar')
    .flatMap((l) =>
      SIDES.flatMap((side) => {
        const m = l[side];
        const f = m?.featureIndex == null ? undefined : pair[side].features[m.featureIndex];
        if (!m || !f || m.equivalentWidthNm < 0.3 * f.equivalentWidthNm) return [];
        const mine = f.candidates.find((c) => c.lineId === l.lineId && c.family === 'interstellar');
        const before = mine?.probability ?? 0.02;
        // what the verdict adds to the reading's own odds
        const odds = (Math.max(before, 0.02) / Math.max(1e-3, 1 - before)) * (l.probability / Math.max(1e-3, 1 - l.probability));
        const probability = odds / (1 + odds);
        const [first] = f.candidates;
        const changes = first?.lineId !== l.lineId || first.family !== 'interstellar';
        if (!(changes && probability > 0.5) && probability - before < WORTH) return [];
        return [offerOf(side, f.index, f.wavelengthNm, l, first, { before, probability, systemId: mine?.systemId ?? null })];
      }),
    );
}

function offerOf(
  side: Side,
  featureIndex: number,
  wavelengthNm: number,
  l: ComparedLine,
  first: { species: string; restNm: number; family: ComparedLine['family']; probability: number } | undefined,
  { before, probability, systemId }: { before: number; probability: number; systemId: string | null },
): ReadingOffer {
  const other = side === 'a' ? 'B' : 'A';
  return {
    side,
    featureIndex,
    wavelengthNm,
    before: first ? { species: first.species, restNm: first.restNm, family: first.family, probability: first.probability } : null,
    offered: {
      lineId: l.lineId,
      species: l.species,
      restNm: l.restNm,
      systemId,
      velocityKmPerS: l.velocityKmPerS,
      probabilityBefore: before,
      probability,
    },
    sentence: `${other} shows ${l.species} ${l.restNm.toFixed(2)} nm at the same ${kmPerS(l.velocityKmPerS)}: as gas before both stars the reading rises from ${percent(before)} to ${percent(probability)}.`,
  };
}
const percent = (p: number) => `${(100 * p).toFixed(p > 0.99 ? 1 : 0)} %`;

const DRAWN = 60;

/** Profiles of the lines worth drawing, strongest species first, about all clouds. */
export function velocityProfiles(
  lines: readonly ComparedLine[],
  gas: Gas,
  pair: Pair,
  list: LineList,
  rangeKmPerS: number,
): VelocityProfile[] {
  const velocities = gas.drafts.map((d) => jointVelocity(d.at));
  if (velocities.length === 0) return [];
  const [low, high] = [Math.min(...velocities) - rangeKmPerS, Math.max(...velocities) + rangeKmPerS];
  const ids = new Set(lines.filter((l) => l.family === 'interstellar' && l.species !== 'DIB').map((l) => l.lineId));
  return list.lines
    .filter((l) => ids.has(l.id))
    .slice(0, DRAWN)
    .map((l) => ({
      lineId: l.id,
      species: l.species,
      restNm: l.wavelengthNm,
      a: samplesOf(pair.a, l.wavelengthNm, low, high),
      b: samplesOf(pair.b, l.wavelengthNm, low, high),
    }));
}

function samplesOf(light: Light, restNm: number, low: number, high: number): ProfileSamples | null {
  const { wavelength, flux, weight } = light.data;
  const [fromNm, toNm] = [light.wavelengthOf(restNm, low), light.wavelengthOf(restNm, high)];
  const [from, to] = [sampleAt(light, fromNm), sampleAt(light, toNm)];
  if (to - from < 3) return null;
  const dips = new Float64Array(to - from).fill(1);
  const peaks = new Float64Array(to - from);
  for (const i of featuresWithin(light, fromNm, toNm)) addComponent(light.components[i]!, wavelength, from, to, dips, peaks, from);
  const rounded = (x: number) => Math.round(x * 1e4) / 1e4;
  const at = Array.from({ length: to - from }, (_, i) => from + i);
  return {
    velocityKmPerS: at.map((i) => rounded(light.velocityOf(wavelength[i]!, restNm))),
    flux: at.map((i) => (weight[i]! > 0 ? rounded(flux[i]!) : null)),
    model: at.map((_, i) => rounded(dips[i]! + peaks[i]!)),
  };
}

const SETTLED = new Set(['barycentric', 'heliocentric']);

/** What must be known before the numbers are trusted. */
export function cautionsOf(a: SightlineSummary, b: SightlineSummary, clouds: readonly ComparedCloud[], corrected: boolean): string[] {
  const out: string[] = [];
  for (const [name, s] of [
    ['A', a],
    ['B', b],
  ] as const) {
    if (s.frame === 'unknown' && !corrected)
      out.push(
        `The velocity frame of ${name} is unknown: its velocities may be off by up to 30 km/s, and a shared cloud may look like two.`,
      );
    for (const cloud of clouds) {
      const mine = name === 'A' ? cloud.a : cloud.b;
      if (mine && s.starKmPerS !== null && Math.abs(mine.velocityKmPerS - s.starKmPerS) < 299_792.458 / s.resolvingPower)
        out.push(`The cloud at ${kmPerS(mine.velocityKmPerS)} stands where star ${name} does: its lines may be the star's.`);
    }
  }
  if (
    a.frame !== b.frame &&
    !(SETTLED.has(a.frame) && SETTLED.has(b.frame)) &&
    a.frame !== 'unknown' &&
    b.frame !== 'unknown' &&
    !corrected
  )
    out.push(`A stands in the ${a.frame} frame, B in the ${b.frame} frame: set an offset before comparing velocities.`);
  return out;
}
