// npm run bench: time and memory of the analysis, by pixels and by step. Reports, asserts nothing. Run it on a quiet machine.
// npm run bench -- reading: speed of the readers beside memcpy and common packages. npm run bench -- mutations: 100 000 damaged files.
// npm run bench -- errors: whether the stated errors hold, and how near they come to the Cramer-Rao bound (scripts/bench-errors.ts).
import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { requireNode } from './lib/node-version.mjs';

requireNode();
const { build } = await import('./lib/build.mjs');
const { ensureDependencies } = await import('./lib/dependencies.mjs');
const { root } = await import('./lib/paths.mjs');
const { grown, simulate } = await import('./lib/bench/spectrum.mjs');
const { compareWithPython } = await import('./lib/bench/references.mjs');

await ensureDependencies();
if (['errors', 'mutations'].includes(process.argv[2])) {
  const { runTracked } = await import('./lib/supervisor.mjs');
  const source = ['--import', 'tsx', '--conditions=foreveil-source', join(root, `scripts/bench-${process.argv[2]}.ts`)];
  process.exit(await runTracked(process.execPath, [...source, ...process.argv.slice(3)], { cwd: root }));
}
await build(['server']);
if (process.argv[2] === 'reading') {
  const { reportReading } = await import('./lib/bench/reading.mjs');
  await reportReading();
  process.exit();
}
const shared = await import(join(root, 'shared/dist/index.js'));
const { analyse, compareSightlines, DEFAULT_COMPARISON_SETTINGS, DEFAULT_SETTINGS, parseDefaultList, readSpectrum } = shared;
const data = (name) => readFileSync(join(root, 'seeds/data', name), 'utf8');
const list = parseDefaultList(data('lines.csv'), data('telluric.csv'));

const median = (x) => [...x].sort((a, b) => a - b)[x.length >> 1];
const megabytes = (bytes) => (bytes / 2 ** 20).toFixed(0);

/** One run: processor milliseconds in all and by step. Processor time, since a shared machine's clock tells of its neighbours too. */
function timed(spectrum, against) {
  const now = () => process.cpuUsage().user / 1000;
  const steps = {};
  let last = now();
  let name = '';
  const began = last;
  const wall = performance.now();
  const lap = (next) => {
    const t = now();
    if (name) steps[name] = (steps[name] ?? 0) + t - last;
    [last, name] = [t, next];
  };
  const analysis = analyse(spectrum, against, DEFAULT_SETTINGS, lap);
  lap('');
  return { ms: now() - began, wall: performance.now() - wall, steps, features: analysis.features.length };
}

function report(label, spectrum, repeats = 5, against = list) {
  const runs = Array.from({ length: repeats }, () => timed(spectrum, against));
  const ms = median(runs.map((r) => r.ms));
  const total = Object.values(runs[0].steps).reduce((a, b) => a + b, 0);
  const shares = Object.entries(runs[0].steps).map(([s, t]) => `${s} ${((100 * t) / total).toFixed(0)} %`);
  const wall = median(runs.map((r) => r.wall));
  console.log(
    `${label.padEnd(34)} ${ms.toFixed(0).padStart(6)} ms cpu ${wall.toFixed(0).padStart(6)} ms wall ${String(runs[0].features).padStart(5)} features   ${shares.join(', ')}`,
  );
  return ms;
}

console.log(`line list: ${list.lines.length} lines; Node ${process.version}; median of 5 after warming`);
const warm = simulate(10_000, 60, list.lines);
for (let k = 0; k < 12; k++) timed(warm, list);

const sizes = [10_000, 30_000, 100_000, 300_000];
const times = sizes.map((n) =>
  report(`simulated, ${n} pixels, ${Math.round(n / 200)} lines`, simulate(n, Math.round(n / 200), list.lines), n > 100_000 ? 3 : 5),
);
const growth = Math.log(times.at(-1) / times[0]) / Math.log(sizes.at(-1) / sizes[0]);
console.log(`growth with pixels and lines together: exponent ${growth.toFixed(2)}`);

// chance coincidences are the harder problem of a long list: the same spectrum against lists grown by invented weak lines
const crowded = simulate(100_000, 500, list.lines);
const lengths = [list.lines.length, 30_000, 100_000];
const byLength = lengths.map((length) => report(`100000 pixels against ${length} listed lines`, crowded, 3, grown(list, length)));
const lineGrowth = Math.log(byLength.at(-1) / byLength[0]) / Math.log(lengths.at(-1) / lengths[0]);
console.log(`growth with the length of the list: exponent ${lineGrowth.toFixed(2)}`);

const demonstration = join(root, 'seeds/data/spectra');
for (const file of readdirSync(demonstration)) {
  const read = readSpectrum(readFileSync(join(demonstration, file)), file);
  if (read.ok) report(`${file}, ${read.spectrum.flux.length} pixels`, read.spectrum);
}
/** Two sightlines of 100 000 pixels: the comparison alone, and with the two analyses before it. */
function reportComparison() {
  const sides = [7, 8].map((seed) => simulate(100_000, 500, list.lines, seed));
  const once = () => {
    const from = performance.now();
    const [a, b] = sides.map((spectrum) => ({ spectrum, analysis: analyse(spectrum, list, DEFAULT_SETTINGS) }));
    const analysed = performance.now();
    const { lines } = compareSightlines(a, b, list, DEFAULT_COMPARISON_SETTINGS);
    return { alone: performance.now() - analysed, whole: performance.now() - from, lines: lines.length };
  };
  const runs = [once(), once(), once()];
  const ms = (of) => median(runs.map(of)).toFixed(0);
  console.log(
    `two sightlines, 100000 pixels each: compared in ${ms((r) => r.alone)} ms, ${ms((r) => r.whole)} ms with both analyses, ${runs[0].lines} lines`,
  );
}
reportComparison();
console.log(`memory: ${megabytes(process.memoryUsage().rss)} MB resident, ${megabytes(process.resourceUsage().maxRSS * 1024)} MB at most`);

for (const line of compareWithPython(shared, simulate(100_000, 500, list.lines))) console.log(line);
