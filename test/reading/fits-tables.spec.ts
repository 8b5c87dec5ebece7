import { binaryTable, concat, header, primary, unit, type Card, type Column } from './support/fits-builder.js';
import { bytesOf } from './support/corpus.js';
import { codes, range, read, refusal } from './support/read.js';

const N = 30;
const WAVE = range(N, (i) => 500 + i * 0.1);
const FLUX = range(N, (i) => 1 + 0.01 * i);
const nm: Card[] = [['TUNIT', 'nm']];
const wave: Column = { name: 'WAVE', form: 'D', rows: WAVE, cards: nm };
const flux: Column = { name: 'FLUX', form: 'D', rows: FLUX };
const file = (columns: Column[], cards: Card[] = [], primaryCards: Card[] = []) =>
  concat(primary(primaryCards), binaryTable(columns, cards));

describe('cells of a binary table (FITS Standard 4.0 section 7.3)', () => {
  it('reads the same from n rows of scalars and from one row of vectors', () => {
    const scalars = read(file([wave, flux]));
    const vectors = read(
      file([
        { ...wave, form: `${N}D`, rows: [WAVE] },
        { ...flux, form: `${N}D`, rows: [FLUX] },
      ]),
    );
    expect(vectors.spectrum).toEqual(scalars.spectrum);
    expect([...scalars.spectrum.wavelength]).toEqual(WAVE);
  });

  it.each(['P', 'Q'])('reads variable-length arrays with descriptors of type %s', (type) => {
    const { spectrum } = read(
      file([
        { ...wave, form: `${type}D(${N})`, rows: [WAVE] },
        { ...flux, form: `${type}E(${N})`, rows: [FLUX] },
      ]),
    );
    expect([...spectrum.wavelength]).toEqual(WAVE);
    expect([...spectrum.flux]).toEqual(FLUX.map(Math.fround));
  });

  it('keeps unsigned 64-bit integers apart that a double of the stored value would make equal', () => {
    const counts = range(N, (i) => 2 ** 40 + i);
    const stored = counts.map((count) => BigInt(count) - 2n ** 63n);
    const { spectrum } = read(
      file([
        wave,
        {
          name: 'COUNTS',
          form: 'K',
          rows: stored,
          cards: [
            ['TZERO', 2n ** 63n],
            ['TSCAL', 1],
          ],
        },
      ]),
    );
    expect([...spectrum.flux]).toEqual(counts);
  });

  it('compares TNULL with the stored value, before scaling', () => {
    const rows = range(N, (i) => (i === 3 ? -99 : i === 4 ? -198 : i + 1));
    const { spectrum } = read(
      file([
        wave,
        {
          name: 'FLUX',
          form: 'I',
          rows,
          cards: [
            ['TNULL', -99],
            ['TSCAL', 0.5],
          ],
        },
      ]),
    );
    expect(spectrum.flux[3]).toBeNaN();
    // -198 * 0.5 is -99 only after scaling
    expect(spectrum.flux[4]).toBe(-99);
    expect([...spectrum.bad.slice(2, 6)]).toEqual([0, 1, 0, 0]);
  });

  it('takes quality 1 and more, logical T and set bits as bad', () => {
    const bad = [5, 9];
    const marks = (yes: number | boolean, no: number | boolean) => WAVE.map((_, i) => (bad.includes(i) ? yes : no));
    const variants: Column[] = [
      { name: 'QUAL', form: 'I', rows: marks(4, 0) },
      { name: 'MASK', form: 'L', rows: marks(true, false) },
      { name: 'DQ', form: '3X', rows: marks(0b01000000, 0) },
    ];
    for (const column of variants) {
      const { spectrum, reading } = read(file([wave, flux, column]));
      expect([...spectrum.bad].flatMap((one, i) => (one ? [i] : []))).toEqual(bad);
      expect(reading.maskColumn).toBe(column.name);
    }
  });

  it('does not believe a mask that takes out most of the spectrum, and says so', () => {
    const result = read(file([wave, flux, { name: 'DQ', form: 'I', rows: WAVE.map(() => 16) }]));
    expect(result.spectrum.bad.includes(1)).toBe(false);
    expect(result.reading.maskColumn).toBeNull();
    expect(codes(result)).toContain('mask_not_used');
  });

  it('lets SDQFLAGS name the bits that matter', () => {
    const dq: Column = { name: 'DQ', form: 'I', rows: WAVE.map((_, i) => (i === 7 ? 8 : 16)) };
    const { spectrum } = read(file([wave, flux, dq], [['SDQFLAGS', 8]]));
    expect([...spectrum.bad].flatMap((one, i) => (one ? [i] : []))).toEqual([7]);
  });
});

