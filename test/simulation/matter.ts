import { readFileSync } from 'node:fs';
import { parseDefaultList, type Line, type LineList } from '@foreveil/shared';

// Facts of atoms as the simulator reads them: from the tables of the seeds, with formulae of its own, so that a mistake in the
// program's own use of them cannot hide behind the same mistake here.

const text = (name: string) => readFileSync(new URL(`../../seeds/data/${name}`, import.meta.url), 'utf8');

/** Rows of a table whose quoted cells may hold commas. */
function table(name: string): Record<string, string>[] {
  const [head, ...body] = text(name)
    .trim()
    .split('\n')
    .map((row) => [...row.matchAll(/("[^"]*"|[^,]*)(?:,|$)/g)].map((cell) => cell[1]!));
  return body.map((cells) => Object.fromEntries(head!.map((key, i) => [key, cells[i] ?? ''])));
}

/** An element as a gas knows it. */
export interface Element {
  /** log10 of the number of atoms where hydrogen has 12 */
  readonly abundance: number;
  readonly massAmu: number;
  /** eV, neutral first */
  readonly ionisationEv: readonly number[];
}
export interface Matter {
  readonly list: LineList;
  readonly elements: ReadonlyMap<string, Element>;
  /** partition function of a species, from the table in steps of its temperatures, held constant outside */
  readonly partition: (species: string, kelvin: number) => number;
}

/** Mass from the charge of the nucleus, within a few per cent: neutrons outnumber protons slowly. */
const massOf = (z: number) => (z === 1 ? 1.008 : 2 * z * (1 + 0.0035 * z));

function elements(): Map<string, Element> {
  const ladders = new Map<string, number[]>();
  for (const row of table('ionisation.csv'))
    (ladders.get(row['element']!) ?? ladders.set(row['element']!, []).get(row['element']!)!)[Number(row['ion_stage']) - 1] = Number(
      row['ionisation_ev'],
    );
  return new Map(
    table('abundances.csv').map((row) => [
      row['element']!,
      { abundance: Number(row['log_eps']), massAmu: massOf(Number(row['z'])), ionisationEv: ladders.get(row['element']!) ?? [] },
    ]),
  );
}

function partitions(): Matter['partition'] {
  const rows = table('partition.csv');
  const columns = Object.keys(rows[0]!).filter((key) => /^u_\d+k$/.test(key));
  const kelvins = columns.map((key) => Number(key.slice(2, -1)));
  const of = new Map(rows.map((row) => [row['species']!, columns.map((key) => Number(row[key]))]));
  return (species, kelvin) => {
    const values = of.get(species);
    if (!values) return 1;
    let i = kelvins.findIndex((k) => k > kelvin);
    if (i === 0) return values[0]!;
    if (i < 0) return values.at(-1)!;
    i -= 1;
    const part = (kelvin - kelvins[i]!) / (kelvins[i + 1]! - kelvins[i]!);
    return values[i]! + part * (values[i + 1]! - values[i]!);
  };
}

let known: Matter | undefined;

/** Read once. */
export const matter = (): Matter =>
  (known ??= { list: parseDefaultList(text('lines.csv'), text('telluric.csv')), elements: elements(), partition: partitions() });

/** Whether a line is met in a setting, by the word of the list. */
export const isMetIn = (line: Line, setting: Line['settings'][number]) => line.settings.includes(setting);
