import { remarkText } from './remarks.js';

/** Units and delimiter that the header of an ECSV 1.0 table gives, by column name; null when the remarks are not such a header. */
export function readEcsv(remarks: readonly string[]): { units: Map<string, string>; delimiter: ',' | ' ' } | null {
  if (!remarks.some((line) => /^#\s*%ECSV/.test(line))) return null;
  const units = new Map<string, string>();
  let delimiter: ',' | ' ' = ' ';
  let name: string | null = null;
  for (const line of remarks) {
    const text = remarkText(line).slice(0, 1000);
    if (/^\s*delimiter:\s*['"]?,/.test(text)) delimiter = ',';
    const starts = /^\s*-\s*\{?\s*name:\s*(.+)$/.exec(text);
    if (starts) name = scalar(starts[1]!);
    const unit = /(?:^|[{,\s])unit:\s*(.+)$/.exec(text);
    if (name !== null && unit) units.set(name, scalar(unit[1]!));
  }
  return { units, delimiter };
}

/** A YAML scalar at the start of a text: quoted, or up to a comma or the closing brace of a flow map. */
function scalar(text: string): string {
  const quoted = /^(['"])(.*?)\1/.exec(text);
  return quoted ? quoted[2]! : text.split(/[,}]/)[0]!.trim();
}
