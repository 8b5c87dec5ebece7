import { gzipSync } from 'fflate';
import { readSpectrum } from '@foreveil/shared';
import { bytesOf } from './support/corpus.js';
import { binaryTable, concat, header, primary, unit, type Card, type Column } from './support/fits-builder.js';
import { codes, range, read, refusal } from './support/read.js';

/** The FITS Standard 4.0 (2018) rule by rule, as far as a table of one spectrum is concerned; section numbers beside each. */
const N = 30;
const WAVE = range(N, (i) => 500 + i * 0.1);
const FLUX = range(N, (i) => 1 + 0.01 * i);
const nm: Card[] = [['TUNIT', 'nm']];
const wave: Column = { name: 'WAVE', form: 'D', rows: WAVE, cards: nm };
const flux: Column = { name: 'FLUX', form: 'D', rows: FLUX };
const file = (columns: Column[], cards: Card[] = [], primaryCards: Card[] = []) =>
  concat(primary(primaryCards), binaryTable(columns, cards));
const warned = (bytes: Uint8Array) => codes(read(bytes));
const text = (bytes: Uint8Array) => new TextDecoder('latin1').decode(bytes);
const latin = (content: string) => Uint8Array.from(content, (c) => c.charCodeAt(0));

describe('FI-01 blocks, cards, SIMPLE and END (sections 3 and 4.4.1)', () => {
  const whole = file([wave, flux]);
  it('reports a last block that is cut off, in the header as in the data', () => {
    expect(refusal(whole.slice(0, 2880 * 2 - 80)).code).toBe('header_truncated');
    expect(refusal(whole.slice(0, whole.length - 2880)).code).toBe('data_truncated');
    expect(warned(whole.slice(0, whole.length - 1000))).toContain('not_padded');
  });
  it('needs an END card', () => expect(refusal(bytesOf('bad/no_end.fits')).card).toBe('END'));
  it('says so when the file calls itself not standard', () =>
    expect(warned(latin(text(whole).replace('SIMPLE  =                    T', 'SIMPLE  =                    F')))).toContain(
      'not_standard',
    ));
  it('does not take a file for FITS whose first card is another', () =>
    expect(refusal(latin(text(whole).replace('SIMPLE  =                    T', 'BITPIX  =                    8'))).code).toBe('not_fits'));
});

describe('FI-02 which unit is read, and which there are to choose from', () => {
  const image = unit(
    [
      ['XTENSION', 'IMAGE'],
      ['BITPIX', 8],
      ['NAXIS', 1],
      ['NAXIS1', 4],
      ['PCOUNT', 0],
      ['GCOUNT', 1],
      ['EXTNAME', 'NOTES'],
    ],
    new Uint8Array(4),
  );
  const two = concat(primary(), binaryTable([wave, flux], [['EXTNAME', 'BLUE']]), image, binaryTable([wave, flux], [['EXTNAME', 'RED']]));
  it('lists every unit by name and says which hold no spectrum, and why', () => {
    const { reading } = read(two);
    expect(reading.place).toBe('HDU 1 BLUE');
    expect(reading.places.map(({ place, isSpectrum, rows }) => [place, isSpectrum, rows])).toEqual([
      ['HDU 0', false, null],
      ['HDU 1 BLUE', true, N],
      ['HDU 2 NOTES', false, null],
      ['HDU 3 RED', true, N],
    ]);
    expect(reading.places[2]!.why).toContain('no wavelength calibration');
    expect(reading.otherPlaces).toEqual(['HDU 3 RED']);
  });
  it('reads the one that is chosen, and answers a wrong choice with what there is', () => {
    expect(read(two, { place: 'HDU 3 RED' }).reading.otherPlaces).toEqual(['HDU 1 BLUE']);
    const problem = refusal(two, { place: 'HDU 9' });
    expect([problem.code, problem.answers]).toEqual(['place_not_found', ['place']]);
    expect(problem.places?.length).toBe(4);
  });
  it('asks for the columns when none is known, and lists them', () => {
    const problem = refusal(
      file([
        { ...wave, name: 'ALPHA', cards: [] },
        { ...flux, name: 'BETA2' },
      ]),
    );
    expect(problem.answers).toEqual(['wavelengthColumn', 'fluxColumn']);
    expect(problem.columnFacts?.map(({ name, role }) => [name, role])).toEqual([
      ['ALPHA', null],
      ['BETA2', null],
    ]);
  });
});

