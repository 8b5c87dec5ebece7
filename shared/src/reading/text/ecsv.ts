import { remarkText } from './remarks.js';

/** What the header of an ECSV 1.0 table says: units by column name, columns that hold no numbers, the delimiter. */
export interface EcsvHeader {
  readonly units: ReadonlyMap<string, string>;
  readonly notNumeric: ReadonlySet<string>;
  readonly delimiter: ',' | ' ';
}

/** Null when the remarks are not the header of such a table. */
export function readEcsv(remarks: readonly string[]): EcsvHeader | null {
  if (!remarks.some((line) => /^#\s*%ECSV/.test(line))) return null;
  const units = new Map<string, string>();
  const notNumeric = new Set<string>();
  let delimiter: ',' | ' ' = ' ';
  let name: string | null = null;
  for (const line of remarks) {
    const text = remarkText(line).slice(0, 1000);
    if (/^\s*delimiter:\s*['"]?,/.test(text)) delimiter = ',';
    const starts = /^\s*-\s*\{?\s*name:\s*(.+)$/.exec(text);
    if (starts) name = scalar(starts[1]!);
    const unit = /(?:^|[{,\s])unit:\s*(.+)$/.exec(text);
    if (name !== null && unit) units.set(name, scalar(unit[1]!));
    const datatype = /(?:^|[{,\s])datatype:\s*(.+)$/.exec(text);
    if (name !== null && datatype && !/^(?:u?int|float|complex)/.test(scalar(datatype[1]!))) notNumeric.add(name);
  }
  return { units, notNumeric, delimiter };
}

/** A YAML scalar at the start of a text: quoted, or up to a comma or the closing brace of a flow map. */
function scalar(text: string): string {
  const quoted = /^(['"])(.*?)\1/.exec(text);
  return quoted ? quoted[2]! : text.split(/[,}]/)[0]!.trim();
}
