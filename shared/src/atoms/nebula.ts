import type { Line } from '../linelist/index.js';
import { logSolarAbundance } from './ionisation.js';

const T_E = 1e4;
const N_E = 1e3;
const K_EV_PER_CM = 1.239841984e-4;
const KT_EV = 8.617333262145179e-5 * T_E;
const H_BETA = 1.24e-25; // erg cm^3/s per n_e n_p, Case B at 10^4 K (Osterbrock & Ferland 2006; from memory)
/** Share of an element in each stage of a common H II region or planetary nebula, I to VI; rough on purpose, the data move every ion. */
const STAGE_SHARE = [0.02, 0.45, 0.45, 0.06, 0.01, 0.003];
/** Elements that mostly sit in dust, and the share left in the gas, dex (common practice; e.g. Osterbrock & Ferland 2006, section 7). */
const DEPLETION: Readonly<Record<string, number>> = {
  Fe: -1.8,
  Ni: -1.8,
  Cr: -1.8,
  Mn: -1.5,
  Ca: -2.5,
  Ti: -2.5,
  Al: -1.5,
  Si: -0.6,
  Mg: -0.7,
};
const COLLISION_STRENGTH = 0.25; // per statistical weight of the upper level, typical of strong nebular transitions
const RECOMBINATION_LINE = -0.8; // log10 intensity (H beta = 100) of a permitted metal line without a listed intensity

/**
 * log10 of typical line intensities of a photoionised nebula on the scale H beta = 100.
 * Recombination lines as the list gives them (Case B: Storey & Hummer 1995; Porter et al. 2012). Forbidden lines: excitation from the
 * ground at 10^4 K and 10^3 cm^-3 with one common collision strength, branching by Einstein A, critical density: right to about 0.5 dex
 * between ions, far better within one upper level.
 */
export function nebularIntensity(lines: readonly Line[]): Float64Array {
  const decay = new Map<string, number>(); // total Einstein A of an upper level
  const upper = (l: Line): string => `${l.species} ${l.upperEnergyPerCm?.toFixed(1)}`;
  for (const l of lines) if (l.type === 'forbidden') decay.set(upper(l), (decay.get(upper(l)) ?? 0) + (l.einsteinA ?? 0));
  return Float64Array.from(lines, (l) => {
    if (l.relativeIntensityScale === 'hbeta_100') return Math.log10(l.relativeIntensity!);
    if (l.relativeIntensityScale === 'he2_4686_100') return Math.log10(l.relativeIntensity!) - 1;
    if (l.type !== 'forbidden' || !l.einsteinA || l.upperEnergyPerCm === null) return RECOMBINATION_LINE;
    const total = decay.get(upper(l))!;
    const weight = 2 * (l.upperJ ?? 1) + 1;
    const up = (8.63e-6 / Math.sqrt(T_E)) * COLLISION_STRENGTH * weight * Math.exp((-l.upperEnergyPerCm * K_EV_PER_CM) / KT_EV) * 0.2;
    const down = (8.63e-6 / Math.sqrt(T_E)) * COLLISION_STRENGTH;
    const photon = 1.986e-16 * (1e7 / l.wavelengthNm); // erg
    const ions = 10 ** (logSolarAbundance(l.element) + (DEPLETION[l.element] ?? 0)) * (STAGE_SHARE[l.ionStage - 1] ?? 0.001);
    const rate = (ions * up * photon * (l.einsteinA / total)) / (1 + (N_E * down) / total);
    return Math.log10(Math.max((rate / H_BETA) * 100, 1e-6));
  });
}
