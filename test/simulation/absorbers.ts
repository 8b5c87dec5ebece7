import type { Line } from '@foreveil/shared';
import type { Chance } from './chance.js';
import { voigtCore } from './light.js';
import { isMetIn, type Matter } from './matter.js';

// What lies between a star and the instrument: clouds of gas, the carriers of the diffuse bands, and the Earth's air. All add optical depth.

export interface Absorption {
  readonly species: string;
  readonly restNm: number;
  readonly setting: 'interstellar' | 'telluric' | 'unlisted';
  readonly system: string;
  readonly velocityKmPerS: number;
  readonly listed: boolean;
  /** optical depth in the middle */
  readonly central: number;
  readonly shape: (kmPerS: number) => number;
  /** km/s */
  readonly reach: number;
}

export interface Cloud {
  readonly id: string;
  readonly velocityKmPerS: number;
  /** turbulence, km/s */
  readonly turbulence: number;
  readonly kelvin: number;
  /** log10 of all hydrogen, cm^-2 */
  readonly hydrogen: number;
  /** dex: scatter of single species about what is common */
  readonly scatter: number;
}

/**
 * Gas-phase columns against hydrogen, dex, in diffuse clouds; common values of the literature on single sightlines (after Savage &
 * Sembach 1996 for depletion and Welty & Hobbs 2001 for trace neutrals; from memory, good to some tenths, which `scatter` covers).
 */
const AGAINST_HYDROGEN: Readonly<Record<string, number>> = {
  'H I': -0.2, 'C I': -7.4, 'C II': -3.9, 'N I': -4.2, 'O I': -3.45, 'Na I': -8.35, 'Mg I': -7.7, 'Mg II': -5.6, 'Al II': -7.1,
  'Al III': -8.6, 'Si II': -5.4, 'Si III': -7.6, 'Si IV': -8.1, 'P II': -7.0, 'S II': -4.9, 'S III': -7.9, 'S I': -8.9, 'Cl I': -8.7, 'K I': -9.55,
  'Ca I': -11.0, 'Ca II': -8.6, 'Ti II': -9.3, 'Cr II': -8.4, 'Mn II': -7.8, 'Fe I': -9.9, 'Fe II': -6.1, 'Ni II': -7.8, 'Co II': -9.4,
  'Cu II': -9.8, 'Zn II': -7.8, 'Ga II': -10.9, 'Ge II': -10.2, 'Li I': -11.3, 'Al I': -11.0, CH: -8.0, 'CH+': -8.1, CN: -8.9, NH: -9.4, OH: -8.0,
}; // prettier-ignore

const MASS: Readonly<Record<string, number>> = { CH: 13, 'CH+': 13, CN: 26, NH: 15, OH: 17 };

/** Part of a species in the level a line starts from: nearly all in the lowest, a little in fine structure. */
const inLevel = (line: Line) => ((line.lowerEnergyPerCm ?? 0) < 1 ? 1 : (line.lowerEnergyPerCm ?? 0) < 60 ? 0.2 : 0.01);

export function cloudLines(m: Matter, cloud: Cloud, fromNm: number, toNm: number, chance: Chance): Absorption[] {
  const columns = new Map(
    Object.entries(AGAINST_HYDROGEN).map(([species, dex]) => [
      species,
      cloud.hydrogen + dex + (species === 'H I' ? 0.1 : cloud.scatter) * chance.normal(),
    ]),
  );
  const out: Absorption[] = [];
  for (const line of m.list.lines) {
    const column = columns.get(line.species);
    if (column === undefined || !line.oscillatorStrength || !isMetIn(line, 'interstellar')) continue;
    if (line.wavelengthNm < fromNm || line.wavelengthNm > toNm) continue;
    const mass = MASS[line.species] ?? m.elements.get(line.element)?.massAmu ?? 20;
    const b = Math.hypot(cloud.turbulence, 0.129 * Math.sqrt(cloud.kelvin / mass));
    // tau = sqrt(pi) e2 / (m c) N f lambda / b; Draine 2011, eq. 9.10
    const central = (1.497e-2 * 10 ** column * inLevel(line) * line.oscillatorStrength * line.wavelengthNm * 1e-7) / (b * 1e5);
    if (central < 2e-4) continue;
    const a = ((line.einsteinA ?? 1e8) * line.wavelengthNm * 1e-7) / (4 * Math.PI * b * 1e5);
    out.push({
      species: line.species,
      restNm: line.wavelengthNm,
      setting: 'interstellar',
      system: cloud.id,
      velocityKmPerS: cloud.velocityKmPerS,
      listed: true,
      central,
      shape: (v) => voigtCore(a, v / b),
      reach: b * Math.max(1.2 * Math.sqrt(Math.log(1 + central * 1e4)), Math.sqrt((a * central) / (Math.sqrt(Math.PI) * 3e-4))),
    });
  }
  return out;
}

