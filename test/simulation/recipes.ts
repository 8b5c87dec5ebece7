import { airLines, bandLines, cloudLines, type Absorption, type Cloud } from './absorbers.js';
import { chanceOf, type Chance } from './chance.js';
import type { Instrument } from './instrument.js';
import { matter, type Matter } from './matter.js';
import { nebularLines, skyResiduals, type Emission, type Nebula } from './nebula.js';
import { layerOf, photosphericLines, type OpacityLine, type Star } from './photosphere.js';
import type { Scene } from './simulate.js';
import type { TrueSystem } from './truth.js';

/** Kinds of spectra, by what a team would call them. */
export const KINDS = [
  'cool-star',
  'double-star',
  'rotating-star',
  'hot-star',
  'sightline',
  'pair',
  'nebula',
  'nebula-on-star',
  'ultraviolet',
  'low-res',
  'survey',
  'featureless',
] as const;
export type Kind = (typeof KINDS)[number];

/** How much goes wrong in the observation: `plain` nothing but noise, `usual` what archives hold, `harsh` about twice that. */
export type Trouble = 'plain' | 'usual' | 'harsh';

export interface Order {
  readonly kind: Kind;
  readonly index: number;
  readonly seed: number;
  readonly trouble?: Trouble;
}

type Draft = Omit<Scene, 'name' | 'kind' | 'seed'>;
interface Drawing {
  readonly m: Matter;
  readonly chance: Chance;
  readonly trouble: Trouble;
  /** of things that two spectra of a pair share */
  readonly shared: Chance;
  readonly index: number;
}

/** The scene of one spectrum. The same order gives the same scene, whatever else is made. */
export function sceneOf({ kind, index, seed, trouble = 'usual' }: Order): Scene {
  const name = `${kind}-${String(index).padStart(2, '0')}`;
  const shared = chanceOf(`${kind} ${index >> 1} ${seed} shared`);
  const draft = DRAFTS[kind]({ m: matter(), chance: chanceOf(`${name} ${seed}`), trouble, shared, index });
  return { ...draft, name, kind, seed };
}

const TROUBLE: Readonly<Record<Trouble, number>> = { plain: 0, usual: 1, harsh: 2 };

/** What the instrument and its pipeline do wrong. */
function instrumentOf(d: Drawing, basic: Pick<Instrument, 'fromNm' | 'toNm' | 'resolvingPower' | 'signalToNoise'>): Instrument {
  const { chance } = d;
  const much = TROUBLE[d.trouble];
  const some = (probability: number) => chance.whether(Math.min(0.9, probability * much));
  return {
    ...basic,
    samplesPerElement: chance.between(2.1, 3.4),
    skew: some(0.2) ? much * chance.between(-0.05, 0.05) : 0,
    bend: some(0.2) ? much * chance.between(0.03, 0.12) : 0,
    noiseSmoothing: some(0.2) ? chance.between(0.15, 0.5) : 0,
    cosmicHits: some(0.35) ? Math.floor(chance.between(2, 10)) : 0,
    gaps: some(0.3) ? 1 + Math.floor(chance.between(0, 2.99)) : 0,
    statesSigma: !some(0.15),
    ripple: 0.006 * much * chance.uniform(),
  };
}

/** A stretch of the given length somewhere in a range: spectra of different stretches meet different lines. */
function windowOf(chance: Chance, fromNm: number, toNm: number, lengthNm: number): { fromNm: number; toNm: number } {
  const start = chance.between(fromNm, toNm - lengthNm);
  return { fromNm: start, toNm: start + lengthNm };
}

const strengthScatter = ({ trouble }: Drawing) => (trouble === 'plain' ? 0.08 : trouble === 'usual' ? 0.18 : 0.25);

interface Lit {
  readonly star: Star;
  readonly lines: readonly OpacityLine[];
}

function starOf(d: Drawing, facts: Partial<Star> & Pick<Star, 'temperatureK' | 'vsini'>, instrument: Instrument): Lit {
  const { chance, m } = d;
  const star: Star = {
    id: 'star',
    velocityKmPerS: 35 * chance.normal(),
    macroKmPerS: facts.temperatureK < 8000 ? 3 : 8,
    microKmPerS: facts.temperatureK < 8000 ? chance.between(0.9, 2) : chance.between(2, 6),
    metals: chance.between(-0.5, 0.25),
    scatter: { element: 0.08, line: strengthScatter(d) },
    lightShare: 1,
    ...facts,
  };
  const layer = layerOf(d.m, star.temperatureK, star.metals);
  const listed = photosphericLines(m, star, layer, instrument.fromNm * 0.99, instrument.toNm * 1.01, chance);
  return { star, lines: [...listed, ...unlisted(d, listed, instrument)] };
}

