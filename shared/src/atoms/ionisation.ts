import { LOG_ABUNDANCE, PARTITION_TEMPERATURES, SPECIES } from './tables.js';

const STAGES = ['I', 'II', 'III', 'IV', 'V', 'VI'] as const;
/** k in eV/K and cm^-1/K (CODATA 2018, exact SI values converted). */
export const BOLTZMANN_EV_PER_K = 8.617333262145179e-5;
export const BOLTZMANN_PER_CM_PER_K = 0.6950348004861275;
/** log10 of 2 (2 pi m_e k / h^2)^1.5 in cm^-3 K^-1.5, CODATA 2018; the factor 2 is the free electron's statistical weight. */
const LOG_SAHA = 15.683890127356488;

export const speciesName = (element: string, stage: number): string => `${element} ${STAGES[stage - 1] ?? '?'}`;

/** Bare nuclei: they have one state, and no levels in the tables. */
const BARE: ReadonlySet<string> = new Set(['H II', 'He III', 'Li IV', 'Be V', 'B VI']);

/**
 * Partition function of a species, linear in ln T between tabulated temperatures, the end values held outside 3000-30000 K.
 * @returns NaN when the species has none
 */
export function partitionFunction(species: string, temperatureK: number): number {
  if (BARE.has(species)) return 1;
  const row = SPECIES[species];
  if (!row || row.length < 2) return NaN;
  const t = PARTITION_TEMPERATURES;
  if (temperatureK <= t[0]!) return row[1]!;
  for (let i = 1; i < t.length; i++) {
    if (temperatureK > t[i]!) continue;
    const w = Math.log(temperatureK / t[i - 1]!) / Math.log(t[i]! / t[i - 1]!);
    return row[i]! * (1 - w) + row[i + 1]! * w;
  }
  return row[t.length]!;
}

/** Energy to remove the next electron, eV; NaN when unknown. */
export const ionisationEnergyEv = (species: string): number => SPECIES[species]?.[0] ?? NaN;

/** log10 of the ratio of the next stage's number to this one's after Saha. */
export function logSahaRatio(chiEv: number, upperU: number, lowerU: number, temperatureK: number, logNe: number): number {
  const boltzmann = (chiEv / (BOLTZMANN_EV_PER_K * temperatureK)) * Math.LOG10E;
  return LOG_SAHA + 1.5 * Math.log10(temperatureK) + Math.log10(upperU / lowerU) - boltzmann - logNe;
}

/** log10 of the fraction of an element in each stage, neutral first, as far as energies and partition functions reach. */
export function logIonFractions(element: string, temperatureK: number, logNe: number): number[] {
  const log = [0];
  for (let stage = 1; stage < STAGES.length; stage++) {
    const chi = ionisationEnergyEv(speciesName(element, stage));
    const lower = partitionFunction(speciesName(element, stage), temperatureK);
    const upper = partitionFunction(speciesName(element, stage + 1), temperatureK);
    const step = logSahaRatio(chi, upper, lower, temperatureK, logNe);
    if (!Number.isFinite(step)) break;
    log.push(log[stage - 1]! + step);
  }
  const top = Math.max(...log);
  const total = top + Math.log10(log.reduce((sum, l) => sum + 10 ** (l - top), 0));
  return log.map((l) => l - total);
}

/** log10 of an element's number per hydrogen atom in the Sun; NaN when unknown. */
export const logSolarAbundance = (element: string): number => (LOG_ABUNDANCE[element] ?? NaN) - 12;