/** Diffuse bands of a reddened sightline: known strengths where the list has them, drawn ones elsewhere; carriers move a little on their own. */
export function bandLines(
  m: Matter,
  reddening: number,
  velocityKmPerS: number,
  fromNm: number,
  toNm: number,
  chance: Chance,
): Absorption[] {
  const velocity = velocityKmPerS + 2 * chance.normal();
  return m.list.lines
    .filter((line) => line.species === 'DIB' && line.bandFwhmNm && line.wavelengthNm > fromNm && line.wavelengthNm < toNm)
    .map((line): Absorption => {
      const perMagnitude = line.relativeIntensity
        ? line.relativeIntensity / 1e4
        : chance.logBetween(0.0006, 0.012) * Math.min(3, line.bandFwhmNm! / 0.08);
      const width = reddening * perMagnitude * 10 ** (0.12 * chance.normal());
      const lean = 0.25 * chance.normal();
      const sigma = ((line.bandFwhmNm! / line.wavelengthNm) * 299_792.458) / 2.354_82;
      const restNm = line.wavelengthNm + 0.012 * chance.normal(); // centres of lists are good to about a tenth of an angstrom
      return {
        species: 'DIB',
        restNm: line.wavelengthNm,
        setting: 'interstellar',
        system: 'bands',
        velocityKmPerS: velocity + ((restNm - line.wavelengthNm) / line.wavelengthNm) * 299_792.458,
        listed: true,
        central: width / (1.0645 * line.bandFwhmNm!),
        shape: (v) => Math.exp(-0.5 * (v / (sigma * (1 + lean * Math.tanh(v / sigma)))) ** 2),
        reach: 5 * sigma,
      };
    });
}

/** Optical depth of a water or oxygen line of relative strength 1, by band; about what 1.2 air masses and 3 mm of water give. */
const AIR_DEPTH: Readonly<Record<string, number>> = { 'O2 A band': 9, 'O2 B band': 1.6, 'O2 gamma band': 0.14 };

export function airLines(m: Matter, velocityKmPerS: number, fromNm: number, toNm: number, chance: Chance): Absorption[] {
  const masses = chance.between(1, 2);
  const water = chance.logBetween(0.3, 2.5);
  const out: Absorption[] = [];
  for (const line of m.list.lines) {
    if (line.type !== 'telluric' || line.wavelengthNm < fromNm || line.wavelengthNm > toNm) continue;
    const own = 10 ** (0.08 * chance.normal());
    const oxygen = AIR_DEPTH[line.multiplet];
    const wet = line.relativeIntensity === null ? chance.logBetween(0.01, 0.12) : 8 * 10 ** line.relativeIntensity;
    const central = masses * own * (oxygen ? oxygen * (line.relativeIntensity ?? 0) : water * wet);
    if (central < 1e-3) continue;
    out.push({
      species: line.species,
      restNm: line.wavelengthNm,
      setting: 'telluric',
      system: 'air',
      velocityKmPerS,
      listed: true,
      central,
      shape: (v) => voigtCore(0.5, v / 0.9),
      reach: 0.9 * Math.max(4, Math.sqrt((0.5 * central) / 1.8e-3)),
    });
  }
  return out;
}
