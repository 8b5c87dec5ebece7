import type { Family, Line, LineList } from '../linelist/index.js';
import type { Frame } from '../spectrum/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { findAir } from './air.js';
import { diffuseBands, findClouds } from './clouds.js';
import type { SystemModel } from './model.js';
import { findNebulae, type LogContinuum } from './nebulae.js';
import { speciesState, type Background } from './offsets.js';
import { populationOf } from './population.js';
import { contendersOf, rankFeature, type FeatureRanking, type SystemState } from './rank.js';
import { findFar } from './redshift.js';
import { setSystem } from './set-systems.js';
import { findCompanion, findStar, type TemperatureHint } from './star.js';
import { NO_WISHES, permitted, type SystemWishes } from './steer.js';
import { withOwnScatter, type Scene } from './search.js';
import type { Coverage, FeatureView } from './views.js';

export interface IdentifyInput {
  /** ascending in wavelength */
  readonly features: readonly FeatureView[];
  readonly coverage: Coverage;
  readonly list: LineList;
  readonly frame: Frame;
  /** where the Earth's air must lie, km/s; null or absent when not known */
  readonly observerVelocityKmPerS?: number | null;
  readonly temperature: TemperatureHint | null;
  readonly velocityRangeKmPerS: number;
  readonly logContinuum: LogContinuum;
  /** what a person set and forbade */
  readonly wishes?: SystemWishes;
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
  const farthest = Math.max(
    input.velocityRangeKmPerS,
    ...(input.wishes?.set ?? []).map((s) => Math.abs(s.velocityKmPerS) + s.toleranceKmPerS),
  );
  const margin = 1 + (farthest * 1.2) / C_KM_PER_S;
  const near = list.lines.filter((l) => l.wavelengthNm > coverage.fromNm / margin && l.wavelengthNm < coverage.toNm * margin);
  const of = (family: Family) => near.filter((l) => l.settings.includes(family));
  const anywhere = (family: Family) => list.lines.filter((l) => l.settings.includes(family));
  const found = new Findings(input);
  const { systems } = found;
  const { wishes = NO_WISHES } = input;
  const photosphere = of('stellar').filter(isPhotospheric);
  const airLines = of('telluric');
  const ground = { ...input, photosphere, interstellar: of('interstellar'), nebular: of('nebular'), telluric: airLines };
  wishes.set.forEach((wanted, n) => systems.push(setSystem(wanted, n + 1, found.scene(), ground)));
  const hasSet = (family: Family) => wishes.set.some((s) => s.family === family);

  const searched = !input.withoutStar && !hasSet('stellar'); // a star that was set is the star
  const star = searched ? findStar(found.scene('stellar'), photosphere, input.temperature, input.velocityRangeKmPerS) : null;
  if (star) systems.push(star);
  const absorbing = hasSet('telluric')
    ? null
    : findAir(airLines, 'dip', found.scene('telluric'), input.frame, input.observerVelocityKmPerS);
  if (absorbing) systems.push(absorbing);
  const clouds = findClouds(ground.interstellar, found.scene('interstellar'), Math.min(input.velocityRangeKmPerS, 200));
  systems.push(...clouds);
  const everyCloud = [...systems.filter((s) => s.set && s.family === 'interstellar'), ...clouds];
  const bands = diffuseBands(near, everyCloud, coverage);
  const companion = star && findCompanion(found.scene('stellar'), star, photosphere, input.temperature, input.velocityRangeKmPerS);
  if (companion) systems.push(companion);
  if (bands && bandsMayShow(wishes, everyCloud)) addBands(systems, everyCloud, bands);
  if (features.some((f) => f.kind === 'peak')) {
    systems.push(...findNebulae(ground.nebular, found.scene('nebular'), input.velocityRangeKmPerS, input.logContinuum));
    const glowing = findAir(airLines, 'peak', found.scene('telluric'), input.frame, input.observerVelocityKmPerS);
    if (glowing) systems.push(glowing);
    const asUsual = input.velocityRangeKmPerS >= USUAL_RANGE; // who narrows the range wants nothing from beyond it
    if (asUsual && !systems.some((s) => s.family === 'nebular') && !wishes.forbidden.some((w) => w.family === 'nebular')) {
      const whole = {
        ...ground,
        nebular: anywhere('nebular'),
        interstellar: anywhere('interstellar'),
        photosphere: anywhere('stellar').filter(isPhotospheric),
      };
      systems.push(...findFar(found.scene(), whole, input.temperature, input.logContinuum, input.velocityRangeKmPerS));
    }
  }

