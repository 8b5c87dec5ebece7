// Speed and memory of the readers, in ratios to what else does the same work in the same minute: copying memory, papaparse, numpy.
import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Papa from 'papaparse';
import { root } from '../paths.mjs';

const median = (x) => [...x].sort((a, b) => a - b)[x.length >> 1];
const REPEATS = 5;

/** Median processor milliseconds after two calls to warm up; the clock of a shared machine would tell of its neighbours. */
function cpuMs(work, repeats = REPEATS) {
  const once = () => {
    const before = process.cpuUsage();
    work();
    const { user, system } = process.cpuUsage(before);
    return (user + system) / 1000;
  };
  once();
  once();
  return median(Array.from({ length: repeats }, once));
}

const wave = (i) => 380 + i * 0.00054;
const flux = (i) => 3e-13 * (1 + 0.1 * Math.sin(i / 50));

function csvBytes(points, exact) {
  const lines = ['wavelength_nm,flux,flux_err'];
  const number = (value, digits) => (exact ? String(value * (1 + 1e-13)) : digits(value));
  for (let i = 0; i < points; i++)
    lines.push(
      `${number(wave(i), (v) => v.toFixed(4))},${number(flux(i), (v) => v.toExponential(6))},${number(3e-15, (v) => v.toExponential(3))}`,
    );
  return new TextEncoder().encode(`${lines.join('\n')}\n`);
}

function fitsBytes(points) {
  const card = (keyword, value) =>
    `${keyword.padEnd(8)}= ${typeof value === 'string' ? `'${value.padEnd(8)}'` : String(value === true ? 'T' : value).padStart(20)}`.padEnd(
      80,
    );
  const block = (cards) => {
    const text = [...cards.map(([keyword, value]) => card(keyword, value)), 'END'.padEnd(80)].join('');
    return text.padEnd(Math.ceil(text.length / 2880) * 2880);
  };
  const column = (n, name, unit) => [
    [`TTYPE${n}`, name],
    [`TFORM${n}`, '1D'],
    [`TUNIT${n}`, unit],
  ];
  const size = [
    ['NAXIS', 2],
    ['NAXIS1', 24],
    ['NAXIS2', points],
    ['PCOUNT', 0],
    ['GCOUNT', 1],
    ['TFIELDS', 3],
  ];
  const perAngstrom = 'erg/s/cm**2/Angstrom';
  const columns = [...column(1, 'WAVE', 'nm'), ...column(2, 'FLUX', perAngstrom), ...column(3, 'ERR', perAngstrom)];
  const head = Buffer.from(
    block([
      ['SIMPLE', true],
      ['BITPIX', 8],
      ['NAXIS', 0],
    ]) + block([['XTENSION', 'BINTABLE'], ['BITPIX', 8], ...size, ...columns]),
    'latin1',
  );
  const bytes = new Uint8Array(head.length + Math.ceil((24 * points) / 2880) * 2880);
  bytes.set(head);
  const view = new DataView(bytes.buffer, head.length);
  for (let i = 0; i < points; i++) [wave(i), flux(i), 3e-15].forEach((value, k) => view.setFloat64(24 * i + 8 * k, value));
  return bytes;
}

/** numpy.loadtxt on the same bytes, milliseconds of processor time; null where there is no numpy. */
function loadtxtMs(file) {
  const code = `import sys,time,numpy as np
t=[]
for k in range(3):
  a=time.process_time(); np.loadtxt(sys.argv[1],delimiter=',',skiprows=1); t.append(time.process_time()-a)
print(sorted(t)[1]*1000)`;
  try {
    return Number(execFileSync('python3', ['-c', code, file], { stdio: ['ignore', 'pipe', 'ignore'] }));
  } catch {
    return null;
  }
}

/** Most memory that a fresh process held beyond what it holds with the file loaded, MiB; NaN where the system does not say (/proc). */
function peakMiB(file) {
  const code = `import('${join(root, 'shared/dist/index.js')}').then(async ({ readSpectrum }) => {
    const { readFileSync } = await import('node:fs');
    // the mark that getrusage gives begins at that of the parent process
    const highest = () => Number(/VmHWM:\\s+(\\d+)/.exec(readFileSync('/proc/self/status', 'utf8'))[1]) / 1024;
    const bytes = readFileSync('${file}');
    const before = highest();
    const result = readSpectrum(bytes, 'x');
    if (!result.ok) throw new Error(result.problem.sentence);
    console.log(highest() - before);
  })`;
  try {
    return Number(execFileSync(process.execPath, ['-e', code], { encoding: 'utf8' }));
  } catch {
    return NaN;
  }
}

export async function reportReading() {
  const { readSpectrum } = await import(join(root, 'shared/dist/index.js'));
  const folder = mkdtempSync(join(tmpdir(), 'bench-reading-'));
  const say = (label, ms, bytes, ratios, peak) =>
    console.log(
      `${label.padEnd(34)} ${ms.toFixed(1).padStart(8)} ms cpu ${((bytes / 1e6 / ms) * 1000).toFixed(0).padStart(6)} MB/s   ${ratios.join(', ')}${Number.isFinite(peak) ? `, ${peak.toFixed(0)} MiB beyond the file` : ''}`,
    );
  try {
    const from = new Uint8Array(24e6);
    const to = new Uint8Array(24e6);
    const copy = cpuMs(() => to.set(from), 15);
    console.log(
      `copying 24 MB: ${copy.toFixed(2)} ms; Node ${process.version}; processor time, median of ${REPEATS}; whole reading, checks and all`,
    );
    for (const points of [100_000, 1_000_000]) {
      const bytes = fitsBytes(points);
      const file = join(folder, 'table.fits');
      writeFileSync(file, bytes);
      const ms = cpuMs(() => readSpectrum(bytes, file));
      say(
        `FITS table, ${points} rows`,
        ms,
        bytes.length,
        [`${(ms / ((copy * bytes.length) / 24e6)).toFixed(1)} x copying it`],
        peakMiB(file),
      );
    }
    for (const [points, exact] of [
      [100_000, false],
      [1_000_000, false],
      [1_000_000, true],
    ]) {
      const file = join(folder, 'table.csv');
      writeFileSync(file, csvBytes(points, exact));
      const bytes = new Uint8Array(readFileSync(file));
      const ms = cpuMs(() => readSpectrum(bytes, file), 3);
      const text = Buffer.from(bytes).toString('latin1');
      const papa = cpuMs(() => Papa.parse(text, { dynamicTyping: true, skipEmptyLines: true }), 1);
      const loadtxt = loadtxtMs(file);
      const ratios = [
        `papaparse ${(papa / ms).toFixed(1)} x as long`,
        loadtxt ? `numpy.loadtxt ${(loadtxt / ms).toFixed(1)} x` : 'no numpy here',
      ];
      say(`CSV, ${points} rows, ${exact ? '16-17' : '4-7'} digits`, ms, bytes.length, ratios, peakMiB(file));
    }
  } finally {
    rmSync(folder, { recursive: true });
  }
}