describe('uncertainties', () => {
  const sigma = range(N, (i) => 0.01 + 0.001 * i);
  it.each([
    ['ERR', 'sigma', sigma],
    ['VARIANCE', 'variance', sigma.map((s) => s ** 2)],
    ['ivar', 'inverse_variance', sigma.map((s) => 1 / s ** 2)],
  ] as const)('reads %s as %s', (name, kind, rows) => {
    const { spectrum, reading } = read(file([wave, flux, { name, form: 'D', rows }]));
    expect(reading.uncertaintyKind).toEqual({ value: kind, how: 'stated', where: 'column name' });
    spectrum.sigma!.forEach((value, i) => expect(value).toBeCloseTo(sigma[i]!, 14));
  });

  it('marks zero inverse variance and a sigma that is not positive as bad, with sigma unknown', () => {
    const { spectrum } = read(file([wave, flux, { name: 'ivar', form: 'D', rows: sigma.map((s, i) => (i === 2 ? 0 : 1 / s ** 2)) }]));
    expect([spectrum.bad[2], spectrum.sigma![2]]).toEqual([1, NaN]);
    const negative = read(file([wave, flux, { name: 'ERR', form: 'D', rows: sigma.map((s, i) => (i === 2 ? -s : s)) }]));
    expect([negative.spectrum.bad[2], negative.spectrum.bad[3]]).toEqual([1, 0]);
  });

  it('counts an error column of zeros as no error column', () => {
    const result = read(file([wave, flux, { name: 'ERR', form: 'D', rows: WAVE.map(() => 0) }]));
    expect(result.spectrum.sigma).toBeNull();
    expect(result.reading.uncertaintyColumn).toBeNull();
    expect(codes(result)).toContain('no_uncertainty');
  });

  it('takes the kind that a person says it is', () => {
    const { spectrum, reading } = read(file([wave, flux, { name: 'ERR', form: 'D', rows: WAVE.map(() => 4) }]), {
      uncertaintyKind: 'variance',
    });
    expect(spectrum.sigma![0]).toBe(2);
    expect(reading.uncertaintyKind.how).toBe('corrected');
    expect(
      read(file([wave, flux, { name: 'ERR', form: 'D', rows: WAVE.map(() => 4) }]), { uncertaintyColumn: null }).spectrum.sigma,
    ).toBeNull();
  });
});

