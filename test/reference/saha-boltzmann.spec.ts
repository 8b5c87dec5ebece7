import { readFileSync } from 'node:fs';
import {
  BOLTZMANN_EV_PER_K,
  BOLTZMANN_PER_CM_PER_K,
  ionisationEnergyEv,
  logIonFractions,
  logSahaRatio,
  partitionFunction,
  photosphericIndex,
  speciesName,
} from '@foreveil/shared';
import { lineOf } from '../support/lines.js';

// Reference: Saha and Boltzmann with 30 digits (mpmath 1.2.1), constants of CODATA 2018, partition functions stated case by case.
// Ours come from tables where elements are named; there the difference that the tables make is worked out and taken off.

interface Saha {
  id: string;
  kind: string;
  element: string;
  T_K: number;
  n_e_cm3: number;
  chi_eV: number[];
  U: number[];
  fractions: number[];
  log10_stage_ratios: number[];
}
interface Levels {
  id: string;
  kind: string;
  species: string;
  T_K: number;
  U: number;
}
interface Boltzmann {
  id: string;
  kind: string;
  species: string;
  'E_cm-1': [number, number];
  g: [number, number];
  T_K: number;
  ln_ratio: number;
}
interface PureHydrogen {
  id: string;
  kind: string;
  T_K: number;
  n_H_cm3: number;
  ionised_fraction: number;
  n_e_cm3: number;
}
const reference = JSON.parse(readFileSync('test/fixtures/reference/saha_boltzmann.json', 'utf8')) as {
  cases: { kind: string }[];
  boltzmann_k_cm1_per_K: number;
  k_eV_per_K: number;
};
const of = <T extends { kind: string }>(kind: string) => reference.cases.filter((c) => c.kind === kind) as T[];
const saha = of<Saha>('saha');
const HYDROGEN_EV = 13.598434599702;

it('has the reference cases and its constants', () => {
  expect(['saha', 'partition_sum', 'boltzmann', 'pure_hydrogen'].map((kind) => of(kind).length)).toEqual([264, 30, 28, 28]);
  expect(BOLTZMANN_PER_CM_PER_K).toBe(reference.boltzmann_k_cm1_per_K);
  expect(BOLTZMANN_EV_PER_K).toBe(reference.k_eV_per_K);
});

describe('ionisation', () => {
  it('has the ratio of every pair of stages to 1e-9', () => {
    for (const { chi_eV, U, T_K, n_e_cm3, log10_stage_ratios } of saha)
      chi_eV.forEach((chi, i) => {
        const log = logSahaRatio(chi, U[i + 1]!, U[i]!, T_K, Math.log10(n_e_cm3));
        expect(Math.abs(log - log10_stage_ratios[i]!)).toBeLessThan(1e-9);
      });
  });

  it('adds up to the fractions of the stages', () => {
    for (const { chi_eV, U, T_K, n_e_cm3, fractions } of saha) {
      const log = chi_eV.reduce(
        (stages, chi, i) => [...stages, stages[i]! + logSahaRatio(chi, U[i + 1]!, U[i]!, T_K, Math.log10(n_e_cm3))],
        [0],
      );
      const top = Math.max(...log);
      const total = log.reduce((sum, l) => sum + 10 ** (l - top), 0);
      fractions.forEach((fraction, i) => {
        const ours = 10 ** (log[i]! - top) / total;
        // below 1e-12 the reference asks for 1e-6; below 1e-300 for nothing
        expect(Math.abs(ours - fraction)).toBeLessThanOrEqual((fraction < 1e-12 ? 1e-6 : 1e-9) * fraction + 1e-300);
      });
    }
  });

  it('is the same with the tabulated energies and partition functions, apart from their difference to those stated', () => {
    for (const { element, T_K, n_e_cm3, chi_eV, U, log10_stage_ratios } of saha) {
      const log = logIonFractions(element, T_K, Math.log10(n_e_cm3));
      expect(log.length).toBeGreaterThan(chi_eV.length);
      expect(log.reduce((sum, l) => sum + 10 ** l, 0)).toBeCloseTo(1, 12);
      chi_eV.forEach((chi, i) => {
        const [lower, upper] = [speciesName(element, i + 1), speciesName(element, i + 2)];
        const fromU = Math.log10((partitionFunction(upper, T_K) / partitionFunction(lower, T_K)) * (U[i]! / U[i + 1]!));
        const fromEnergy = (-(ionisationEnergyEv(lower) - chi) / (BOLTZMANN_EV_PER_K * T_K)) * Math.LOG10E;
        expect(Math.abs(log[i + 1]! - log[i]! - fromU - fromEnergy - log10_stage_ratios[i]!)).toBeLessThan(1e-9);
        expect(Math.abs(ionisationEnergyEv(lower) / chi - 1)).toBeLessThan(1e-3); // NIST, digits and edition
      });
    }
  });

  it('ionises pure hydrogen as the closed form does, with the tables too', () => {
    for (const { T_K, n_e_cm3, ionised_fraction: x } of of<PureHydrogen>('pure_hydrogen')) {
      const expected = Math.log10(x / (1 - x));
      const digits = 1e-9 + 2e-16 / (1 - x); // 1 - x loses digits of x
      expect(Math.abs(logSahaRatio(HYDROGEN_EV, 1, 2, T_K, Math.log10(n_e_cm3)) - expected)).toBeLessThan(digits);
      const [neutral, ionised] = logIonFractions('H', T_K, Math.log10(n_e_cm3));
      const excited = Math.log10(partitionFunction('H I', T_K) / 2);
      expect(Math.abs(ionised! - neutral! + excited - expected)).toBeLessThan(digits + 1e-6); // energy tabulated to 1e-6 eV
    }
  });
});

describe('excitation', () => {
  it('fills levels after Boltzmann', () => {
    for (const { species, 'E_cm-1': energy, g, T_K, ln_ratio } of of<Boltzmann>('boltzmann')) {
      const levels = energy.map((lowerEnergyPerCm, i) => lineOf({ species, lowerEnergyPerCm, logGf: Math.log10(g[i]!) }));
      const [lower, upper] = photosphericIndex(levels, T_K, 14);
      // the difference of two numbers of some thousand: sixteen digits less four
      expect(Math.abs((upper! - lower!) * Math.LN10 - ln_ratio)).toBeLessThan(1e-9 * Math.max(1, Math.abs(ln_ratio)));
    }
  });

  it('has partition functions no smaller than the sum over a few low levels, and near it where these are all that is filled', () => {
    const sums = of<Levels>('partition_sum').filter(({ T_K }) => T_K >= 3000); // where the tables begin
    expect(sums.length).toBeGreaterThan(15);
    for (const { species, T_K, U } of sums) {
      const tabulated = partitionFunction(species, T_K);
      expect(tabulated / U).toBeGreaterThan(0.999); // digits of the tables and their interpolation
      if (T_K <= 4500) expect(tabulated / U).toBeLessThan(1.02);
    }
  });
});
