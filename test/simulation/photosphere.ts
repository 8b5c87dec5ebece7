import type { Line } from '@foreveil/shared';
import type { Chance } from './chance.js';
import { placeOf, dopplerOf, LIGHT_KM_PER_S, type Grid } from './grid.js';
import { planckLight, voigtCore } from './light.js';
import { isMetIn, type Matter } from './matter.js';

// A photosphere in one layer: local thermodynamic equilibrium at a temperature a little below the colour temperature, electrons from
// charge balance, continuous opacity of H-, of neutral hydrogen and of electrons, and Milne-Eddington line depths. Lines blend in opacity.

const K_ERG = 1.380_649e-16;
const K_EV = 8.617_333e-5;

export interface Star {
  readonly id: string;
  readonly temperatureK: number;
  readonly velocityKmPerS: number;
  readonly vsini: number;
  readonly macroKmPerS: number;
  readonly microKmPerS: number;
  /** dex, on all but hydrogen and helium */
  readonly metals: number;
  /** dex: what single elements and single lines are off by */
  readonly scatter: { readonly element: number; readonly line: number };
  /** part of all light that is this star's, 1 when alone */
  readonly lightShare: number;
}

/** Gas pressure where lines form, dyn/cm2, log10, of main-sequence stars; rough, after common model grids (from memory). */
const PRESSURE: readonly (readonly [number, number])[] = [
  [3500, 5.4],
  [5800, 5.0],
  [7500, 4.5],
  [9500, 3.4],
  [15000, 2.9],
  [30000, 3.3],
];

function pressure(kelvin: number): number {
  const i = Math.max(1, Math.min(PRESSURE.length - 1, PRESSURE.findIndex(([t]) => t > kelvin) || 1));
  const [[t0, p0], [t1, p1]] = [PRESSURE[i - 1]!, PRESSURE[i]!];
  return 10 ** (p0 + ((p1 - p0) * (kelvin - t0)) / (t1 - t0));
}

export interface Layer {
  readonly kelvin: number;
  /** dyn/cm2 */
  readonly electronPressure: number;
  /** part of an element's atoms in each stage, neutral first */
  readonly stages: (element: string) => readonly number[];
  /** per hydrogen nucleus, cm2 */
  readonly opacity: (nm: number) => number;
  readonly gasPressure: number;
}

const ROMAN = ['I', 'II', 'III', 'IV', 'V', 'VI'];

/** Saha's ladder at an electron pressure. Source: Gray 2008, eq. 1.20; pressure in dyn/cm2. */
function ladder({ elements, partition }: Matter, element: string, kelvin: number, electronPressure: number): number[] {
  const energies = elements.get(element)?.ionisationEv ?? [];
  const logs = [0];
  energies.slice(0, 5).forEach((ev, i) => {
    const u = Math.log10((2 * partition(`${element} ${ROMAN[i + 1]}`, kelvin)) / partition(`${element} ${ROMAN[i]}`, kelvin));
    logs.push(logs[i]! + 2.5 * Math.log10(kelvin) - (5040 / kelvin) * ev - 0.48 + u - Math.log10(electronPressure));
  });
  const most = Math.max(...logs);
  const parts = logs.map((log) => 10 ** (log - most));
  const sum = parts.reduce((a, b) => a + b, 0);
  return parts.map((part) => part / sum);
}

const DONORS = ['H', 'He', 'C', 'Na', 'Mg', 'Al', 'Si', 'K', 'Ca', 'Fe'];

/** Electrons a hydrogen nucleus goes with, when the stages are those at this electron pressure. */
const electronsPerHydrogen = (m: Matter, kelvin: number, pe: number, metals: number) =>
  DONORS.reduce((sum, element) => {
    const abundance = 10 ** (m.elements.get(element)!.abundance - 12 + (element === 'H' || element === 'He' ? 0 : metals));
    return sum + abundance * ladder(m, element, kelvin, pe).reduce((e, part, stage) => e + stage * part, 0);
  }, 0);

