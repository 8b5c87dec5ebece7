import { readFileSync } from 'node:fs';
import {
  analyse,
  compareSightlines,
  DEFAULT_COMPARISON_SETTINGS,
  DEFAULT_SETTINGS,
  readSpectrum,
  type LineList,
  type ReadingCorrections,
  type Sightline,
} from '@foreveil/shared';
import { bundledList } from './headless/bundled-list.js';
import { comparisonResult } from './headless/comparison-result.js';
import { COMPARE_USAGE, readOptions } from './headless/options.js';

/** The command line: two files to a comparison of their sightlines, without server or database. See COMPARE_USAGE. */
const say = (text: string) => process.stderr.write(`${text}\n`);
const print = (line: object) => process.stdout.write(`${JSON.stringify(line)}\n`);

function sightlineOf(file: string, corrections: ReadingCorrections, list: LineList): Sightline {
  try {
    const read = readSpectrum(readFileSync(file), file, corrections);
    if (!read.ok) throw new Error(read.problem.sentence);
    for (const w of read.reading.warnings) say(`${file}: ${w.sentence}`);
    return { spectrum: read.spectrum, analysis: analyse(read.spectrum, list, DEFAULT_SETTINGS, (step) => say(`${file}: ${step}`)) };
  } catch (e) {
    throw new Error(`${file}: ${e instanceof Error ? e.message : String(e)}`, { cause: e });
  }
}

function main(): number {
  const options = readOptions(process.argv.slice(2));
  if ('help' in options) {
    process.stdout.write(`${COMPARE_USAGE}\n`);
    return 0;
  }
  const problem =
    'problem' in options ? options.problem : options.files.length === 2 ? null : 'two files are compared, no more and no fewer';
  if ('problem' in options || problem !== null) {
    say(`${problem}\n\n${COMPARE_USAGE}`);
    return 2;
  }
  const [a, b] = options.files as [string, string];
  const began = performance.now();
  try {
    const list = bundledList();
    const compared = compareSightlines(
      sightlineOf(a, options.corrections, list),
      sightlineOf(b, options.corrections, list),
      list,
      DEFAULT_COMPARISON_SETTINGS,
    );
    print(comparisonResult(a, b, compared, Number(((performance.now() - began) / 1000).toFixed(3))));
    return 0;
  } catch (e) {
    const error = e instanceof Error ? e.message : String(e);
    say(error);
    print({ a, b, error });
    return 1;
  }
}

process.exitCode = main();