/** Lines that no list holds: as strong as others of the star, at chance places. */
function unlisted({ chance, trouble }: Drawing, listed: readonly OpacityLine[], { fromNm, toNm }: Instrument): OpacityLine[] {
  const metals = listed.filter(({ line }) => line.element !== 'H');
  const count = Math.round(metals.length * (trouble === 'plain' ? 0 : trouble === 'usual' ? 0.05 : 0.09));
  return Array.from({ length: count }, () => ({ ...chance.pick(metals), restNm: chance.between(fromNm, toNm), listed: false }));
}

/** Lines of gas that no list holds. */
function unlistedGas({ chance, trouble }: Drawing, lines: readonly Absorption[], { fromNm, toNm }: Instrument): Absorption[] {
  if (trouble === 'plain' || !lines.length) return [];
  const atoms = lines.filter(({ species }) => species !== 'DIB');
  if (!atoms.length) return [];
  return Array.from({ length: Math.round(atoms.length * 0.06) }, () => ({
    ...chance.pick(atoms),
    restNm: chance.between(fromNm, toNm),
    setting: 'unlisted',
    system: '',
    listed: false,
  }));
}

const systemOf = (id: string, family: string, velocityKmPerS: number): TrueSystem => ({ id, family, velocity_km_s: velocityKmPerS });
const systemOfStar = ({ star }: Lit): TrueSystem => ({ ...systemOf(star.id, 'stellar', star.velocityKmPerS), vsini: star.vsini });

interface Foreground {
  readonly absorption: readonly Absorption[];
  readonly systems: readonly TrueSystem[];
  readonly av: number;
}
const CLEAR: Foreground = { absorption: [], systems: [], av: 0 };

function airOf(d: Drawing, { fromNm, toNm }: Instrument): Foreground {
  const velocity = d.chance.between(-28, 28);
  const absorption = airLines(d.m, velocity, fromNm, toNm, d.chance);
  return { ...CLEAR, absorption, systems: absorption.length ? [systemOf('air', 'telluric', velocity)] : [] };
}

/** Clouds in front of a star, with the diffuse bands and the reddening that go with their gas: N(H) = 5.8e21 E(B-V) (Bohlin et al. 1978). */
function cloudsOf(d: Drawing, instrument: Instrument, count: number, hydrogen: () => number, more: readonly Cloud[] = []): Foreground {
  const { chance, m } = d;
  const own = Array.from({ length: count }, (_, i): Cloud => ({
    id: `cloud-${i + 1}`,
    velocityKmPerS: 18 * chance.normal(),
    turbulence: chance.logBetween(0.8, 3),
    kelvin: chance.logBetween(40, 400),
    hydrogen: hydrogen(),
    scatter: 0.28,
  }));
  const clouds = [...more, ...own];
  const lines = clouds.flatMap((cloud) => cloudLines(m, cloud, instrument.fromNm, instrument.toNm, chance));
  const reddening = clouds.reduce((sum, { hydrogen }) => sum + 10 ** hydrogen / 5.8e21, 0);
  const densest = clouds.reduce((a, b) => (b.hydrogen > a.hydrogen ? b : a));
  const bands = bandLines(m, reddening, densest.velocityKmPerS, instrument.fromNm, instrument.toNm, chance);
  return {
    absorption: [...lines, ...bands, ...unlistedGas(d, lines, instrument)],
    systems: clouds.map((cloud) => systemOf(cloud.id, 'interstellar', cloud.velocityKmPerS)),
    av: 3.1 * reddening,
  };
}

function sceneFrom(
  d: Drawing,
  instrument: Instrument,
  temperatureK: number,
  stars: readonly Lit[],
  front: readonly Foreground[],
  more: Partial<Draft> = {},
): Draft {
  return {
    temperatureK,
    av: front.reduce((sum, { av }) => sum + av, 0),
    medium: d.chance.whether(0.3) && instrument.fromNm > 300 ? 'air' : 'vacuum',
    stars,
    absorption: front.flatMap(({ absorption }) => absorption),
    emission: [],
    instrument,
    ...more,
    systems: [...stars.map(systemOfStar), ...front.flatMap(({ systems }) => systems), ...(more.systems ?? [])],
  };
}

function nebulaOf(d: Drawing, id: string, velocityKmPerS: number, { fromNm, toNm }: Instrument): readonly Emission[] {
  const nebula: Nebula = {
    id,
    velocityKmPerS,
    fwhmKmPerS: d.chance.between(8, 28),
    kelvin: d.chance.between(7500, 14_000),
    density: d.chance.logBetween(50, 1e4),
    excitation: d.chance.uniform(),
  };
  const lines = nebularLines(d.m, nebula, fromNm, toNm, d.chance);
  if (d.trouble === 'plain') return lines;
  const odd = Array.from({ length: Math.floor(d.chance.between(0, 4)) }, (): Emission => ({
    ...d.chance.pick(lines),
    restNm: d.chance.between(fromNm, toNm),
    setting: 'unlisted',
    system: '',
    listed: false,
    flux: d.chance.logBetween(0.02, 0.4),
  }));
  return [...lines, ...odd];
}

