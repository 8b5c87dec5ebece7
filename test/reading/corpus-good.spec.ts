import { readSpectrum, type ReadResult } from '@foreveil/shared';
import { readRaw } from '../../shared/src/reading/read-spectrum.js';
import { bytesOf, expected, expectSound, expectStatistics, sentences, type Good } from './support/corpus.js';

/**
 * Every good file of the corpus: written with astropy 5.2.1 or by hand, each number read back with other code (astropy.io.fits,
 * astropy.wcs, the csv module of Python) before it was stored in expected.json. None is left out; the three files of a
 * million points, which are not stored, are in large.spec.ts.
 */
const files = expected.good.filter((good) => !good.generated);

/**
 * Both programs read the same binary or decimal numbers and do the same few operations in double precision, so no file needs a wider
 * tolerance than this: not float32 columns (exact in double precision), nor scaled integers, nor air wavelengths turned into vacuum. What
 * the list allows in tol_relative is wider.
 */
const SAME = 1e-12;

const relative = (value: number, wanted: number) => Math.abs(value - wanted) / Math.abs(wanted);

function readGood(file: string): Extract<ReadResult, { ok: true }> {
  const result = readSpectrum(bytesOf(file), file);
  if (!result.ok) throw new Error(`${file}: ${result.problem.sentence}`);
  return result;
}

it('holds 60 files', () => expect(files.length).toBe(60));

describe.each(files)('$file ($what)', (good: Good) => {
  it('has the columns of the file, in its order, medium and unit', () => {
    const raw = readRaw(bytesOf(good.file), good.file);
    const { nm } = raw.axis;
    expect(nm.length).toBe(good.n_points);
    expect(relative(nm[0]!, good.first_wavelength_nm)).toBeLessThanOrEqual(SAME);
    expect(relative(nm.at(-1)!, good.last_wavelength_nm)).toBeLessThanOrEqual(SAME);
    expect(relative(Math.min(...nm), good.min_wavelength_nm)).toBeLessThanOrEqual(SAME);
    expect(relative(Math.max(...nm), good.max_wavelength_nm)).toBeLessThanOrEqual(SAME);
    expectStatistics(raw.flux, good.flux, SAME);
    expect(raw.uncertainty !== null).toBe(good.error !== null);
    if (good.error) {
      expect(raw.uncertainty!.kind.value).toBe('sigma');
      expectStatistics(raw.uncertainty!.values, good.error, SAME);
    }
  });

  it('becomes a sound spectrum that says what it is', () => {
    const result = readGood(good.file);
    expectSound(result);
    const { reading, spectrum } = result;
    expect(reading.format.startsWith('fits') ? 'fits' : 'text').toBe(good.format);
    expect(reading.points).toBe(good.n_points);
    expect(relative(reading.firstNm, good.first_wavelength_nm)).toBeLessThanOrEqual(SAME);
    expect(relative(reading.lastNm, good.last_wavelength_nm)).toBeLessThanOrEqual(SAME);
    expectMedium(good, result);
    expectFluxUnit(good, result);
    if (good.file_order === 'ascending' || good.file_order === 'descending') expect(spectrum.wavelength.length).toBe(good.n_points);
    const ends = [spectrum.wavelength[0]!, spectrum.wavelength.at(-1)!];
    const own = good.first_vacuum_nm ? [good.first_vacuum_nm, good.last_vacuum_nm!] : [good.min_wavelength_nm, good.max_wavelength_nm];
    ends.forEach((end, i) => expect(relative(end, own[i]!)).toBeLessThanOrEqual(SAME));
  });
});

/** Files whose medium stands in an UCD or in a remark, which the list allows to be known or not. */
const MEDIUM_BY_UCD_OR_REMARK = ['good/bintable_scalar.fits', 'good/bintable_scalar.fits.gz', 'good/csv_comments.csv'];

function expectMedium(good: Good, { reading }: Extract<ReadResult, { ok: true }>) {
  if (MEDIUM_BY_UCD_OR_REMARK.includes(good.file)) expect([reading.medium.value, reading.medium.how]).toEqual(['vacuum', 'stated']);
  else if (good.medium === 'unknown') expect([reading.medium.value, reading.medium.how]).toEqual(['vacuum', 'not_stated']);
  else expect([reading.medium.value, reading.medium.how]).toEqual([good.medium, 'stated']);
}

/** Kinds of flux that the units of the list stand for. */
const KINDS: Record<string, string> = { 'erg s-1 cm-2 Angstrom-1': 'per_wavelength', Jy: 'per_frequency', adu: 'counts', count: 'counts' };

function expectFluxUnit(good: Good, { reading, spectrum }: Extract<ReadResult, { ok: true }>) {
  // 'counts' of csv_integers is the name of the column
  expect(reading.fluxUnit.value !== '' || good.flux_unit === 'count').toBe(good.flux_unit !== '');
  const wanted = KINDS[good.flux_unit] ?? (/normalised/.test(good.file) ? 'normalised' : 'unknown');
  expect(reading.fluxKind.value).toBe(wanted);
  expect(spectrum.fluxKind).toBe(wanted === 'per_frequency' ? 'per_wavelength' : wanted);
}

