import type { Line } from '../linelist/index.js';
import { BOLTZMANN_PER_CM_PER_K, logIonFractions, logSolarAbundance, partitionFunction } from './ionisation.js';

/**
 * Strength index of photospheric lines: log10 of (abundance x ion fraction x gf x lambda x exp(-E/kT) / U), the thin-limit W/lambda
 * up to one constant for the whole star. LTE, solar abundances (Asplund et al. 2009), Saha and Boltzmann.
 * @param logNe log10 of the electron density, cm^-3; about 13 in cool, 14 in hot photospheres
 * @returns one number a line, NaN where the list or the tables lack a number
 */
export function photosphericIndex(lines: readonly Line[], temperatureK: number, logNe: number): Float64Array {
  const fractions = new Map<string, number[]>();
  const base = new Map<string, number>(); // log10 of abundance x fraction / U of a species
  const perCm = BOLTZMANN_PER_CM_PER_K * temperatureK;
  return Float64Array.from(lines, (line) => {
    if (line.logGf === null || line.lowerEnergyPerCm === null || line.ionStage < 1) return NaN;
    let species = base.get(line.species);
    if (species === undefined) {
      let f = fractions.get(line.element);
      if (!f) fractions.set(line.element, (f = logIonFractions(line.element, temperatureK, logNe)));
      species = logSolarAbundance(line.element) + (f[line.ionStage - 1] ?? NaN) - Math.log10(partitionFunction(line.species, temperatureK));
      base.set(line.species, species);
    }
    return species + line.logGf + Math.log10(line.wavelengthNm) - (line.lowerEnergyPerCm / perCm) * Math.LOG10E;
  });
}
