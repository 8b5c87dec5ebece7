import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { readSpectrum } from '@foreveil/shared';
import { expected, expectStatistics, type Good } from './support/corpus.js';
import { cpuSeconds } from './support/cpu.js';
import { concat, header, primary, type Card } from './support/fits-builder.js';

/** A million points by the formula that the expected statistics were computed from, with numpy 1.24.2. */
const N = 1_000_000;
const wavelength = Float64Array.from({ length: N }, (_, i) => 300 + i * 0.0007);
const flux = wavelength.map(
  (w, i) =>
    1e-13 *
    (1 +
      0.3 * Math.sin(i / 50000) -
      0.5 * Math.exp(-0.5 * ((w - 589.158) / 0.02) ** 2) -
      0.4 * Math.exp(-0.5 * ((w - 656.461) / 0.05) ** 2)),
);
const SECONDS = 20;

function bigEndian(columns: readonly Float64Array[]): Uint8Array {
  const bytes = new Uint8Array(Math.ceil((8 * N * columns.length) / 2880) * 2880);
  const view = new DataView(bytes.buffer);
  columns.forEach((column, c) => column.forEach((value, i) => view.setFloat64(8 * (i * columns.length + c), value)));
  return bytes;
}

const once = (make: () => Uint8Array) => {
  let made: Uint8Array | undefined;
  return () => (made ??= make());
};

const table = once(() => {
  const column = (n: number, name: string, unit: string): Card[] => [
    [`TTYPE${n}`, name],
    [`TFORM${n}`, '1D'],
    [`TUNIT${n}`, unit],
  ];
  const perAngstrom = 'erg/s/cm**2/Angstrom';
  const cards: Card[] = [
    ['XTENSION', 'BINTABLE'],
    ['BITPIX', 8],
    ['NAXIS', 2],
    ['NAXIS1', 24],
    ['NAXIS2', N],
    ['PCOUNT', 0],
    ['GCOUNT', 1],
    ['TFIELDS', 3],
    ...column(1, 'WAVE', 'nm'),
    ...column(2, 'FLUX', perAngstrom),
    ...column(3, 'ERR', perAngstrom),
  ];
  return concat(primary(), header(cards), bigEndian([wavelength, flux, new Float64Array(N).fill(1e-15)]));
});

const image = once(() => {
  const axis: Card[] = [
    ['CTYPE1', 'WAVE'],
    ['CUNIT1', 'nm'],
    ['CRVAL1', 300],
    ['CDELT1', 0.0007],
    ['CRPIX1', 1],
  ];
  return concat(header([['SIMPLE', true], ['BITPIX', -64], ['NAXIS', 1], ['NAXIS1', N], ...axis]), bigEndian([flux]));
});

const csv = once(() => {
  const lines = ['wavelength_nm,flux,flux_err'];
  for (let i = 0; i < N; i++) lines.push(`${wavelength[i]!.toFixed(4)},${flux[i]!.toExponential(8)},1.0e-15`);
  return new TextEncoder().encode(lines.join('\n') + '\n');
});

describe('a million points', () => {
  it.each([
    ['generated/large_bintable_1e6.fits', table],
    ['generated/large_image_1e6.fits', image],
    ['generated/large_csv_1e6.csv', csv],
  ] as const)('%s: every point, within 20 s of processor time', (file, make) => {
    const good = expected.good.find((one) => one.file === file) as Good;
    const bytes = make();
    const { seconds, result } = cpuSeconds(() => readSpectrum(bytes, file));
    expect(seconds).toBeLessThan(SECONDS);
    if (!result.ok) throw new Error(result.problem.sentence);
    const { spectrum } = result;
    expect(spectrum.wavelength.length).toBe(good.n_points);
    expect(Math.abs(spectrum.wavelength[0]! / good.first_wavelength_nm - 1)).toBeLessThanOrEqual(good.tol_relative);
    expect(Math.abs(spectrum.wavelength.at(-1)! / good.last_wavelength_nm - 1)).toBeLessThanOrEqual(good.tol_relative);
    expectStatistics(spectrum.flux, good.flux, good.tol_relative);
    if (good.error) expectStatistics(spectrum.sigma!, good.error, good.tol_relative);
  });
});

describe('memory', () => {
  interface Measured {
    file: string;
    seconds: number;
    grownMiB: number;
    outcome: string;
  }
  const folder = mkdtempSync(join(tmpdir(), 'reading-'));
  afterAll(() => rmSync(folder, { recursive: true }));
  const measure = (files: readonly string[]): Measured[] =>
    execFileSync(
      process.execPath,
      [
        '--import',
        'tsx',
        '--conditions=foreveil-source',
        'test/reading/support/measure.ts',
        'test/fixtures/corpus/good/bintable_scalar.fits.gz',
        ...files,
      ],
      { encoding: 'utf8' },
    )
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line) as Measured);

  it('of bad files stays within 64 MiB, each answered within a second', () => {
    const longLine = join(folder, 'long-line.csv');
    writeFileSync(longLine, Buffer.concat([Buffer.from('wavelength,flux\n'), Buffer.alloc(32 * 1024 * 1024, '7')]));
    const files = expected.bad
      .filter((bad) => !bad.generated && !bad.file.endsWith('.json'))
      .map((bad) => `test/fixtures/corpus/${bad.file}`);
    const measured = measure([...files, longLine]);
    expect(measured.length).toBe(files.length + 1);
    for (const one of measured) {
      expect([one.file, one.grownMiB < 64, one.seconds < 1]).toEqual([one.file, true, true]);
      if (/bomb|1gb|long-line/.test(one.file))
        expect(['too_large', 'header_too_long', 'nested_gzip', 'line_too_long']).toContain(one.outcome);
    }
  });

  it('of a million points stays within 600 MiB', () => {
    const files = { 'table.fits': table(), 'table.csv': csv() };
    for (const [name, bytes] of Object.entries(files)) {
      const file = join(folder, name);
      writeFileSync(file, bytes);
      const [one] = measure([file]);
      expect(one).toMatchObject({ outcome: 'read' });
      expect(one!.grownMiB).toBeLessThan(600);
    }
  });
});