describe('which column is what', () => {
  const utyped = (prefix: (tail: string) => string): Column[] => [
    { name: 'B', form: 'D', rows: FLUX, cards: [['TUTYP', prefix('Data.FluxAxis.Value')]] },
    { name: 'C', form: 'D', rows: FLUX.map(() => 0.1), cards: [['TUTYP', prefix('Data.FluxAxis.Accuracy.StatError')]] },
    { name: 'A', form: 'D', rows: WAVE, cards: [...nm, ['TUTYP', prefix('Data.SpectralAxis.Value')]] },
    { name: 'FLUX', form: 'D', rows: WAVE.map(() => 7) },
  ];
  it.each([
    ['Spectrum.Data (model 1.x)', (tail: string) => `Spectrum.${tail}`],
    ['spec:Data', (tail: string) => `spec:${tail}`],
    ['lower case', (tail: string) => `spectrum.${tail}`.toLowerCase()],
  ])('goes by utype before names: %s (IVOA Spectrum Data Model 1.2)', (_, prefix) => {
    const { spectrum, reading } = read(file(utyped(prefix)));
    expect([reading.wavelengthColumn, reading.fluxColumn, reading.uncertaintyColumn]).toEqual(['A', 'B', 'C']);
    expect([...spectrum.flux]).toEqual(FLUX);
  });

  it('goes by UCD before names, and by meta.main among fluxes', () => {
    const columns: Column[] = [
      { name: 'FLUX', form: 'D', rows: WAVE.map(() => 7), cards: [['TUCD', 'phot.flux.density;em.wl']] },
      { name: 'FLUX_NORM', form: 'D', rows: FLUX, cards: [['TUCD', 'phot.flux.density;em.wl;arith.ratio;meta.main']] },
      { name: 'X', form: 'D', rows: WAVE, cards: [...nm, ['TUCD', 'em.wl;obs.atmos']] },
      { name: 'E', form: 'D', rows: FLUX.map(() => 0.1), cards: [['TUCD', 'stat.error;phot.flux.density;em.wl']] },
    ];
    const { reading } = read(file(columns));
    expect([reading.wavelengthColumn, reading.fluxColumn, reading.uncertaintyColumn]).toEqual(['X', 'FLUX_NORM', 'E']);
    expect(reading.fluxKind.value).toBe('normalised');
    expect(reading.medium).toEqual({ value: 'air', how: 'stated', where: 'TUCD3' });
  });

  it('reads the survey layout: loglam, flux, ivar with masks of remarks beside it', () => {
    const loglam = range(N, (i) => 3.6 + 1e-4 * i);
    const columns: Column[] = [
      { name: 'flux', form: 'E', rows: FLUX },
      { name: 'loglam', form: 'D', rows: loglam },
      { name: 'ivar', form: 'E', rows: FLUX.map(() => 100) },
      { name: 'and_mask', form: 'J', rows: FLUX.map((_, i) => (i < 5 ? 8388608 : 0)) },
      { name: 'sky', form: 'E', rows: FLUX },
      { name: 'model', form: 'E', rows: FLUX },
    ];
    const { spectrum, reading } = read(
      file(
        columns,
        [],
        [
          ['VACUUM', true],
          ['BUNIT', '1E-17 erg/cm^2/s/Ang'],
        ],
      ),
    );
    expect(spectrum.wavelength[0]).toBeCloseTo(10 ** 3.6 / 10, 9);
    expect(spectrum.sigma![0]).toBeCloseTo(0.1, 12);
    expect(spectrum.bad.includes(1)).toBe(false);
    expect(reading.medium).toEqual({ value: 'vacuum', how: 'stated', where: 'VACUUM' });
    expect([reading.axisUnit.value, reading.axisUnit.how, reading.fluxKind.value]).toEqual(['angstrom', 'assumed', 'per_wavelength']);
  });

  it('reads one row a segment with vectors and counts, as ultraviolet archives write it, and joins the segments', () => {
    const low = range(N, (i) => 1300 + i);
    const high = range(N, (i) => 1100 + i);
    const columns: Column[] = [
      {
        name: 'SEGMENT',
        form: '4A',
        rows: [
          ['F', 'U', 'V', 'A'],
          ['F', 'U', 'V', 'B'],
        ],
      },
      { name: 'WAVELENGTH', form: `${N}D`, rows: [low, high], cards: [['TUNIT', 'ANGSTROM']] },
      { name: 'NET', form: `${N}E`, rows: [FLUX, FLUX] },
      { name: 'FLUX', form: `${N}E`, rows: [FLUX, FLUX], cards: [['TUNIT', 'erg /s /cm**2 /angstrom']] },
      { name: 'ERROR', form: `${N}E`, rows: [FLUX, FLUX] },
    ];
    const { spectrum, reading } = read(file(columns));
    expect(spectrum.wavelength.length).toBe(2 * N);
    expect([spectrum.wavelength[0], spectrum.wavelength.at(-1)]).toEqual([110, 132.9]);
    expect([reading.fluxColumn, reading.uncertaintyColumn, reading.fluxKind.value]).toEqual(['FLUX', 'ERROR', 'per_wavelength']);
    expect(reading.medium).toMatchObject({ value: 'vacuum', how: 'assumed' });
  });

  it('takes the columns a person names, and refuses one that is not there', () => {
    const columns = [wave, flux, { name: 'OTHER', form: 'D', rows: FLUX.map((f) => 2 * f) }];
    expect(read(file(columns), { fluxColumn: 'OTHER' }).spectrum.flux[0]).toBe(2);
    expect(refusal(file(columns), { fluxColumn: 'NONE' })).toMatchObject({ code: 'column_not_found', column: 'NONE' });
  });

  it('refuses a table whose columns it does not know and lists them', () => {
    const problem = refusal(
      file([
        { name: 'TEMPERATURE', form: 'D', rows: WAVE },
        { name: 'PRESSURE', form: 'D', rows: FLUX },
      ]),
    );
    expect(problem.code).toBe('no_spectrum');
    expect(problem.sentence).toContain('TEMPERATURE, PRESSURE');
  });
});