export function layerOf(m: Matter, temperatureK: number, metals: number): Layer {
  const kelvin = 0.9 * temperatureK;
  const gasPressure = pressure(temperatureK);
  let [low, high] = [-3, Math.log10(0.6 * gasPressure)];
  for (let i = 0; i < 50; i++) {
    const pe = 10 ** ((low + high) / 2);
    const perH = electronsPerHydrogen(m, kelvin, pe, metals);
    // nuclei of hydrogen and helium, and electrons, share the pressure
    if ((gasPressure * perH) / (1.085 + perH) > pe) low = Math.log10(pe);
    else high = Math.log10(pe);
  }
  const electronPressure = 10 ** ((low + high) / 2);
  const stages = new Map<string, number[]>();
  const stagesOf = (element: string) =>
    stages.get(element) ?? stages.set(element, ladder(m, element, kelvin, electronPressure)).get(element)!;
  const neutral = stagesOf('H')[0]!;
  const perH = electronsPerHydrogen(m, kelvin, electronPressure, metals);
  return {
    kelvin,
    electronPressure,
    stages: stagesOf,
    gasPressure,
    opacity: (nm) => neutral * (minusIon(nm, kelvin, electronPressure) + boundFree(nm, kelvin)) + 0.6648e-24 * perH,
  };
}

/** H-: bound-free by a rounded cross section and free-free by a tenth of its peak; per neutral atom. After Gray 2008, eqs 8.11-8.13. */
function minusIon(nm: number, kelvin: number, electronPressure: number): number {
  const theta = 5040 / kelvin;
  const x = nm / 850;
  const cross = nm > 1640 ? 0 : 4e-17 * Math.exp(-0.9 * (x - 1) ** 2);
  return (
    4.158e-10 * cross * electronPressure * theta ** 2.5 * 10 ** (0.754 * theta) + 1e-26 * electronPressure * theta ** 0.5 * (nm / 500) ** 2
  );
}

/** Neutral hydrogen ionised from its levels by photons of this wavelength. Source: Gray 2008, eq. 8.8. */
function boundFree(nm: number, kelvin: number): number {
  let sum = 0;
  for (let n = 1; n <= 8; n++) {
    const ev = 13.598 / n ** 2;
    if (1239.84 / nm < ev) continue;
    sum += Math.exp(-(13.598 - ev) / (K_EV * kelvin)) / n ** 3;
  }
  return 1.0449e-26 * (10 * nm) ** 3 * sum;
}

/** A line of a photosphere: opacity over continuum as a function of velocity from its middle. */
export interface OpacityLine {
  readonly line: Line;
  readonly restNm: number;
  readonly listed: boolean;
  /** central opacity over continuous opacity */
  readonly central: number;
  /** opacity at a velocity from the centre over the central one */
  readonly shape: (kmPerS: number) => number;
  /** km/s: beyond, the line adds nothing */
  readonly reach: number;
}

const FAINTEST = 1e-3; // of the continuous opacity

/** The lines of a star that are strong enough to show, with abundances and strengths off by what `star.scatter` says. */
export function photosphericLines(m: Matter, star: Star, layer: Layer, fromNm: number, toNm: number, chance: Chance): OpacityLine[] {
  const offsets = new Map<string, number>();
  const offsetOf = (element: string) => offsets.get(element) ?? offsets.set(element, star.scatter.element * chance.normal()).get(element)!;
  const out: OpacityLine[] = [];
  for (const line of m.list.lines) {
    if (line.logGf === null || line.lowerEnergyPerCm === null || line.ionStage < 1 || !isMetIn(line, 'stellar')) continue;
    if (line.wavelengthNm < fromNm || line.wavelengthNm > toNm) continue;
    const element = m.elements.get(line.element);
    const part = layer.stages(line.element)[line.ionStage - 1];
    if (!element || !part) continue;
    const light = line.element === 'H' || line.element === 'He';
    const dex = light ? 0.3 * offsetOf(line.element) : star.metals + offsetOf(line.element) + star.scatter.line * chance.normal();
    const level =
      (part * Math.exp((-line.lowerEnergyPerCm * 1.239_842e-4) / (K_EV * layer.kelvin))) / m.partition(line.species, layer.kelvin);
    // cm2 cm per hydrogen nucleus: pi e2 / (m c2) lambda2 gf N
    const strength = 8.853e-13 * (line.wavelengthNm * 1e-7) ** 2 * 10 ** (line.logGf + element.abundance - 12 + dex) * level;
    const shaped = line.species === 'H I' ? starkLine(line, layer) : metalLine(line, layer, element.massAmu, star.microKmPerS);
    const central = (strength * shaped.peakPerNm * 1e7) / layer.opacity(line.wavelengthNm);
    if (central < FAINTEST) continue;
    out.push({ line, restNm: line.wavelengthNm, listed: true, central, shape: shaped.shape, reach: shaped.reach(central) });
  }
  return out;
}

