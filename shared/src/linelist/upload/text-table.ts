import Papa from 'papaparse';
import type { TextTable } from './types.js';

/** A table separated by commas, semicolons, tabs or bars, with a row of names; lines that begin with '#' are left out. */
export function readTextTable(text: string): TextTable {
  const body = text.replace(/^\uFEFF/, '');
  const kept = body.split(/\r\n|\r|\n/).map((line, i) => ({ line, at: i + 1 }));
  const lines = kept.filter(({ line }) => line.trim() !== '' && !line.startsWith('#'));
  const { data } = Papa.parse<string[]>(lines.map(({ line }) => line).join('\n'), { delimitersToGuess: [',', ';', '\t', '|'] });
  const [head = [], ...rows] = data;
  return {
    columns: head.map((name) => ({ name: name.trim(), unit: '', utype: '', ucd: '' })),
    rows: rows.map((cells, i) => ({ at: lines[i + 1]?.at ?? i + 2, cells })),
  };
}