describe('medium, frame and other facts', () => {
  it('reports statements that contradict each other, as the difference is about 80 km/s', () => {
    const result = read(file([{ ...wave, cards: [...nm, ['TUCD', 'em.wl;obs.atmos']] }, flux], [['VACUUM', true]]));
    expect(result.reading.medium.value).toBe('air');
    expect(codes(result)).toContain('medium_contradiction');
    // Morton 2000: 500 nm in air is 500.1394 nm in vacuum
    expect(result.spectrum.wavelength[0]).toBeCloseTo(500.13948, 4);
  });

  it('lets a person correct medium, frame, unit, flux kind and resolving power, and says so', () => {
    const corrections = { medium: 'air', frame: 'heliocentric', axisUnit: 'micron', fluxKind: 'normalised', resolvingPower: 1234 } as const;
    const { reading, spectrum } = read(file([wave, flux]), corrections);
    expect([reading.medium, reading.frame, reading.fluxKind, reading.resolvingPower].map((fact) => fact.how)).toEqual(
      Array(4).fill('corrected'),
    );
    expect(reading.axisUnit).toEqual({
      ...{ value: 'micron', how: 'corrected', where: 'correction' },
      said: { value: 'nm', how: 'stated', where: 'TUNIT1' },
    });
    expect(reading.firstNm).toBe(500_000);
    expect([spectrum.frame, spectrum.fluxKind, spectrum.resolvingPower]).toEqual(['heliocentric', 'normalised', 1234]);
  });

  it.each([
    ['TOPOCENT', 'topocentric'],
    ['GEOCENTR', 'geocentric'],
    ['BARYCENT', 'barycentric'],
    ['HELIOCEN', 'heliocentric'],
    ['LSRK', 'lsrk'],
    ['LSRD', 'lsrd'],
    ['SOURCE', 'source'],
  ])('reads SPECSYS %s (FITS Standard 4.0 table 27)', (code, frame) => {
    expect(read(file([wave, flux], [['SPECSYS', code]])).reading.frame).toEqual({ value: frame, how: 'stated', where: 'SPECSYS' });
  });

  it('leaves a frame unknown that it does not know, and says so', () => {
    const result = read(file([wave, flux], [['SPECSYS', 'CMBDIPOL']]));
    expect(result.reading.frame).toEqual({ value: 'unknown', how: 'not_stated', where: '' });
    expect(codes(result)).toContain('frame_unknown');
  });

  it('reads date, place on the sky, instrument and resolving power from the primary header', () => {
    const facts: Card[] = [
      ['DATE-OBS', '2026-03-04T05:06:07.890'],
      ['RA', 10.5],
      ['DEC', -20.25],
      ['INSTRUME', 'GIRAFE'],
      ['TELESCOP', 'SIM-2'],
      ['SPEC_RES', 48000],
    ];
    const { reading } = read(file([wave, flux], [], facts));
    expect(reading).toMatchObject({ raDeg: 10.5, decDeg: -20.25, instrument: 'GIRAFE', telescope: 'SIM-2' });
    expect(reading.observedAt).toEqual({ value: '2026-03-04T05:06:07.890', how: 'stated', where: 'DATE-OBS' });
    expect(reading.resolvingPower).toEqual({ value: 48000, how: 'stated', where: 'SPEC_RES' });
  });

  it('turns MJD 51544.5 into noon of 2000-01-01, and 04/03/99 into 1999-03-04', () => {
    expect(read(file([wave, flux], [['MJD-OBS', 51544.5]])).reading.observedAt.value).toBe('2000-01-01T12:00:00.000');
    expect(read(file([wave, flux], [['DATE-OBS', '04/03/99']])).reading.observedAt.value).toBe('1999-03-04');
  });

  it('precesses coordinates of another equinox, and leaves those of another system alone', () => {
    expect(
      read(
        file(
          [wave, flux],
          [
            ['RA', '01:02:03.0'],
            ['DEC', '-04:05:06.0'],
          ],
        ),
      ).reading,
    ).toMatchObject({ raDeg: 15.5125, decDeg: -4.085 });
    expect(
      read(
        file(
          [wave, flux],
          [
            ['RA', 10],
            ['DEC', 20],
            ['EQUINOX', 1950],
          ],
        ),
      ).reading,
      // 50 years of 3.0735 s + 1.3362 s sin a tan d and of 20.043 arcsec cos a: textbook annual precession, from memory
    ).toMatchObject({ raDeg: expect.closeTo(10.658, 2) as number, decDeg: expect.closeTo(20.274, 2) as number });
    const apparent: Card[] = [
      ['RA', 10],
      ['DEC', 20],
      ['RADESYS', 'GAPPT'],
    ] as const;
    expect(read(file([wave, flux], apparent)).reading).toMatchObject({ raDeg: null, decDeg: null });
  });
});

