import { readFileSync } from 'node:fs';
import { analyse, DEFAULT_SETTINGS, readSpectrum, type LineList, type ReadingCorrections } from '@foreveil/shared';
import { bundledList } from './headless/bundled-list.js';
import { hintFor } from './headless/answers.js';
import { readOptions, USAGE } from './headless/options.js';
import { resultLine } from './headless/result.js';

/** The command line: files to identifications, without server or database. See USAGE. */
const say = (text: string) => process.stderr.write(`${text}\n`);
const print = (line: object) => process.stdout.write(`${JSON.stringify(line)}\n`);

function identifyFile(file: string, corrections: ReadingCorrections, list: LineList): object {
  const began = performance.now();
  const read = readSpectrum(readFileSync(file), file, corrections);
  if (!read.ok) {
    const hint = hintFor(read.problem);
    if (hint) say(`${file}: ${hint}`);
    throw new Error(read.problem.sentence);
  }
  for (const w of read.reading.warnings) say(`${file}: ${w.sentence}`);
  const analysis = analyse(read.spectrum, list, DEFAULT_SETTINGS, (step) => say(`${file}: ${step}`));
  return resultLine(file, read.reading, analysis, Number(((performance.now() - began) / 1000).toFixed(3)));
}

function main(): number {
  const options = readOptions(process.argv.slice(2));
  if ('help' in options) {
    process.stdout.write(`${USAGE}\n`);
    return 0;
  }
  if ('problem' in options) {
    say(`${options.problem}\n\n${USAGE}`);
    return 2;
  }
  const list = bundledList();
  let status = 0;
  for (const file of options.files) {
    try {
      print(identifyFile(file, options.corrections, list));
    } catch (e) {
      const error = e instanceof Error ? e.message : String(e);
      say(`${file}: ${error}`);
      print({ file, error });
      status = 1;
    }
  }
  return status;
}

process.exitCode = main();
