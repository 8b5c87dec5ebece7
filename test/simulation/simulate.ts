import type { Spectrum } from '@foreveil/shared';
import type { TrueLine } from '../support/scoring.js';
import type { Absorption } from './absorbers.js';
import { chanceOf } from './chance.js';
import {
  chained,
  dopplerOf,
  gridOf,
  instrumentKernel,
  LIGHT_KM_PER_S,
  placeOf,
  rotationKernel,
  through,
  type Grid,
  type Kernel,
} from './grid.js';
import { observe, type Instrument, type Observed } from './instrument.js';
import { dustLaw, planckLight } from './light.js';
import type { Emission } from './nebula.js';
import { deepest, depthOf, opacityOnGrid, type OpacityLine, type Star } from './photosphere.js';
import { areaOf, blurred, fullWidth, thinned, type Profile, type TrueSystem, type Truth } from './truth.js';

/** Everything a simulated spectrum holds. */
export interface Scene {
  readonly name: string;
  readonly kind: string;
  readonly seed: number;
  readonly temperatureK: number;
  readonly av: number;
  readonly medium: 'air' | 'vacuum';
  readonly stars: readonly { readonly star: Star; readonly lines: readonly OpacityLine[] }[];
  readonly absorption: readonly Absorption[];
  /** `level` is the flux of a unit line in nm of the continuum at 500 nm */
  readonly emission: readonly { readonly lines: readonly Emission[]; readonly unitNm: number }[];
  readonly systems: readonly TrueSystem[];
  readonly instrument: Instrument;
}

export interface Simulated {
  readonly spectrum: Spectrum;
  readonly truth: Truth;
}

const GAUSS = 2.354_82;

/** Light through matter into an instrument. The same scene gives the same numbers. */
export function simulate(scene: Scene): Simulated {
  const { instrument } = scene;
  const elementV = LIGHT_KM_PER_S / instrument.resolvingPower;
  const step = Math.min(1.2, Math.max(0.35, elementV / 14));
  const grid = gridOf(instrument.fromNm * 0.985, instrument.toNm * 1.015, step);
  const profile = instrumentKernel(elementV, step, instrument.skew);
  const continuum = grid.nm.map((nm) => continuumAt(scene, nm));
  const rotations = scene.stars.map(({ star }) => rotationKernel(star.vsini, star.macroKmPerS, step));
  const light = lightOf(scene, grid, continuum, rotations);
  const observed = observe(
    grid,
    through(light, profile),
    through(continuum, profile),
    instrument,
    chanceOf(`${scene.name} instrument ${scene.seed}`),
  );
  const lines = [
    ...scene.stars.flatMap(({ star, lines: own }, i) => {
      const kernel = chained(rotations[i]!, profile);
      return own.map((line) => starTruth(grid, star, line, kernel, observed));
    }),
    ...scene.absorption.map((line) => gasTruth(grid, line, profile, observed)),
    ...scene.emission.flatMap(({ lines, unitNm }) => lines.map((line) => emissionTruth(scene, grid, line, unitNm, profile, observed))),
  ];
  return {
    spectrum: observed.spectrum,
    truth: truthOf(
      scene,
      lines.filter((line): line is TrueLine => line !== null),
    ),
  };
}

function lightOf(scene: Scene, grid: Grid, continuum: Float64Array, rotations: readonly Kernel[]): Float64Array {
  const light = continuum.slice();
  scene.stars.forEach(({ star, lines }, s) => {
    const eta = opacityOnGrid(grid, lines, star.velocityKmPerS);
    const depth = through(
      eta.map((value, i) => (value ? depthOf(value, deepest(grid.nm[i]!, star.temperatureK)) : 0)),
      rotations[s]!,
    );
    for (let i = 0; i < grid.size; i++) light[i] = light[i]! - continuum[i]! * star.lightShare * depth[i]!;
  });
  const tau = new Float64Array(grid.size);
  for (const line of scene.absorption) spread(grid, line, line.reach, (i, v) => (tau[i] = tau[i]! + line.central * line.shape(v)));
  for (let i = 0; i < grid.size; i++) light[i] = light[i]! * Math.exp(-tau[i]!);
  for (const { lines, unitNm } of scene.emission) {
    for (const line of lines) {
      const peak = emissionPeak(scene, line, unitNm);
      const sigma = line.fwhmKmPerS / GAUSS;
      spread(grid, line, 5.5 * sigma, (i, v) => (light[i] = light[i]! + peak * Math.exp(-0.5 * (v / sigma) ** 2)));
    }
  }
  return light;
}

interface Placed {
  readonly restNm: number;
  readonly velocityKmPerS: number;
}
const centreOf = (line: Placed) => line.restNm * dopplerOf(line.velocityKmPerS);