interface Shaped {
  /** of the profile of unit area, 1/nm */
  readonly peakPerNm: number;
  readonly shape: (kmPerS: number) => number;
  readonly reach: (central: number) => number;
}

function metalLine(line: Line, layer: Layer, massAmu: number, microKmPerS: number): Shaped {
  const thermal2 = (2 * K_ERG * layer.kelvin) / (massAmu * 1.6605e-24) / 1e10;
  const b = Math.sqrt(thermal2 + microKmPerS ** 2);
  const helium = line.element === 'He' ? 6 : 1; // its lines feel the fields of electrons more
  const a = helium * (0.004 + 0.02 * (layer.gasPressure / 1e5)) * (2 / b);
  return {
    peakPerNm: LIGHT_KM_PER_S / (b * line.wavelengthNm * Math.sqrt(Math.PI)),
    shape: (v) => voigtCore(a, v / b),
    reach: (central) => b * Math.max(3.5, Math.sqrt((a * central) / (Math.sqrt(Math.PI) * 5e-4))),
  };
}

/**
 * Hydrogen in the fields of ions: wings fall with the 5/2 power of distance (Holtsmark's asymptote), joined to a flat core of unit area.
 * Asymptotic constants after Underhill & Waddell 1959, from memory; higher members take the last.
 */
const STARK: Readonly<Record<number, number>> = { 3: 1.74e-3, 4: 3.57e-3, 5: 4.44e-3, 6: 6.17e-3 };

function starkLine(line: Line, layer: Layer): Shaped {
  const upper = Math.round(1 / Math.sqrt(1 - (line.upperEnergyPerCm ?? 109_000) / 109_678.8));
  const density = layer.electronPressure / (K_ERG * layer.kelvin);
  const field = 1.25e-9 * density ** (2 / 3);
  const k = (STARK[upper] ?? 6.2e-3 * (upper / 6) ** 0.5) * (line.wavelengthNm / 450) ** 2 * (upper === 3 ? 0.5 : 1);
  const scaleNm = Math.max(0.02, 0.1 * (2.396 * k) ** (2 / 3) * field); // A to nm; no narrower than thermal motion
  const scaleV = (scaleNm / line.wavelengthNm) * LIGHT_KM_PER_S;
  return {
    peakPerNm: 1 / (2.396 * scaleNm),
    shape: (v) => (1 + (v / scaleV) ** 2) ** -1.25,
    reach: (central) => Math.min(9000, scaleV * Math.max(4, (central / 5e-4) ** 0.4)),
  };
}

/** How far a line can go down: light of the surface over light of the depth, both Planck's. */
export const deepest = (nm: number, kelvin: number) => 1 - planckLight(nm, 0.7 * kelvin) / planckLight(nm, kelvin);

/** Milne and Eddington's depth of a given opacity ratio, before rotation. */
export const depthOf = (eta: number, deepestHere: number) => (deepestHere * eta) / (1 + eta);

/** Opacity over continuum of all lines, on the grid. */
export function opacityOnGrid(grid: Grid, lines: readonly OpacityLine[], velocityKmPerS: number): Float64Array {
  const eta = new Float64Array(grid.size);
  for (const line of lines) {
    const middle = placeOf(grid, line.restNm * dopplerOf(velocityKmPerS));
    const steps = line.reach / grid.stepKmPerS;
    const end = Math.min(grid.size - 1, Math.floor(middle + steps));
    for (let i = Math.max(0, Math.ceil(middle - steps)); i <= end; i++)
      eta[i] = eta[i]! + line.central * line.shape((i - middle) * grid.stepKmPerS);
  }
  return eta;
}