describe('parts of a file', () => {
  const second = binaryTable([wave, { ...flux, rows: FLUX.map((f) => 3 * f) }], [['EXTNAME', 'SECOND']]);
  const both = concat(primary(), binaryTable([wave, flux], [['EXTNAME', 'FIRST']]), second);

  it('reads the first spectrum, lists the others and reads the one that is asked for', () => {
    const first = read(both);
    expect([first.reading.place, first.reading.otherPlaces]).toEqual(['HDU 1 FIRST', ['HDU 2 SECOND']]);
    const other = read(both, { place: 'HDU 2 SECOND' });
    expect(other.spectrum.flux[0]).toBe(3);
    expect([other.reading.place, other.reading.otherPlaces]).toEqual(['HDU 2 SECOND', ['HDU 1 FIRST']]);
    expect(refusal(both, { place: 'HDU 9' }).code).toBe('place_not_found');
  });

  it('takes rows of the same range for spectra of their own', () => {
    const rows = [FLUX, FLUX.map((f) => 2 * f), FLUX.map((f) => 3 * f)];
    const bytes = file(
      [
        { ...wave, form: `${N}D`, rows: [WAVE, WAVE, WAVE] },
        { ...flux, form: `${N}D`, rows },
      ],
      [['EXTNAME', 'FIBRES']],
    );
    const first = read(bytes);
    expect([first.reading.place, first.reading.otherPlaces]).toEqual(['HDU 1 FIBRES row 1', ['HDU 1 FIBRES row 2', 'HDU 1 FIBRES row 3']]);
    expect(read(bytes, { place: 'HDU 1 FIBRES row 3' }).spectrum.flux[0]).toBe(3);
    expect(refusal(bytes, { place: 'HDU 1 FIBRES row 9' }).code).toBe('place_not_found');
  });

  it('reads a whole spectrum in front of a damaged part, with a warning', () => {
    const result = read(both.subarray(0, both.length - 2880));
    expect(result.reading.place).toBe('HDU 1 FIRST');
    expect(codes(result)).toContain('file_damaged');
  });

  it('says that a compressed table is not supported', () => {
    expect(refusal(file([wave, flux], [['ZTABLE', true]])).code).toBe('compressed_fits');
  });

  it('notes bytes after the end and a last block that is not full', () => {
    const whole = file([wave, flux]);
    expect(codes(read(concat(whole, new Uint8Array(100).fill(65))))).toContain('trailing_bytes');
    expect(codes(read(concat(whole, new Uint8Array(2880))))).not.toContain('trailing_bytes');
    expect(codes(read(whole.subarray(0, whole.length - 10)))).toContain('not_padded');
  });
});

