import { readFileSync } from 'node:fs';
import { airToVacuum, parseDefaultList, vacuumToAir, type AirNm, type VacuumNm } from '@foreveil/shared';
import Papa from 'papaparse';

// The checks that seeds/data/SOURCES.md reports, made again on the files as they are delivered.

type Row = Record<string, string>;
const textOf = (name: string) => readFileSync(new URL(`../../seeds/data/${name}`, import.meta.url), 'utf8');
const rowsOf = (name: string) => Papa.parse<Row>(textOf(name), { header: true, skipEmptyLines: true }).data;
const lines = rowsOf('lines.csv');
const telluric = rowsOf('telluric.csv');
const dibs = rowsOf('dibs.csv');

const filled = (row: Row, ...columns: string[]) => columns.every((column) => row[column] !== '');
const number = (row: Row, column: string) => Number(row[column]);
const J = (text: string) => (text.includes('/') ? Number(text.split('/')[0]) / 2 : Number(text));
/** ids of the rows for which `holds` is false */
const failing = (rows: readonly Row[], holds: (row: Row) => boolean) => rows.filter((row) => !holds(row)).map(({ id }) => id);

test('holds what it says it holds', () => {
  expect(lines).toHaveLength(12_423);
  expect(lines.filter(({ tier }) => tier === '1')).toHaveLength(6_679);
  expect(lines.filter(({ tier }) => tier === '2')).toHaveLength(5_744);
  expect([dibs.length, telluric.length]).toEqual([129, 502]);
  expect(telluric.filter(({ kind }) => kind === 'band')).toHaveLength(21);
});

test('wavelengths are those of the energy levels (Ritz)', () => {
  const rows = lines.filter((row) => filled(row, 'e_low_cm1', 'e_up_cm1'));
  expect(rows).toHaveLength(12_108);
  const fails = failing(rows, (row) => {
    const nm = number(row, 'wavelength_vac_nm');
    const ritz = 1e7 / (number(row, 'e_up_cm1') - number(row, 'e_low_cm1'));
    // wavelengths are printed to 1e-6 nm, energies to 1e-4 per cm: half a digit of each
    return Math.abs(nm - ritz) <= 0.51e-6 + nm ** 2 * 1e-7 * 1e-4;
  });
  expect(fails).toEqual([]);
});

test('vacuum and air wavelengths belong together (Morton 2000, ApJS 130, 403; the IAU standard), and the far ultraviolet has no air', () => {
  const rows = lines.filter((row) => filled(row, 'wavelength_air_nm'));
  expect(rows).toHaveLength(11_368);
  // both are printed to 1e-6 nm at best, diffuse bands to 1e-3 nm
  const near = (row: Row, a: number, b: number) => Math.abs(a - b) <= (row['type'] === 'DIB' || row['species'] === 'DIB' ? 1e-3 : 1e-4);
  const air = (row: Row) => number(row, 'wavelength_air_nm') as AirNm;
  const vacuum = (row: Row) => number(row, 'wavelength_vac_nm') as VacuumNm;
  expect(failing(rows, (row) => near(row, vacuumToAir(vacuum(row)), air(row)))).toEqual([]);
  expect(failing(rows, (row) => near(row, airToVacuum(air(row)), vacuum(row)))).toEqual([]);
  expect(failing(lines, (row) => filled(row, 'wavelength_air_nm') === vacuum(row) >= 200)).toEqual([]);
});

test('log gf, oscillator strength and transition probability say the same', () => {
  const rows = lines.filter((row) => filled(row, 'log_gf', 'f_lu', 'a_ki_s1', 'j_low', 'j_up'));
  expect(rows.length).toBeGreaterThan(11_000);
  const fails = failing(rows, (row) => {
    const [lower, upper] = [2 * J(row['j_low']!) + 1, 2 * J(row['j_up']!) + 1];
    const gf = 10 ** number(row, 'log_gf');
    const angstrom = number(row, 'wavelength_vac_nm') * 10;
    const a = (6.6702e15 * gf) / (upper * angstrom ** 2); // s^-1, wavelength in Å: 8 pi^2 e^2 / (m c), as in SOURCES.md
    // log gf is printed to 0.001: 0.12 % of gf
    return Math.abs(number(row, 'f_lu') / (gf / lower) - 1) < 0.002 && Math.abs(number(row, 'a_ki_s1') / a - 1) < 0.002;
  });
  expect(fails).toEqual([]);
});

test('allowed lines keep the rule for J, and no level pair comes twice', () => {
  const rows = lines.filter((row) => row['type'] === 'allowed' && filled(row, 'j_low', 'j_up'));
  expect(rows).toHaveLength(11_444);
  const fails = failing(rows, (row) => {
    const [lower, upper] = [J(row['j_low']!), J(row['j_up']!)];
    return Math.abs(lower - upper) <= 1 && lower + upper > 0;
  });
  expect(fails).toEqual([]);
  const pairs = lines
    .filter((row) => filled(row, 'e_low_cm1', 'e_up_cm1'))
    .map((r) => [r['species'], r['e_low_cm1'], r['e_up_cm1'], r['j_low'], r['j_up']].join());
  expect(new Set(pairs).size).toBe(pairs.length);
});

test('every row names its source, and every diffuse band is in the list', () => {
  expect(failing([...lines, ...dibs, ...telluric], (row) => row['source']!.length > 3)).toEqual([]);
  const bands = new Set(lines.filter(({ species }) => species === 'DIB').map(({ id }) => id));
  expect(failing(dibs, ({ id }) => bands.has(id))).toEqual([]);
  expect(bands.size).toBe(dibs.length);
});

test('is parsed to lines in order, each with an id of its own, the ids of the file kept', () => {
  const list = parseDefaultList(textOf('lines.csv'), textOf('telluric.csv'));
  expect(list.lines).toHaveLength(lines.length + telluric.filter(({ kind }) => kind === 'line').length);
  const ids = new Set(list.lines.map(({ id }) => id));
  expect(ids.size).toBe(list.lines.length);
  expect(failing(lines, ({ id }) => ids.has(id!))).toEqual([]);
  expect(list.lines.every((line, i) => i === 0 || line.wavelengthNm >= list.lines[i - 1]!.wavelengthNm)).toBe(true);
  expect(
    list.lines.every(
      ({ settings }) => settings.length > 0 && settings.every((s) => ['stellar', 'interstellar', 'nebular', 'telluric'].includes(s)),
    ),
  ).toBe(true);
});
