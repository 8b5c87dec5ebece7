import type { LineList } from '../linelist/index.js';
import type { Frame } from '../spectrum/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { findAir } from './air.js';
import { diffuseBands, findClouds } from './clouds.js';
import type { SystemModel } from './model.js';
import { findNebulae, type LogContinuum } from './nebulae.js';
import { speciesState, type Background } from './offsets.js';
import { contendersOf, rankFeature, type FeatureRanking, type SystemState } from './rank.js';
import { findStar, type TemperatureHint } from './star.js';
import type { Scene } from './search.js';
import type { Coverage, FeatureView } from './views.js';

export interface IdentifyInput {
  /** ascending in wavelength */
  readonly features: readonly FeatureView[];
  readonly coverage: Coverage;
  readonly list: LineList;
  readonly frame: Frame;
  readonly temperature: TemperatureHint | null;
  readonly velocityRangeKmPerS: number;
  readonly logContinuum: LogContinuum;
  /** set when a first pass took a cloud's lines for a star's */
  readonly withoutStar?: boolean;
}

export interface Identified {
  readonly systems: readonly SystemState[];
  /** one a feature, in its order */
  readonly rankings: readonly FeatureRanking[];
}

/** Finds the velocity systems, strongest kinds of evidence first, then ranks the readings of every feature against all of them. */
export function identify(input: IdentifyInput): Identified {
  const { features, coverage, list } = input;
  const margin = 1 + (input.velocityRangeKmPerS * 1.2) / C_KM_PER_S;
  const near = list.lines.filter((l) => l.wavelengthNm > coverage.fromNm / margin && l.wavelengthNm < coverage.toNm * margin);
  const of = (family: string) => near.filter((l) => l.settings.some((s) => s === family));
  const rate = featureRate(features, coverage);
  const systems: SystemModel[] = [];
  const explainedBy = (found: readonly SystemModel[]): Background => {
    const rankings = rankAll(found, input, { rate, explained: () => 0 }).rankings;
    return { rate, explained: (i, without) => othersShare(rankings[i]!, without) };
  };
  const scene = (): Scene => ({ features, coverage, background: explainedBy(systems) });

  const star = input.withoutStar
    ? null
    : findStar(
        scene(),
        of('stellar').filter((l) => l.logGf !== null && l.type === 'allowed'),
        input.temperature,
        input.velocityRangeKmPerS,
      );
  if (star) systems.push(star);
  const airLines = of('telluric');
  const absorbing = findAir(airLines, 'dip', scene(), input.frame);
  if (absorbing) systems.push(absorbing);
  const clouds = findClouds(of('interstellar'), scene(), Math.min(input.velocityRangeKmPerS, 200));
  systems.push(...clouds);
  const bands = diffuseBands(near, clouds, coverage);
  if (bands) addBands(systems, clouds, bands);
  systems.push(...findNebulae(of('nebular'), scene(), input.velocityRangeKmPerS, input.logContinuum));
  const glowing = findAir(airLines, 'peak', scene(), input.frame);
  if (glowing) systems.push(glowing);

  if (star && clouds.length && !hasOwnLines(star, systems, input, explainedBy(systems))) return identify({ ...input, withoutStar: true });

  const first = rankAll(systems, input, explainedBy(systems));
  const settled: Background = { rate, explained: (i, without) => othersShare(first.rankings[i]!, without) };
  return rankAll(systems, input, settled);
}

const EXCITED_PER_CM = 1500; // above what cold gas fills
const OWN_LINES = 4;

/** Whether a star shows lines that cold gas cannot make: from excited levels, claimed for it against all other systems. */
function hasOwnLines(star: SystemModel, systems: readonly SystemModel[], input: IdentifyInput, background: Background): boolean {
  const { rankings } = rankAll(systems, input, background);
  const own = rankings.filter((r) => {
    const best = r.ranked[0];
    return (
      best?.contender.system === star && best.probability > 0.5 && (best.contender.expected.line.lowerEnergyPerCm ?? 0) > EXCITED_PER_CM
    );
  });
  return own.length >= OWN_LINES;
}

/** Diffuse bands go with the main cloud, or stand alone where no cloud's lines are covered. */
function addBands(systems: SystemModel[], clouds: readonly SystemModel[], bands: SystemModel['species'][number]): void {
  if (clouds[0]) clouds[0].species.push(bands);
  else
    systems.push({
      id: 'bands',
      family: 'interstellar',
      kind: 'dip',
      velocity: 0,
      velocitySigma: 15,
      significance: 0,
      fwhmV: 100,
      species: [bands],
    });
}

function rankAll(systems: readonly SystemModel[], input: IdentifyInput, background: Background): Identified {
  const states: SystemState[] = systems.map((system) => ({
    system,
    states: system.species.map((s) => speciesState(s, system, input.features, input.coverage, background)),
  }));
  const rankings = input.features.map((f) => rankFeature(f, contendersOf(f, states, input.features), input.coverage, background));
  return { systems: states, rankings };
}

/** Chance that systems other than one make a feature. */
function othersShare(ranking: FeatureRanking, without: SystemModel): number {
  let sum = 0;
  for (const r of ranking.ranked)
    if (r.contender.system.id !== without.id || r.contender.system.kind !== without.kind) sum += r.probability * Math.min(1, r.share * 1.2);
  return Math.min(sum, 1);
}

/** Features of a kind per km/s around a wavelength, from the nearest twenty. */
function featureRate(features: readonly FeatureView[], coverage: Coverage): Background['rate'] {
  const of = { dip: features.filter((f) => f.kind === 'dip'), peak: features.filter((f) => f.kind === 'peak') };
  const whole = C_KM_PER_S * Math.log(coverage.toNm / coverage.fromNm);
  const floor = 3 / whole;
  return (kind, wavelength) => {
    const list = of[kind];
    if (list.length < 8) return Math.max(floor, list.length / whole);
    let i = 0;
    let high = list.length;
    while (i < high) {
      const mid = (i + high) >> 1;
      if (list[mid]!.wavelength < wavelength) i = mid + 1;
      else high = mid;
    }
    const a = Math.max(0, Math.min(i - 10, list.length - 20));
    const z = Math.min(list.length - 1, a + 19);
    const span = C_KM_PER_S * Math.log(Math.max(list[z]!.wavelength, wavelength) / Math.min(list[a]!.wavelength, wavelength));
    return Math.max(floor, (z - a) / Math.max(span, 1));
  };
}