function spread(grid: Grid, line: Placed, reach: number, add: (i: number, kmPerS: number) => void) {
  const middle = placeOf(grid, centreOf(line));
  const steps = reach / grid.stepKmPerS;
  const end = Math.min(grid.size - 1, Math.floor(middle + steps));
  for (let i = Math.max(0, Math.ceil(middle - steps)); i <= end; i++) add(i, (i - middle) * grid.stepKmPerS);
}

const continuumAt = (scene: Scene, nm: number) => planckLight(nm, scene.temperatureK) * 10 ** (-0.4 * scene.av * dustLaw(nm));

/** Flux in the middle of a line that, before dust, has `flux * unitNm` times the continuum at 500 nm. */
function emissionPeak(scene: Scene, line: Emission, unitNm: number): number {
  const dust = 10 ** (-0.4 * scene.av * (dustLaw(centreOf(line)) - dustLaw(500)));
  const widthNm = (1.0645 * line.fwhmKmPerS * centreOf(line)) / LIGHT_KM_PER_S;
  return (line.flux * unitNm * continuumAt(scene, 500) * dust) / widthNm;
}

const LONGEST = 1500; // steps to one side: profiles that go further take longer steps

/** A line by itself as the instrument shows it, against the continuum. */
function seen(grid: Grid, reach: number, kernel: Kernel, value: (kmPerS: number) => number): Profile {
  const thinning = 2 * Math.floor(reach / grid.stepKmPerS / LONGEST / 2) + 1;
  const stepKmPerS = grid.stepKmPerS * thinning;
  const half = Math.ceil(reach / stepKmPerS);
  const alone = new Float64Array(2 * half + 1).map((_, i) => value((i - half) * stepKmPerS));
  return { stepKmPerS, values: blurred(alone, thinned(kernel, thinning)) };
}

const FAINTEST = 0.3; // sigma: lines below this are left out of the truth

/** A line as the file shows it, from its profile relative to the continuum; null when it is too faint to matter or outside. */
function truthOfLine(
  line: { species: string; restNm: number; setting: string; system: string; listed: boolean; velocityKmPerS: number },
  profile: Profile,
  observed: Observed,
): TrueLine | null {
  const centre = centreOf(line);
  const { wavelength } = observed.spectrum;
  if (centre < wavelength[0]! || centre > wavelength.at(-1)!) return null;
  const stepNm = (centre * profile.stepKmPerS) / LIGHT_KM_PER_S;
  const noise = observed.noiseAt(observed.shown(centre));
  const power = profile.values.reduce((sum, d) => sum + d * d, 0) * stepNm * noise.perNm;
  const snr = Math.sqrt(power) / noise.relative;
  if (snr < FAINTEST) return null;
  const fwhmNm = fullWidth(profile) * stepNm;
  return {
    species: line.species,
    rest_nm: line.restNm,
    obs_nm: observed.shown(centre),
    ew_nm: areaOf(profile) * stepNm,
    fwhm_nm: fwhmNm,
    setting: line.setting,
    system: line.system,
    listed: line.listed,
    snr,
    covered: observed.covered(observed.shown(centre), fwhmNm),
  };
}

function starTruth(grid: Grid, star: Star, line: OpacityLine, kernel: Kernel, observed: Observed) {
  const floor = deepest(line.restNm, star.temperatureK);
  const profile = seen(grid, line.reach, kernel, (v) => star.lightShare * depthOf(line.central * line.shape(v), floor));
  const facts = { species: line.line.species, restNm: line.restNm, velocityKmPerS: star.velocityKmPerS, listed: line.listed };
  const setting = line.listed ? 'stellar' : 'unlisted';
  return truthOfLine({ ...facts, setting, system: line.listed ? star.id : '' }, profile, observed);
}

function gasTruth(grid: Grid, line: Absorption, kernel: Kernel, observed: Observed) {
  const profile = seen(grid, line.reach, kernel, (v) => 1 - Math.exp(-line.central * line.shape(v)));
  return truthOfLine(line, profile, observed);
}

function emissionTruth(scene: Scene, grid: Grid, line: Emission, unitNm: number, kernel: Kernel, observed: Observed) {
  const peak = emissionPeak(scene, line, unitNm) / continuumAt(scene, centreOf(line));
  const sigma = line.fwhmKmPerS / GAUSS;
  const profile = seen(grid, 5 * sigma, kernel, (v) => -peak * Math.exp(-0.5 * (v / sigma) ** 2));
  return truthOfLine(line, profile, observed);
}

function truthOf(scene: Scene, lines: readonly TrueLine[]): Truth {
  const { instrument } = scene;
  return {
    file: `${scene.name}.csv`,
    kind: scene.kind,
    seed: scene.seed,
    distorted: instrument.bend > 0 || instrument.skew !== 0,
    medium: scene.medium,
    resolving_power: instrument.resolvingPower,
    temperature_K: scene.temperatureK,
    a_v: scene.av,
    snr: instrument.signalToNoise,
    systems: scene.systems,
    lines: [...lines].sort((a, b) => a.obs_nm - b.obs_nm),
  };
}