describe('what some of the files ask for', () => {
  it('says how many duplicates were found and what was done', () => {
    const result = readGood('good/csv_duplicates.csv');
    expect(result.spectrum.wavelength.length).toBe(1000);
    expect(sentences(result)).toMatch(/4 duplicate wavelengths were found \(first at 403.003 nm in vacuum\); .* merged into their mean/);
  });

  it.each(['good/echelle_orders.fits', 'good/csv_echelle.csv'])(
    '%s: takes each wavelength from the order whose centre is nearer',
    (file) => {
      const { orders } = expected.good.find((good) => good.file === 'good/echelle_orders.fits') as Good & {
        orders: { first_nm: number; last_nm: number }[];
      };
      const { spectrum, reading } = readGood(file);
      const raw = readRaw(bytesOf(file), file);
      expect(spectrum.wavelength.length).toBeLessThan(reading.points);
      const offCentre = (nm: number, order: { first_nm: number; last_nm: number }) =>
        Math.abs(nm - (order.first_nm + order.last_nm) / 2) / ((order.last_nm - order.first_nm) / 2);
      const kept = new Map([...spectrum.wavelength].map((nm, i) => [nm, spectrum.flux[i]!]));
      raw.axis.nm.forEach((nm, i) => {
        const distances = orders.map((order) => offCentre(nm, order));
        const own = distances[Math.floor(i / 400)]!;
        const nearest = Math.min(...distances);
        // wavelengths of the text file are rounded to 1e-4 nm, so at equal distance either may win
        if (own - nearest > 1e-4) expect(kept.get(nm)).not.toBe(raw.flux[i]);
        else if (distances.filter((d) => d - own < 1e-4).length === 1) expect(kept.get(nm)).toBe(raw.flux[i]);
      });
      expect(sentences(readGood(file))).toContain('5 pieces (orders)');
    },
  );

  it('says that two points are too few to fit anything', () => {
    expect(sentences(readGood('good/csv_two_points.csv'))).toContain('only 2 points, too few');
  });

  it('says which unit was assumed where the file gives none', () => {
    for (const [file, unit] of [
      ['good/csv_noheader.csv', 'nm'],
      ['good/aligned.txt', 'nm'],
      ['good/image_linear_plain.fits', 'angstrom'],
      ['good/multi_image_ext.fits', 'angstrom'],
    ] as const) {
      const result = readGood(file);
      expect(result.reading.axisUnit).toMatchObject({ value: unit, how: 'assumed' });
      expect(sentences(result)).toContain('does not give the unit of the wavelength axis');
    }
  });

  it('marks null, blank and missing samples as bad and keeps their place', () => {
    const bad = (file: string) => readGood(file).spectrum.bad.reduce((sum, one) => sum + one, 0);
    expect(bad('good/bintable_scaled_ints.fits')).toBe(3);
    for (const bitpix of [8, 16, 32, 64]) expect(bad(`good/image_bitpix${bitpix}.fits`)).toBe(2);
    expect(bad('good/csv_nan_empty.csv')).toBe(8);
  });

  it('turns flux per frequency into flux per wavelength: F_lambda = F_nu c / lambda^2', () => {
    for (const file of ['good/bintable_wavenumber.fits', 'good/image_freq.fits']) {
      const raw = readRaw(bytesOf(file), file);
      const { spectrum, reading } = readGood(file);
      const last = spectrum.wavelength.length - 1;
      // the axis runs down, so the first sample of the file is the last of the spectrum; 1 Jy = 1e-23 erg s-1 cm-2 Hz-1
      const cm = raw.axis.nm[0]! * 1e-7;
      const perAngstrom = (raw.flux[0]! * 1e-23 * 2.99792458e10) / cm ** 2 / 1e8;
      expect(relative(spectrum.flux[last]!, perAngstrom)).toBeLessThan(1e-12);
      expect(reading.convertedFluxUnit).toBe('erg s-1 cm-2 Angstrom-1');
    }
  });

  it('reads frame, object and date where they are stated', () => {
    const table = readGood('good/bintable_scalar.fits').reading;
    expect(table.frame).toEqual({ value: 'barycentric', how: 'stated', where: 'SPECSYS' });
    expect(table.objectName).toEqual({ value: 'HD 000001 (synthetic)', how: 'stated', where: 'OBJECT' });
    const text = readGood('good/csv_comments.csv').reading;
    expect(text.objectName.value).toBe('HD 000002 (synthetic)');
    expect(text.observedAt.value).toBe('2021-05-04T03:02:01');
    expect(text.frame).toEqual({ value: 'unknown', how: 'not_stated', where: '' });
  });
});