describe('FI-03 the mandatory cards of a table (section 7.3.1)', () => {
  it('in another order are found, with a warning', () => {
    const swapped = text(file([wave, flux])).replace(/(BITPIX {2}=.{71})(NAXIS {3}=.{71})(?=NAXIS1)/, '$2$1');
    expect(warned(latin(swapped))).toContain('card_order');
    expect(warned(file([wave, flux]))).not.toContain('card_order');
  });
  it('allow 999 columns at most', () => {
    const cards: Card[] = [
      ['NAXIS1', 8],
      ['NAXIS2', 1],
      ['PCOUNT', 0],
      ['GCOUNT', 1],
      ['TFIELDS', 1000],
    ];
    const problem = refusal(concat(primary(), unit([['XTENSION', 'BINTABLE'], ['BITPIX', 8], ['NAXIS', 2], ...cards], new Uint8Array(8))));
    expect([problem.code, problem.card]).toEqual(['card_invalid', 'TFIELDS']);
  });
});

describe('FI-04 the formats of columns (table 18): widths must make up NAXIS1', () => {
  const every: Column[] = [
    wave,
    flux,
    { name: 'A1', form: '3A', rows: FLUX.map(() => ['a', 'b', 'c']) },
    { name: 'X1', form: '11X', rows: FLUX.map(() => [0, 0]) },
    { name: 'K1', form: 'K', rows: FLUX.map(() => 5n) },
    { name: 'C1', form: '2E', rows: FLUX.map(() => [1, 2]) },
  ];
  it('holds for all kinds side by side', () => expect([...read(file(every)).spectrum.flux]).toEqual(FLUX));
  it('refuses a row that is longer than its columns', () =>
    expect(
      refusal(
        latin(
          text(file(every)).replace(/(NAXIS1 {2}= +)(\d+)/, (_, key: string, n: string) => key + String(Number(n) + 1).padStart(n.length)),
        ),
      ).code,
    ).toBe('row_width'));
});

describe('FI-05 vector cells', () => {
  const vectors: Column[] = [
    { ...wave, form: `${N}D`, rows: [WAVE] },
    { ...flux, form: `${N}D`, rows: [FLUX] },
  ];
  it('of one row and scalars of n rows are the same spectrum', () =>
    expect(read(file(vectors)).spectrum).toEqual({ ...read(file([wave, flux])).spectrum }));
  it('of different lengths are refused', () =>
    expect(refusal(file([vectors[0]!, { ...flux, form: `${N - 1}D`, rows: [FLUX.slice(1)] }])).code).toBe('lengths_differ'));
  it('that NELEM contradicts are read with a warning', () => {
    expect(warned(file(vectors, [['NELEM', N]]))).toEqual([]);
    expect(warned(file(vectors, [['NELEM', N + 1]]))).toEqual(['length_differs_from_card']);
  });
});

describe.each(['P', 'Q'])('FI-06 variable-length arrays of type %s (section 7.3.5)', (type) => {
  const heap: Column[] = [
    { ...wave, form: `1${type}D(${N})`, rows: [WAVE] },
    {
      name: 'FLUX',
      form: `${type}I(${N})`,
      rows: [range(N, (i) => (i === 3 ? -1 : i))],
      cards: [
        ['TNULL', -1],
        ['TSCAL', 0.5],
        ['TZERO', 10],
      ],
    },
  ];
  it('are scaled and nulled as cells are', () => {
    const { spectrum } = read(file(heap));
    expect([spectrum.flux[2], spectrum.flux[3], spectrum.bad[3]]).toEqual([11, NaN, 1]);
  });
  it('may not lie outside the heap, nor have more than one descriptor', () => {
    expect(refusal(file(heap, [['THEAP', 99_999]])).code).toBe('heap_outside');
    expect(refusal(latin(text(file(heap)).replace(`1${type}D(`, `2${type}D(`))).code).toBe('bad_format');
  });
});

it('FI-07 a null flux (TNULL of the stored integer, NaN) is a masked pixel, never zero (section 7.3.2)', () => {
  const cards: Card[] = [
    ['TNULL', -99],
    ['TSCAL', 2],
  ];
  const { spectrum } = read(file([wave, { name: 'FLUX', form: 'J', rows: range(N, (i) => (i === 5 ? -99 : i - 198)), cards }]));
  expect([spectrum.flux[5], spectrum.bad[5]]).toEqual([NaN, 1]);
  // scaled to -198, stored -99 would be the null: the scaled value is none
  expect([spectrum.flux[0], spectrum.bad[0]]).toEqual([-396, 0]);
});

describe('FI-08 scaling and unsigned integers (section 5.2.5)', () => {
  it.each([
    ['I', 32768, 65535],
    ['J', 2147483648, 4294967295],
  ] as const)('of type %s by TZERO %d', (form, zero, top) => {
    const rows = range(N, (i) => (i === 0 ? top - zero : i - zero));
    const { spectrum } = read(file([wave, { name: 'FLUX', form, rows, cards: [['TZERO', zero]] }]));
    expect([spectrum.flux[0], spectrum.flux[1]]).toEqual([top, 1]);
  });
  it('of type K stay apart below 2^53, where a double of the stored value would not', () => {
    const rows = range(N, (i) => BigInt(i) - 2n ** 63n);
    const { spectrum } = read(file([wave, { name: 'FLUX', form: 'K', rows, cards: [['TZERO', 2n ** 63n]] }]));
    expect([...spectrum.flux]).toEqual(range(N, (i) => i));
  });
});

