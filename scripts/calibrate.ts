// Holds the probabilities that the program states against simulated spectra, and writes what it finds to
// shared/src/identify/reliability-data.ts, which the screens show:
//   npm run calibrate -- --jobs 4                      the whole run, kinds shared out to processes; the result is the same with one
//   npm run calibrate -- --count 2 --kinds nebula --dry    a short look that writes nothing
import { execFile } from 'node:child_process';
import { createHash } from 'node:crypto';
import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { parseArgs, promisify } from 'node:util';
import { format, resolveConfig } from 'prettier';
import { analyse, calibrationError, DEFAULT_SETTINGS, PROGRAM_VERSION, shareInterval, type Reliability } from '@foreveil/shared';
import { Calibration, type CalibrationCounts } from '../test/simulation/calibration.js';
import { KINDS, matter, sceneOf, simulate, type Kind, type Trouble } from '../test/simulation/index.js';

const OUT = new URL('../shared/src/identify/reliability-data.ts', import.meta.url).pathname;
/** What half of the spectra suffer, and the other half: what archives hold, and about twice that. */
const TROUBLES: readonly Trouble[] = ['usual', 'harsh'];

const { values } = parseArgs({
  options: {
    count: { type: 'string', default: '8' },
    seed: { type: 'string', default: '20261' },
    kinds: { type: 'string', default: KINDS.join(',') },
    jobs: { type: 'string', default: '1' },
    dry: { type: 'boolean', default: false },
    counts: { type: 'boolean', default: false }, // print bare counts, for the process that shared the work out
  },
});
const seed = Number(values.seed);
const jobs = Number(values.jobs);
const kinds = KINDS.filter((kind) => values.kinds.split(',').includes(kind));
const sources = sourcesOf(new URL('../shared/src/', import.meta.url).pathname);
const { list } = matter();
const calibration = new Calibration();
if (jobs > 1) for (const counts of await Promise.all(shares(kinds, jobs).map(countsElsewhere))) calibration.merge(counts);
else kinds.forEach(measure);
if (values.counts) console.log(JSON.stringify(calibration.counts()));
else await finish();

function measure(kind: Kind): void {
  for (let index = 0; index < Number(values.count); index++) {
    const { spectrum, truth } = simulate(sceneOf({ kind, index, seed, trouble: TROUBLES[index % TROUBLES.length]! }));
    const analysis = analyse(spectrum, list, DEFAULT_SETTINGS);
    calibration.add(kind, analysis, truth.lines);
    const found = analysis.systems.map((s) => `${s.family} ${s.velocityKmPerS.toFixed(1)}`).join(', ');
    const made = truth.systems.map((s) => `${s.family} ${s.velocity_km_s.toFixed(1)}`).join(', ');
    console.error(`${kind} ${index}: ${analysis.features.length} features; systems ${found || 'none'}; made of ${made || 'none'}`);
  }
}

/** Kinds dealt out like cards: neighbours in the list take about as long. */
function shares(all: readonly Kind[], count: number): Kind[][] {
  return Array.from({ length: count }, (_, job) => all.filter((_kind, i) => i % count === job)).filter((share) => share.length > 0);
}

async function countsElsewhere(share: readonly Kind[]): Promise<CalibrationCounts> {
  const args = ['--kinds', share.join(','), '--count', values.count, '--seed', values.seed, '--counts'];
  const running = promisify(execFile)(process.execPath, [...process.execArgv, process.argv[1]!, ...args], { maxBuffer: 2 ** 26 });
  running.child.stderr?.pipe(process.stderr);
  return JSON.parse((await running).stdout) as CalibrationCounts;
}

async function finish(): Promise<void> {
  const reliability = calibration.result({ programVersion: PROGRAM_VERSION, lineListVersion: list.version, sources, seed });
  print(reliability);
  if (values.dry) return;
  await write(reliability);
  console.log(`written to ${OUT.slice(OUT.indexOf('shared/'))}`);
}

/** Names the method that is measured, taken before the run: what is edited meanwhile was not loaded. */
function sourcesOf(folder: string): string {
  const names = readdirSync(folder, { recursive: true, encoding: 'utf8' }).sort();
  const hash = createHash('sha256');
  for (const name of names.filter((n) => n.endsWith('.ts') && !n.endsWith('.spec.ts') && !n.endsWith('reliability-data.ts')))
    hash.update(`${name}\n`).update(readFileSync(`${folder}${name}`));
  return hash.digest('hex').slice(0, 12);
}

function print({ families }: Reliability): void {
  for (const { family, first, further } of families) {
    for (const [rank, bins] of Object.entries({ first, further })) {
      const error = calibrationError(bins);
      if (error === null) continue;
      console.log(`${family}, ${rank}: calibration error ${error.toFixed(4)} over ${bins.reduce((n, b) => n + b.count, 0)} statements`);
      for (const { from, to, count, right, mean } of bins.filter((b) => b.count)) {
        const { low, high } = shareInterval(right, count);
        console.log(
          `  ${from.toFixed(2)}-${to.toFixed(2)}  said ${mean.toFixed(3)}  right ${(right / count).toFixed(3)} (${low.toFixed(3)}-${high.toFixed(3)})  of ${count}`,
        );
      }
    }
  }
}

async function write(result: Reliability): Promise<void> {
  const source = `import type { Reliability } from './reliability.js';

// Generated by \`npm run calibrate\`; run it again after a change of the method or of PROGRAM_VERSION.

/** How the probabilities of this version held against simulated spectra whose truth is known. */
export const RELIABILITY: Reliability = ${JSON.stringify(result)};
`;
  writeFileSync(OUT, await format(source, { ...(await resolveConfig(OUT)), parser: 'typescript' }));
}