describe('checksums (FITS Standard 4.0 appendix J)', () => {
  // the sums in the file were written by astropy 5.2.1 and confirmed by fitsverify 4.20
  it('are right in a whole file, and one changed bit in data or header is noticed', () => {
    const bytes = bytesOf('good/checksum.fits');
    expect(codes(read(bytes))).toEqual([]);
    const flipped = (at: number) => {
      const copy = bytes.slice();
      copy[at]! ^= 1;
      return copy;
    };
    const sentence = (at: number) => read(flipped(at)).reading.warnings.find((warning) => warning.code === 'checksum_wrong')?.sentence;
    // the last byte of a flux; the comment of a card in the table's header; the same in the primary header
    expect(sentence(5760 + 2880 + 15)).toContain('DATASUM and CHECKSUM of HDU 1');
    expect(sentence(2880 + 79)).toContain('CHECKSUM of HDU 1');
    expect(sentence(79)).toContain('CHECKSUM of HDU 0');
  });
});

describe('header cards (FITS Standard 4.0 section 4)', () => {
  const withCards = (...cards: Card[]) => read(file([wave, flux], cards));

  it('joins long strings over CONTINUE cards, with a quote in them', () => {
    const cards = ["OBJECT  = 'a long name &'", "CONTINUE  'of ''many'' words &'", "CONTINUE  'in three cards' / comment"];
    expect(withCards(...cards).reading.objectName.value).toBe("a long name of 'many' words in three cards");
  });

  it('reads exponents written with D, and keeps HIERARCH cards verbatim', () => {
    const { reading } = withCards('SPEC_RP =               4.8D04 / D exponent', 'HIERARCH ESO DET DIT = 1.5 / integration');
    expect(reading.resolvingPower.value).toBe(48000);
    expect(reading.header).toContain('HIERARCH ESO DET DIT = 1.5 / integration');
  });

  it('takes the last of duplicate keywords and warns', () => {
    const result = withCards(['OBJECT', 'first'], ['OBJECT', 'last']);
    expect(result.reading.objectName.value).toBe('last');
    expect(codes(result)).toContain('duplicate_cards');
  });

  it('ignores lower-case keywords and warns', () => {
    const result = withCards("object  = 'lower case'");
    expect(result.reading.objectName.value).toBeNull();
    expect(codes(result)).toContain('illegal_cards');
  });

  it('says which card is impossible', () => {
    const table = (cards: Card[]) =>
      concat(primary(), unit([['XTENSION', 'BINTABLE'], ['BITPIX', 8], ['NAXIS', 2], ...cards], new Uint8Array(16)));
    expect(
      refusal(
        table([
          ['NAXIS1', 16],
          ['NAXIS2', 1],
          ['PCOUNT', 0],
          ['GCOUNT', 1],
          ['TFIELDS', 1],
          ['TFORM1', '9D'],
        ]),
      ),
    ).toMatchObject({ code: 'row_width', card: 'NAXIS1' });
    expect(
      refusal(
        table([
          ['NAXIS1', 16],
          ['NAXIS2', 1.5],
        ]),
      ),
    ).toMatchObject({ code: 'card_invalid', card: 'NAXIS2' });
    expect(refusal(table([['NAXIS1', 16]]))).toMatchObject({ code: 'card_missing', card: 'NAXIS2' });
    expect(
      refusal(
        concat(
          header([
            ['SIMPLE', true],
            ['BITPIX', 8],
            ['NAXIS', 1000],
          ]),
        ),
      ),
    ).toMatchObject({ card: 'NAXIS' });
  });
});
