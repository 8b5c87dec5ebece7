/**
 * Run on its own: reads each file of the corpus that is named on the command line and prints, one JSON object a line, the
 * seconds of processor time it took, what came out and by how many MiB the memory of the process grew beyond its highest mark before.
 */
import { readFileSync } from 'node:fs';
import { readSpectrum } from '../../../shared/src/reading/index.js';
import { cpuSeconds } from './cpu.js';

const highest = () => process.resourceUsage().maxRSS / 1024;
const load = (file: string) => new Uint8Array(readFileSync(file));

const [warmUp = '', ...files] = process.argv.slice(2);
// compiled code and the heap of a normal reading are no part of what a bad file costs
for (let i = 0; i < 5; i++) readSpectrum(load(warmUp), warmUp);
for (const file of files) {
  const bytes = load(file);
  const before = highest();
  const { seconds, result } = cpuSeconds(() => readSpectrum(bytes, file));
  console.log(JSON.stringify({ file, seconds, grownMiB: highest() - before, outcome: result.ok ? 'read' : result.problem.code }));
}
