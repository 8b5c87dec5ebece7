import type { Line } from '../linelist/index.js';

/**
 * log10 of column densities (cm^-2) that a diffuse cloud of N(H) = 10^21 cm^-2 commonly shows. Common practice, from memory: depleted
 * gas-phase abundances (after Savage & Sembach 1996, ARA&A 34, 279), trace neutrals and molecules after surveys of optical lines.
 * They are a starting point: every species' column is then left to the data, within about half a dex.
 */
const TYPICAL_COLUMN: Readonly<Record<string, number>> = {
  'H I': 20.8,
  'C I': 13.5,
  'C II': 16.9,
  'N I': 16.8,
  'O I': 17.4,
  'Na I': 12.5,
  'Mg I': 13.4,
  'Mg II': 15.4,
  'Al I': 10.0,
  'Al II': 13.9,
  'Al III': 12.3,
  'Si II': 15.5,
  'Si III': 13.4,
  'Si IV': 12.8,
  'P II': 13.9,
  'S I': 12.0,
  'S II': 15.9,
  'S III': 13.0,
  'Cl I': 12.2,
  'K I': 11.4,
  'Ca I': 9.9,
  'Ca II': 12.3,
  'Ti II': 11.6,
  'Cr II': 12.5,
  'Mn II': 13.2,
  'Fe I': 11.0,
  'Fe II': 14.8,
  'Ni II': 13.2,
  'Co II': 11.5,
  'Cu II': 11.1,
  'Zn II': 13.1,
  'Ga II': 10.0,
  'Ge II': 10.7,
  'Li I': 9.7,
  'Rb I': 9.2,
  CH: 12.8,
  'CH+': 12.8,
  CN: 12.0,
  NH: 11.6,
  OH: 12.9,
  C2: 12.5,
  C3: 11.5,
  CO: 13.5,
};

/** Gas at about 80 K leaves levels above the ground state nearly empty; collisions fill the lowest ones a little. */
const EXCITED_DEX = -0.8;
const UNLISTED_COLUMN = 9.5;

/** log10 of the typical column of the level a line starts from, cm^-2. */
export function typicalColumn(line: Line): number {
  const species = TYPICAL_COLUMN[line.species] ?? UNLISTED_COLUMN;
  return species + ((line.lowerEnergyPerCm ?? 0) > 1 ? EXCITED_DEX : 0);
}
/** Whether the table above knows the species: others are far below any limit in most clouds. */
export const isCommonInClouds = (species: string): boolean => species in TYPICAL_COLUMN;
