// Writes shared/src/atoms/tables.ts from seeds/data/{ionisation,partition,abundances}.csv. Run it after changing one of those.
import { readFileSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import Papa from 'papaparse';

const root = join(dirname(fileURLToPath(import.meta.url)), '..');
const read = (name) => Papa.parse(readFileSync(join(root, 'seeds/data', name), 'utf8'), { header: true, skipEmptyLines: true }).data;

const partition = read('partition.csv');
const temperatures = Object.keys(partition[0]).filter((k) => /^u_\d+k$/.test(k));
const ion = new Map(read('ionisation.csv').map((r) => [r.species, Number(r.ionisation_ev)]));
const abundance = read('abundances.csv').map((r) => `  ${r.element}: ${Number(r.log_eps)},`);
const rows = partition.map(
  (r) => `  '${r.species}': [${ion.get(r.species) ?? 'NaN'}, ${temperatures.map((t) => Number(r[t])).join(', ')}],`,
);
const missing = [...ion].filter(([s]) => !partition.some((r) => r.species === s)).map(([s, e]) => `  '${s}': [${e}],`);

writeFileSync(
  join(root, 'shared/src/atoms/tables.ts'),
  `// Written by scripts/make-atom-tables.mjs from seeds/data; sources are named there row by row.

/** Temperatures of the partition functions, K. */
export const PARTITION_TEMPERATURES: readonly number[] = [${temperatures.map((t) => t.slice(2, -1)).join(', ')}];

/** Species: ionisation energy in eV (NIST ASD), then partition functions at the temperatures above (sums over NIST ASD levels; absent where unknown). */
// prettier-ignore
export const SPECIES: Readonly<Record<string, readonly number[]>> = {
${[...rows, ...missing].join('\n')}
};

/** Element: log10 of its number per 10^12 hydrogen atoms (Asplund, Grevesse, Sauval & Scott 2009, ARA&A 47, 481). */
// prettier-ignore
export const LOG_ABUNDANCE: Readonly<Record<string, number>> = {
${abundance.join('\n')}
};
`,
);