describe('FI-09 units (section 4.3)', () => {
  it('that are not known are kept as written: the axis is asked for, the flux is of unknown kind', () => {
    const strange: Column = { ...flux, cards: [['TUNIT', 'furlong']] };
    const { reading } = read(file([wave, strange]));
    expect([reading.fluxUnit.value, reading.fluxKind.value]).toEqual(['furlong', 'unknown']);
    const problem = refusal(file([{ ...wave, cards: [['TUNIT', 'furlong']] }, flux]));
    expect([problem.code, problem.answers]).toEqual(['unknown_axis_unit', ['axisUnit', 'wavelengthColumn']]);
    expect(problem.sentence).toContain('furlong');
  });
  it('that a person corrects are recorded beside what the file said', () => {
    const strange: Column = { ...flux, cards: [['TUNIT', 'furlong']] };
    const { reading } = read(file([wave, strange]), { fluxUnit: 'erg/s/cm2/Angstrom' });
    expect(reading.fluxUnit).toEqual({
      ...{ value: 'erg/s/cm2/Angstrom', how: 'corrected', where: 'correction' },
      said: { value: 'furlong', how: 'stated', where: 'TUNIT2' },
    });
    expect(reading.fluxKind.value).toBe('per_wavelength');
  });
});

it('FI-10 a string over three CONTINUE cards with a quote in it is joined (section 4.2.1.2)', () => {
  const cards = ["OBJECT  = 'It''s a &'", "CONTINUE  'long &'", "CONTINUE  'name' / of a star"];
  expect(read(file([wave, flux], cards)).reading.objectName.value).toBe("It's a long name");
});

describe('FI-11 CHECKSUM and DATASUM (section 4.4.2.7, appendix J)', () => {
  // written by astropy 5.2.1
  const whole = bytesOf('good/checksum.fits');
  it('that are right are said to be verified, those that are not there absent', () => {
    expect(read(whole).reading.checksums.map(({ verdict }) => verdict)).toContain('verified');
    expect(read(file([wave, flux])).reading.checksums).toEqual([
      { place: 'HDU 0', verdict: 'absent' },
      { place: 'HDU 1', verdict: 'absent' },
    ]);
  });
  it('that are wrong are a warning and a mark, not a refusal', () => {
    const { reading } = read(bytesOf('bad/checksum_wrong.fits'));
    expect(reading.checksums.map(({ verdict }) => verdict)).toContain('mismatch');
    expect(reading.warnings.map(({ code }) => code)).toContain('checksum_wrong');
  });
});

it('FI-12 exponents with D are numbers, lower-case keywords are not read, HIERARCH is kept, the last of duplicates wins (section 4)', () => {
  const cards = [
    'EXPTIME =             1.5D3',
    "object  = 'lower'",
    "HIERARCH ESO TEL NAME = 'big one'",
    "OBJECT  = 'first'",
    "OBJECT  = 'last'",
  ];
  const result = read(file([wave, flux], cards));
  expect(result.reading.exposureS.value).toBe(1500);
  expect(result.reading.objectName.value).toBe('last');
  expect(result.reading.header).toEqual(expect.arrayContaining(cards));
  expect(codes(result)).toEqual(expect.arrayContaining(['duplicate_cards', 'illegal_cards']));
});

describe('FI-13 what is packed', () => {
  it('with gzip is read, up to a size', () => {
    expect(read(gzipSync(file([wave, flux]))).spectrum.flux.length).toBe(N);
    const bomb = readSpectrum(gzipSync(new Uint8Array(9 * 2 ** 20)), 'bomb.fits.gz');
    expect(bomb.ok ? '' : bomb.problem.code).toBe('too_large');
  });
  it.each(['ZTABLE', 'ZIMAGE'])('by the tile convention, %s, is named and refused (section 10)', (card) => {
    const problem = refusal(file([wave, flux], [[card, true]]));
    expect([problem.code, /compressed/.test(problem.sentence), problem.answers]).toEqual(['compressed_fits', true, undefined]);
  });
});

it('FI-14 every card of the primary and of the table header is kept verbatim', () => {
  const { reading } = read(file([wave, flux], [['MOOD', 'calm'], 'COMMENT  kept as it is'], [['TELESCOP', 'big']]));
  const cards = text(concat(header([['MOOD', 'calm']])))
    .slice(0, 80)
    .trimEnd();
  expect(reading.header).toEqual(expect.arrayContaining([cards, 'COMMENT  kept as it is', "TELESCOP= 'big     '", "TTYPE1  = 'WAVE    '"]));
});
