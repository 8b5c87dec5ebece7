// Steps of the analysis against scientific Python on the same data, as ratios: processor time there over processor time here, both warm, one after the other.
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const script = fileURLToPath(new URL('./references.py', import.meta.url));
const SAMPLES = 30;
const WINDOWS = [51, 501];
const WIDTHS = [1.5, 2.4, 3.8, 6, 10]; // sigma, samples

/** @returns lines to print; one that says why when Python or its packages are absent */
export function compareWithPython(shared, spectrum) {
  const folder = mkdtempSync(join(tmpdir(), 'foreveil-bench-'));
  try {
    const data = prepare(shared, spectrum);
    for (const [name, column] of Object.entries(data.columns)) writeFileSync(join(folder, `${name}.f64`), column);
    writeFileSync(join(folder, 'task.json'), JSON.stringify({ lines: data.lines, samples: SAMPLES, windows: WINDOWS, widths: WIDTHS }));
    const ran = spawnSync('python3', [script, folder], { encoding: 'utf8', maxBuffer: 1 << 24 });
    if (ran.status !== 0) return [`no comparison: ${absence(ran)}`];
    const there = JSON.parse(ran.stdout);
    return [
      `against Python (${there.versions}), ${spectrum.flux.length} pixels; above 1 this program is faster`,
      ...rows(shared, spectrum, data, there),
    ];
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

const absence = (ran) =>
  ran.error
    ? 'Python is not installed'
    : (ran.stderr.trim().split('\n').at(-1) ?? 'Python failed without a word') + ' (numpy and scipy are needed)';

function prepare({ fitContinuum, estimateNoise, DEFAULT_SETTINGS }, spectrum) {
  const { wavelength, flux, sigma } = spectrum;
  const noise = estimateNoise(spectrum);
  const { level } = fitContinuum(spectrum, noise, DEFAULT_SETTINGS);
  const lines = Array.from({ length: 500 }, (_, k) => [400 + 0.5 * k, 0.1 + 0.001 * k, 0.02]);
  const columns = { wavelength, flux, sigma, residual: flux.map((f, i) => (f - level[i]) / sigma[i]) };
  columns['lines-x'] = new Float64Array(500 * SAMPLES);
  columns['lines-y'] = new Float64Array(500 * SAMPLES);
  columns['lines-s'] = new Float64Array(500 * SAMPLES).fill(0.01);
  lines.forEach(([centre, depth, width], k) => {
    for (let i = 0; i < SAMPLES; i++) {
      const at = k * SAMPLES + i;
      const x = centre + (i - SAMPLES / 2) * 0.3 * width;
      columns['lines-x'][at] = x;
      // a start a little off, and a seeded scatter: both programs see the same
      columns['lines-y'][at] =
        1 - 1.1 * depth * Math.exp(-0.5 * ((x - centre - 0.3 * width) / (1.15 * width)) ** 2) + 0.01 * Math.sin(12.9898 * at);
    }
  });
  return { columns, lines };
}

function rows(shared, spectrum, { columns, lines }, there) {
  const { fitPlanck, fitContinuum, estimateNoise, DEFAULT_SETTINGS, runningMedian, findExcesses, instrumentSigmaPx } = shared;
  const { wavelength, flux, sigma } = spectrum;
  const row = (what, name, run, goal) => {
    const [ms] = timed(run);
    const theirs = there[name].ms;
    return `  ${what.padEnd(62)} ${ms.toFixed(1).padStart(8)} ms here ${theirs.toFixed(1).padStart(8)} ms there   ratio ${(theirs / ms).toFixed(1).padStart(6)}   (goal ${goal})`;
  };
  const blends = () => lineFits(shared, columns, lines);
  const residual = { wavelength, flux: columns.residual, weight: new Float64Array(flux.length).fill(1) };
  const search = {
    instrumentSigmaPx: instrumentSigmaPx(wavelength, spectrum.resolvingPower),
    widestNm: widestOf(wavelength),
    zeroMean: true,
    threshold: 4.5,
    correlation: [1],
  };
  return [
    row('Planck fit, plain, against curve_fit', 'planck', () => fitPlanck(wavelength, flux, sigma, null), '-'),
    row(
      'continuum: robust, with dust and response, against clipped curve_fit',
      'planckClipped',
      () => fitContinuum(spectrum, estimateNoise(spectrum), DEFAULT_SETTINGS),
      20,
    ),
    ...WINDOWS.map((w) =>
      row(
        `running median of ${w}, against ${there[`median${w}`].by}`,
        `median${w}`,
        () => runningMedian(flux, w),
        there.median51.by.startsWith('bottleneck') ? 0.5 : 8,
      ),
    ),
    row('500 line fits with covariance, against curve_fit', 'lines', blends, 25),
    row('matched filters and maxima, against correlate1d and find_peaks', 'detection', () => findExcesses(residual, search), 1),
  ];
}

/** Widest FWHM so that the ladder of widths ends where the reference's does. */
const widestOf = (wavelength) => 2.3548 * WIDTHS.at(-1) * 1.05 * ((wavelength.at(-1) - wavelength[0]) / wavelength.length);

function lineFits({ fitBlend, newComponent }, columns, lines) {
  const data = { wavelength: columns['lines-x'], flux: columns['lines-y'], weight: columns['lines-s'].map((s) => 1 / (s * s)) };
  const limits = { narrowest: 1e-3, widest: 1 };
  return lines.map(([centre, depth, width]) => {
    const c = newComponent('dip', centre, 2.3548 * width, depth);
    fitBlend(data, [c], [], limits, [centre - SAMPLES * 0.15 * width - 1e-9, centre + SAMPLES * 0.15 * width - 1e-9]);
    return c;
  });
}

function timed(run, repeats = 5) {
  for (let k = 0; k < 4; k++) run();
  const times = Array.from({ length: repeats }, () => {
    const began = process.cpuUsage().user;
    run();
    return (process.cpuUsage().user - began) / 1000;
  });
  return [times.sort((a, b) => a - b)[repeats >> 1]];
}
