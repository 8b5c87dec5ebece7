// npm run bench -- errors [--repeats 20] [--stars 6]: do the stated errors hold? Spread of (measured - true) / stated error, which should lie in
// 0.9-1.1, and scatter over the Cramer-Rao bound, which should stay below 1.2 for isolated lines. Reports, asserts nothing.
import { parseArgs } from 'node:util';
import { deviationsOf, QUANTITIES, type Trial } from './lib/bench/line-errors.js';
import { gaussian, rotating, saturated } from './lib/bench/line-shapes.js';
import { starDeviations } from './lib/bench/star-errors.js';

const { values } = parseArgs({
  allowPositionals: true,
  options: { repeats: { type: 'string', default: '20' }, stars: { type: 'string', default: '6' } },
});
const repeats = Number(values.repeats);

const median = (x: readonly number[]) => [...x].sort((a, b) => a - b)[x.length >> 1] ?? NaN;
/** Robust standard deviation: of a normal distribution, 1.4826 times the median distance from the median. */
const spread = (x: readonly number[]) => 1.4826 * median(x.map((v) => Math.abs(v - median(x))));
const shown = (value: number, low: number, high: number) => `${value.toFixed(2)}${value < low || value > high ? ' !' : '  '}`.padStart(8);

const single = (name: string, shape: Trial['shape'], depth: number, signalToNoise: number): Trial => ({
  name,
  shape,
  depth,
  signalToNoise,
});
const alone: Trial[] = [30, 100, 300].flatMap((snr) => [
  single('Gaussian 1.0 element wide', gaussian(1), 15 / snr > 0.6 ? 0.6 : 15 / snr, snr),
  single('Gaussian 2 elements wide', gaussian(2), 12 / snr > 0.5 ? 0.5 : 12 / snr, snr),
  single('Gaussian 6 elements wide', gaussian(6), 8 / snr > 0.4 ? 0.4 : 8 / snr, snr),
]);
alone.push(
  single('deep Gaussian', gaussian(1.5), 0.7, 150),
  single('emission', gaussian(1.2), -0.8, 40),
  single('rotation, 4 elements', rotating(4), 0.15, 150),
  single('saturated, tau 6', saturated(6, 0.25), 0.5, 120),
);
const blends: Trial[] = [1.3, 1.8, 2.5].map((blendedAt) => ({
  ...single(`two lines ${blendedAt} elements apart`, gaussian(1.1), 0.25, 120),
  blendedAt,
}));

console.log(
  `isolated lines and blends, ${repeats} spectra each; ! marks what is outside 0.9-1.1 (over stated error) or above 1.2 (over bound)`,
);
console.log(
  `${'line'.padEnd(34)} ${'S/N'.padStart(4)} lines found  |  over stated error: centre, FWHM, width  |  over the bound: centre, FWHM, width | median pull of width`,
);
for (const trial of repeats > 0 ? [...alone, ...blends] : []) {
  const d = deviationsOf(trial, repeats);
  const pulls = QUANTITIES.map((q) => shown(spread(d.pulls[q]), 0.9, 1.1)).join('');
  const bounds = QUANTITIES.map((q) => (trial.blendedAt ? '-'.padStart(8) : shown(spread(d.overBound[q]), 0, 1.2))).join('');
  const found = `${d.found}/${d.made}`.padStart(11);
  console.log(
    `${trial.name.padEnd(34)} ${String(trial.signalToNoise).padStart(4)} ${found}  | ${pulls}  | ${bounds}  | ${median(d.pulls.width).toFixed(2)}`,
  );
}

const count = Number(values.stars);
const stars = starDeviations(['cool-star', 'hot-star', 'nebula', 'ultraviolet', 'featureless'], count, 11, (line) =>
  process.stderr.write(`${line}\n`),
);
const report = (name: string, x: readonly number[]) =>
  console.log(
    `${name.padEnd(34)} ${String(x.length).padStart(4)} values, spread ${shown(spread(x), 0.9, 1.1)}, median ${median(x).toFixed(2)}`,
  );
if (count) console.log('whole spectra without trouble: over stated errors');
if (count) report('temperature, no dust', stars.temperature);
for (const [family, x] of Object.entries(stars.systems)) report(`velocity, ${family}`, x);
