// Analyses files with the default list and settings, one JSON line a file: `Analysis`, or what was said when the file was refused.
// A process of its own, since the sandbox of the test runner makes number crunching several times slower.
import { readFileSync } from 'node:fs';
import { basename } from 'node:path';
import { analyse, DEFAULT_SETTINGS, parseDefaultList, readSpectrum } from '@foreveil/shared';

const listed = (name: string) => readFileSync(new URL(`../../seeds/data/${name}`, import.meta.url), 'utf8');
const list = parseDefaultList(listed('lines.csv'), listed('telluric.csv'));
for (const file of process.argv.slice(2)) {
  const read = readSpectrum(readFileSync(file), basename(file));
  console.log(JSON.stringify(read.ok ? analyse(read.spectrum, list, DEFAULT_SETTINGS) : read.problem.sentence));
}
