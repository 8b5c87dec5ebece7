import type { Line } from '@foreveil/shared';
import type { Chance } from './chance.js';
import { isMetIn, type Matter } from './matter.js';

// Gas that shines: recombination as Case B has it, forbidden lines from collisions out of the ground term and branching by Einstein A.

export interface Nebula {
  readonly id: string;
  readonly velocityKmPerS: number;
  readonly fwhmKmPerS: number;
  readonly kelvin: number;
  /** electrons, cm^-3 */
  readonly density: number;
  /** 0 for gas near a cool star, 1 for gas near a very hot one: which stages are filled */
  readonly excitation: number;
}

export interface Emission {
  readonly species: string;
  readonly restNm: number;
  readonly setting: 'nebular' | 'telluric' | 'unlisted';
  readonly system: string;
  readonly velocityKmPerS: number;
  readonly fwhmKmPerS: number;
  readonly listed: boolean;
  /** flux against that of H beta of its nebula (sky lines: against that of their strongest) */
  readonly flux: number;
}

/** Collision strengths from the ground term to terms, common values near 10 000 K (Osterbrock & Ferland 2006, section 3; from memory). */
const STRENGTH: Readonly<Record<string, readonly number[]>> = {
  'O III': [2.3, 0.29],
  'N II': [2.7, 0.29],
  'S II': [6.9, 3.5],
  'O II': [1.34, 0.4],
  'Ne III': [1.36, 0.15],
  'S III': [6.9, 1.4],
  'Ar III': [4.7, 0.85],
  'O I': [0.27, 0.03],
  'N I': [0.5, 0.1],
  'Ar IV': [2.0, 1.2],
  'Cl III': [3.2, 1.8],
};

/** Part of an element in a stage: a bell over the stages about one that rises with the excitation. */
function stageShare(stage: number, excitation: number): number {
  const bell = (s: number) => Math.exp(-0.5 * ((s - (1.9 + 1.5 * excitation)) / 0.55) ** 2);
  return bell(stage) / [1, 2, 3, 4, 5, 6].reduce((sum, s) => sum + bell(s), 0);
}

const IN_DUST: Readonly<Record<string, number>> = { Fe: -1.7, Ni: -1.7, Co: -1.7, Cr: -1.7, Ca: -2.3, Si: -0.5, Mg: -0.6, Al: -1.4 };
const PER_EV = 1.239_842e-4;

export function nebularLines(m: Matter, nebula: Nebula, fromNm: number, toNm: number, chance: Chance): Emission[] {
  const lines = m.list.lines.filter((line) => isMetIn(line, 'nebular'));
  const forbidden = lines.filter((line) => line.type === 'forbidden' && line.einsteinA && line.upperEnergyPerCm !== null);
  const upper = (line: Line) => `${line.species} ${line.upperEnergyPerCm!.toFixed(1)}`;
  const decay = new Map<string, number>();
  for (const line of forbidden) decay.set(upper(line), (decay.get(upper(line)) ?? 0) + line.einsteinA!);
  const lowest = new Map<string, number>(); // energy of the lowest term above the ground term
  for (const line of forbidden) {
    if (line.upperEnergyPerCm! > 8000) lowest.set(line.species, Math.min(lowest.get(line.species) ?? Infinity, line.upperEnergyPerCm!));
  }
  const speciesOff = new Map<string, number>();
  const offOf = (species: string) => speciesOff.get(species) ?? speciesOff.set(species, 0.2 * chance.normal()).get(species)!;
  const helium = chance.between(0.07, 0.13);
  const twice = nebula.excitation > 0.7 ? 0.3 * (nebula.excitation - 0.7) : 0;
  const out: Emission[] = [];
  for (const line of lines) {
    const own = 10 ** (0.03 * chance.normal());
    const flux = own * fluxOf(line);
    if (!(flux > 1e-5) || line.wavelengthNm < fromNm || line.wavelengthNm > toNm) continue;
    out.push({
      species: line.species,
      restNm: line.wavelengthNm,
      setting: 'nebular',
      system: nebula.id,
      velocityKmPerS: nebula.velocityKmPerS,
      fwhmKmPerS: Math.hypot(nebula.fwhmKmPerS, line.element === 'H' ? 21 * Math.sqrt(nebula.kelvin / 1e4) : 8),
      listed: true,
      flux,
    });
  }
  return out;

  function fluxOf(line: Line): number {
    if (line.relativeIntensityScale === 'hbeta_100') return (line.relativeIntensity! / 100) * (line.element === 'He' ? helium / 0.1 : 1);
    if (line.relativeIntensityScale === 'he2_4686_100') return (line.relativeIntensity! / 100) * 12 * twice * helium;
    if (line.type !== 'forbidden') return 1e-3 * 10 ** (offOf(line.species) * 2 + 0.4 * chance.normal());
    if (!line.einsteinA || line.upperEnergyPerCm === null) return 0;
    return collisional(line, decay.get(upper(line))!);
  }

  /** Excited by electrons out of the ground term, then down by the fastest way; collisions take over above the critical density. */
  function collisional(line: Line, total: number): number {
    const ev = line.upperEnergyPerCm! * PER_EV;
    const kT = 8.617_333e-5 * nebula.kelvin;
    const terms = STRENGTH[line.species] ?? [0.8, 0.8];
    const term = line.upperEnergyPerCm! < 1.4 * (lowest.get(line.species) ?? 0) ? 0 : 1;
    const strength = terms[term]! * share(line, term);
    const rate = (8.63e-6 / Math.sqrt(nebula.kelvin) / groundWeight(line)) * strength * Math.exp(-ev / kT);
    const down = ((8.63e-6 / Math.sqrt(nebula.kelvin)) * strength) / (2 * (line.upperJ ?? 1) + 1);
    const ions =
      10 ** (m.elements.get(line.element)!.abundance - 12 + (IN_DUST[line.element] ?? 0) + offOf(line.species)) *
      stageShare(line.ionStage, nebula.excitation);
    const photon = 1.986e-9 / line.wavelengthNm;
    const alive = 1 / (1 + (nebula.density * down) / total);
    return (ions * rate * photon * (line.einsteinA! / total) * alive) / 1.24e-25;
  }
}

/** Part of a term's collision strength that falls to one of its levels: doublet D and P terms by weight, singlets all of it. */
function share(line: Line, term: number): number {
  const j = line.upperJ ?? 1;
  return (2 * j) % 2 === 1 ? (2 * j + 1) / (term === 0 ? 10 : 6) : 1;
}
const groundWeight = (line: Line) => (((line.lowerJ ?? 1) * 2) % 2 === 1 ? 4 : 9);

/** What is left of the night sky after it was taken off: lines up or down at rest in the observatory's frame, stronger ones more. */
export function skyResiduals(m: Matter, velocityKmPerS: number, fromNm: number, toNm: number, chance: Chance): Emission[] {
  return m.list.lines
    .filter((line) => line.type === 'sky' && line.species !== 'Hg I' && line.wavelengthNm > fromNm && line.wavelengthNm < toNm)
    .map((line): Emission => {
      const bright = line.species === 'O I' ? 3 : line.relativeIntensity ? Math.sqrt(line.relativeIntensity / 20) : 0.2;
      return {
        species: line.species,
        restNm: line.wavelengthNm,
        setting: 'telluric',
        system: 'air',
        velocityKmPerS,
        fwhmKmPerS: 1.5,
        listed: true,
        flux: bright * Math.abs(0.6 + 0.4 * chance.normal()),
      };
    });
}