  const background = { ...found.scene().background, population: populationOf(features, systems, null, coverage) };
  const first = rankAll(found.weighed(background), input, background);
  if (star && clouds.length && !hasOwnLines(star, first)) return identify({ ...input, withoutStar: true });
  const settled = { ...backgroundOf(found.rate, first), population: populationOf(features, systems, first.rankings, coverage) };
  const own = systems.map((s) => withOwnScatter(s, { features, coverage, background: settled }));
  return rankAll(
    own.map((s) => stateOf(s, input, settled)),
    input,
    settled,
  );
}

const isPhotospheric = (l: Line): boolean => l.logGf !== null && l.type === 'allowed';

/** Bands without a cloud stand at no velocity of their own: they go when gas is forbidden at zero. */
const bandsMayShow = (wishes: SystemWishes, clouds: readonly SystemModel[]): boolean =>
  clouds.length > 0 || (permitted({ ...wishes, set: [] }, 'interstellar', 0)?.(0) ?? true);

/** The systems found so far and what they explain; asked again after each find. */
class Findings {
  readonly systems: SystemModel[] = [];
  readonly rate: Background['rate'];
  readonly #alone = new Map<SystemModel, SystemState>();
  #scene: { of: number; scene: Scene } | null = null;

  constructor(readonly input: IdentifyInput) {
    this.rate = featureRate(input.features, input.coverage);
  }

  /** What a search for further systems stands on; of a family, where a person allows it. */
  scene(family?: Family): Scene {
    const permits = family && permitted(this.input.wishes ?? NO_WISHES, family, 0.7 * this.input.coverage.elementV);
    return permits ? { ...this.#seen(), permits } : this.#seen();
  }

  #seen(): Scene {
    if (this.#scene?.of !== this.systems.length) {
      const { features, coverage } = this.input;
      const background = backgroundOf(this.rate, rankAll(this.#weighedAlone(), this.input, this.#nothingExplained(), FEW_DRAWS));
      this.#scene = { of: this.systems.length, scene: { features, coverage, background } };
    }
    return this.#scene!.scene;
  }

  /** Every system weighed against a background. */
  weighed(background: Background): SystemState[] {
    return this.systems.map((system) => stateOf(system, this.input, background));
  }

  /** Every system weighed as if there were no other; kept, since it never changes. */
  #weighedAlone(): SystemState[] {
    return this.systems.map((system) => {
      const state = this.#alone.get(system) ?? stateOf(system, this.input, this.#nothingExplained());
      this.#alone.set(system, state);
      return state;
    });
  }

  #nothingExplained(): Background {
    return { rate: this.rate, explained: () => 0 };
  }
}

const USUAL_RANGE = 300; // km/s, the default of the settings
const FEW_DRAWS = 120; // enough to tell what is explained; the final ranking draws more

const stateOf = (system: SystemModel, { features, coverage }: IdentifyInput, background: Background): SystemState => ({
  system,
  states: system.species.map((s) => speciesState(s, system, features, coverage, background)),
});

const backgroundOf = (rate: Background['rate'], { rankings }: Identified): Background => ({
  rate,
  explained: (i, without) => othersShare(rankings[i]!, without),
});

const EXCITED_PER_CM = 1500; // above what cold gas fills
const OWN_LINES = 4;

/** Whether a star shows lines that cold gas cannot make: from excited levels, claimed for it against all other systems. */
function hasOwnLines(star: SystemModel, { rankings }: Identified): boolean {
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

function rankAll(
  systems: readonly SystemState[],
  { features, coverage }: IdentifyInput,
  background: Background,
  draws?: number,
): Identified {
  return { systems, rankings: features.map((f) => rankFeature(f, contendersOf(f, systems, features), coverage, background, draws)) };
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