const DRAFTS: Readonly<Record<Kind, (d: Drawing) => Draft>> = {
  'cool-star': (d) => {
    const { chance } = d;
    const temperatureK = chance.between(4600, 6900);
    const instrument = instrumentOf(d, {
      ...windowOf(chance, 430, 700, 80),
      resolvingPower: chance.logBetween(30_000, 75_000),
      signalToNoise: chance.between(60, 180),
    });
    return sceneFrom(
      d,
      instrument,
      temperatureK,
      [starOf(d, { temperatureK, vsini: chance.logBetween(2, 25) }, instrument)],
      [airOf(d, instrument)],
    );
  },
  'double-star': (d) => {
    const { chance } = d;
    const temperatureK = chance.between(5200, 7200);
    const second = temperatureK * chance.between(0.82, 1);
    const share = chance.between(0.55, 0.85);
    const instrument = instrumentOf(d, {
      ...windowOf(chance, 430, 680, 45),
      resolvingPower: 48_000,
      signalToNoise: chance.between(80, 200),
    });
    const stars = [
      starOf(
        d,
        { id: 'star', temperatureK, vsini: chance.logBetween(3, 15), lightShare: share, velocityKmPerS: 30 * chance.normal() },
        instrument,
      ),
      starOf(
        d,
        {
          id: 'companion',
          temperatureK: second,
          vsini: chance.logBetween(3, 15),
          lightShare: 1 - share,
          velocityKmPerS: 60 * chance.normal(),
        },
        instrument,
      ),
    ];
    return sceneFrom(d, instrument, temperatureK, stars, [airOf(d, instrument)]);
  },
  'rotating-star': (d) => {
    const { chance } = d;
    const temperatureK = chance.between(7000, 11_500);
    const instrument = instrumentOf(d, {
      ...windowOf(chance, 385, 680, 140),
      resolvingPower: chance.logBetween(20_000, 60_000),
      signalToNoise: chance.between(100, 260),
    });
    const clouds = cloudsOf(d, instrument, 1, () => chance.between(19.4, 20.6));
    return sceneFrom(
      d,
      instrument,
      temperatureK,
      [starOf(d, { temperatureK, vsini: chance.between(60, 220) }, instrument)],
      [clouds, airOf(d, instrument)],
    );
  },
  'hot-star': (d) => hotStar(d, { ...windowOf(d.chance, 385, 690, 180), vsini: () => d.chance.logBetween(10, 120), clouds: 1 }),
  sightline: (d) =>
    hotStar(d, { fromNm: 385, toNm: 700, vsini: () => d.chance.between(80, 250), clouds: 1 + Math.floor(d.chance.between(0, 2.99)) }),
  pair: (d) => {
    const { shared, chance, index } = d;
    const common: Cloud = {
      id: 'shared',
      velocityKmPerS: 14 * shared.normal(),
      turbulence: shared.between(1, 2.5),
      kelvin: 90,
      hydrogen: shared.between(20.6, 21.2),
      scatter: 0.2,
    };
    const hot = index % 2 === 0;
    const temperatureK = hot ? chance.between(17_000, 28_000) : chance.between(8500, 11_000);
    const instrument = instrumentOf(d, { fromNm: 380, toNm: 700, resolvingPower: hot ? 60_000 : 42_000, signalToNoise: hot ? 220 : 140 });
    const clouds = cloudsOf(d, instrument, 1, () => chance.between(20, 20.6), [common]);
    return sceneFrom(
      d,
      instrument,
      temperatureK,
      [starOf(d, { temperatureK, vsini: hot ? 120 : 45 }, instrument)],
      [clouds, airOf(d, instrument)],
    );
  },
  nebula: (d) => {
    const { chance } = d;
    const instrument = instrumentOf(d, {
      fromNm: 368,
      toNm: chance.between(690, 920),
      resolvingPower: chance.pick([6000, 10_000, 20_000]),
      signalToNoise: chance.between(12, 35),
    });
    const velocity = 60 * chance.normal();
    const unitNm = chance.logBetween(0.5, 6);
    const emission = [{ lines: nebulaOf(d, 'nebula', velocity, instrument), unitNm }];
    const systems = [systemOf('nebula', 'nebular', velocity)];
    if (chance.whether(0.4)) {
      const other = velocity + (chance.whether(0.5) ? 1 : -1) * chance.between(60, 180);
      emission.push({ lines: nebulaOf(d, 'nebula-2', other, instrument), unitNm: unitNm * chance.logBetween(0.1, 0.7) });
      systems.push(systemOf('nebula-2', 'nebular', other));
    }
    if (chance.whether(0.6)) {
      const sky = chance.between(-28, 28);
      emission.push({ lines: skyResiduals(d.m, sky, instrument.fromNm, instrument.toNm, chance), unitNm: chance.logBetween(0.003, 0.03) });
      systems.push(systemOf('air', 'telluric', sky));
    }
    return sceneFrom(d, instrument, chance.between(9000, 22_000), [], [{ ...CLEAR, av: chance.between(0, 1) }], { emission, systems });
  },
  'nebula-on-star': (d) => {
    const { chance } = d;
    const instrument = instrumentOf(d, {
      fromNm: 385,
      toNm: 690,
      resolvingPower: chance.pick([20_000, 40_000]),
      signalToNoise: chance.between(60, 160),
    });
    const temperatureK = chance.between(14_000, 28_000);
    const velocity = 25 * chance.normal();
    const emission = [{ lines: nebulaOf(d, 'nebula', velocity, instrument), unitNm: chance.logBetween(0.02, 0.3) }];
    const clouds = cloudsOf(d, instrument, 1, () => chance.between(20, 21));
    const star = starOf(d, { temperatureK, vsini: chance.between(60, 200) }, instrument);
    return sceneFrom(d, instrument, temperatureK, [star], [clouds, airOf(d, instrument)], {
      emission,
      systems: [systemOf('nebula', 'nebular', velocity)],
    });
  },
  ultraviolet: (d) => {
    const { chance } = d;
    const fromNm = chance.pick([116, 120, 160, 228]);
    const instrument = instrumentOf(d, {
      fromNm,
      toNm: fromNm * chance.between(1.25, 1.45),
      resolvingPower: chance.logBetween(18_000, 45_000),
      signalToNoise: chance.between(18, 45),
    });
    const front = cloudsOf(d, instrument, 1 + Math.floor(chance.between(0, 2)), () => chance.between(19.4, 20.6));
    return sceneFrom(d, instrument, chance.between(20_000, 40_000), [], [{ ...front, av: 0 }]);
  },
  'low-res': (d) => {
    const { chance } = d;
    const temperatureK = chance.between(7200, 11_000);
    const instrument = instrumentOf(d, {
      fromNm: 370,
      toNm: chance.between(720, 860),
      resolvingPower: chance.logBetween(1500, 6000),
      signalToNoise: chance.between(50, 130),
    });
    const clouds = cloudsOf(d, instrument, 1, () => chance.between(20.3, 21.1));
    return sceneFrom(
      d,
      instrument,
      temperatureK,
      [starOf(d, { temperatureK, vsini: chance.between(40, 180), velocityKmPerS: 80 * chance.normal() }, instrument)],
      [clouds, airOf(d, instrument)],
    );
  },
  survey: (d) => {
    const { chance } = d;
    const temperatureK = chance.between(5000, 9500);
    const instrument = {
      ...instrumentOf(d, { fromNm: 382, toNm: 900, resolvingPower: chance.between(1700, 2300), signalToNoise: chance.logBetween(15, 80) }),
      noiseSmoothing: chance.between(0, 0.4),
    };
    const star = starOf(d, { temperatureK, vsini: chance.between(5, 60), velocityKmPerS: 90 * chance.normal() }, instrument);
    const sky = { lines: skyResiduals(d.m, 0, instrument.fromNm, instrument.toNm, chance), unitNm: chance.logBetween(0.001, 0.01) };
    return sceneFrom(d, instrument, temperatureK, [star], [airOf(d, instrument)], { emission: chance.whether(0.4) ? [sky] : [] });
  },
  featureless: (d) => {
    const { chance } = d;
    const instrument = instrumentOf(d, {
      fromNm: 380,
      toNm: 700,
      resolvingPower: chance.pick([3000, 40_000]),
      signalToNoise: chance.logBetween(15, 150),
    });
    return sceneFrom(d, { ...instrument, cosmicHits: 0 }, chance.between(5000, 30_000), [], [CLEAR]);
  },
};

function hotStar(d: Drawing, facts: { fromNm: number; toNm: number; vsini: () => number; clouds: number }): Draft {
  const { chance } = d;
  const temperatureK = chance.between(13_000, 29_000);
  const instrument = instrumentOf(d, {
    fromNm: facts.fromNm,
    toNm: facts.toNm,
    resolvingPower: chance.pick([30_000, 45_000, 70_000]),
    signalToNoise: chance.between(100, 320),
  });
  const clouds = cloudsOf(d, instrument, facts.clouds, () => chance.between(20, 21.4));
  return sceneFrom(
    d,
    instrument,
    temperatureK,
    [starOf(d, { temperatureK, vsini: facts.vsini() }, instrument)],
    [clouds, airOf(d, instrument)],
  );
}
