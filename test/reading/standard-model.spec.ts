import { bytesOf as corpusFile } from './support/corpus.js';
import { binaryTable, concat, primary, type Card, type Column } from './support/fits-builder.js';
import { codes, range, read, refusal } from './support/read.js';

/** IVOA Spectrum Data Model 1.2, the ESO Science Data Products standard 6, other open tables, times and places: rule by rule. */
const N = 30;
const WAVE = range(N, (i) => 500 + i * 0.1);
const FLUX = range(N, (i) => 1 + 0.01 * i);
const column = (name: string, rows: readonly number[], ...cards: Card[]): Column => ({ name, form: 'D', rows, cards });
const nm: Card = ['TUNIT', 'nm'];
const wave = column('WAVE', WAVE, nm);
const flux = column('FLUX', FLUX);
const file = (columns: Column[], cards: Card[] = [], primaryCards: Card[] = []) =>
  concat(primary(primaryCards), binaryTable(columns, cards));

describe('the IVOA Spectrum model', () => {
  const columns = (utype: (tail: string) => string): Column[] => [
    column(
      'SKY',
      WAVE.map(() => 7),
    ),
    column('ONE', FLUX, ['TUTYP', utype('Data.FluxAxis.Value')]),
    column(
      'TWO',
      FLUX.map(() => 0.1),
      ['TUTYP', utype('Data.FluxAxis.Accuracy.StatError')],
    ),
    column('THREE', WAVE, nm, ['TUTYP', utype('Data.SpectralAxis.Value')]),
    column(
      'FOUR',
      FLUX.map((_, i) => (i === 4 ? 2 : 0)),
      ['TUTYP', utype('Data.FluxAxis.Quality')],
    ),
  ];
  const spellings = [
    (t: string) => `Spectrum.${t}`,
    (t: string) => `spec:${t}`,
    (t: string) => `SPECTRUM.${t}`.toUpperCase(),
    (t: string) => `ssa:Spectrum.${t}`.toLowerCase(),
  ];
  it('SD-01 utypes of any prefix and case read the same', () => {
    const all = spellings.map((spelling) => read(file(columns(spelling))).spectrum);
    for (const spectrum of all) expect(spectrum).toEqual(all[0]);
    expect([...all[0]!.flux]).toEqual(FLUX);
  });
  it('SD-02 order and names of columns do not matter, as utypes go before UCDs and UCDs before names', () => {
    const straight = columns(spellings[0]!);
    const shuffled = [3, 1, 4, 0, 2].map((i) => ({ ...straight[i]!, name: ['ERR', 'WAVE', 'QUAL', 'X', 'FLUX'][i]! }));
    expect(read(file(shuffled)).spectrum).toEqual(read(file(straight)).spectrum);
    const byUcd = [column('FLUX', WAVE, nm, ['TUCD', 'em.wl']), column('WAVE', FLUX, ['TUCD', 'phot.flux.density;em.wl'])];
    expect(read(file(byUcd)).reading).toMatchObject({ wavelengthColumn: 'FLUX', fluxColumn: 'WAVE' });
  });
  it('every column is offered with unit, UCD, utype and the role it plays', () => {
    const { columnFacts } = read(file(columns(spellings[0]!))).reading;
    expect(columnFacts.map(({ name, role }) => [name, role])).toEqual([
      ['SKY', null],
      ['ONE', 'flux'],
      ['TWO', 'uncertainty'],
      ['THREE', 'wavelength'],
      ['FOUR', 'mask'],
    ]);
    expect(columnFacts[3]).toMatchObject({ unit: 'nm', utype: 'Spectrum.Data.SpectralAxis.Value', numeric: true });
  });
  it('SD-03 without an error column the errors are unknown, not zero', () => {
    const { spectrum, reading } = read(file([wave, flux]));
    expect([spectrum.sigma, reading.uncertaintyColumn, reading.uncertaintyKind.how]).toEqual([null, null, 'not_stated']);
  });
  it('SD-04 QUALITY of 1 and more masks a sample, which stays in its place', () => {
    const quality = column(
      'QUALITY',
      FLUX.map((_, i) => (i % 4 === 3 ? 2 : i % 4 === 2 ? 1 : 0)),
    );
    const { spectrum } = read(file([wave, flux, quality]));
    expect([...spectrum.bad]).toEqual(range(N, (i) => (i % 4 > 1 ? 1 : 0)));
    expect([...spectrum.flux]).toEqual(FLUX);
    expect(read(file([wave, flux, quality]), { maskColumn: null }).spectrum.bad).toEqual(new Uint8Array(N));
  });
  it('a mask of most samples is believed only when a person says that it is one', () => {
    const most = column(
      'QUALITY',
      FLUX.map((_, i) => (i < 20 ? 1 : 0)),
    );
    expect(codes(read(file([wave, flux, most])))).toEqual(['mask_not_used']);
    const { spectrum } = read(file([wave, flux, most]), { maskColumn: 'QUALITY' });
    expect([...spectrum.bad]).toEqual(range(N, (i) => (i < 20 ? 1 : 0)));
  });
  it('SD-05 the UCD em.wl;obs.atmos is air; a person may overrule it, which is recorded beside it', () => {
    const air = file([column('WAVE', WAVE, nm, ['TUCD', 'em.wl;obs.atmos']), flux]);
    expect(read(air).reading.medium).toEqual({ value: 'air', how: 'stated', where: 'TUCD1' });
    expect(read(air, { medium: 'vacuum' }).reading.medium).toEqual({
      ...{ value: 'vacuum', how: 'corrected', where: 'correction' },
      said: { value: 'air', how: 'stated', where: 'TUCD1' },
    });
  });
  it('a corrected column is recorded beside the one that would have been taken', () => {
    const { reading } = read(file([wave, flux, column('OTHER', WAVE)]), { fluxColumn: 'OTHER' });
    expect([reading.fluxColumn, reading.uncorrectedColumns]).toEqual(['OTHER', { fluxColumn: 'FLUX' }]);
  });
});

describe('ESO Science Data Products', () => {
  const vectors = (columns: Column[], cards: Card[]) =>
    file(
      columns.map((one) => ({ ...one, form: `${N}D`, rows: [one.rows as number[]] })),
      [['EXTNAME', 'SPECTRUM'], ['NELEM', N], ...cards],
      [
        ['PRODCATG', 'SCIENCE.SPECTRUM'],
        ['SPECSYS', 'BARYCENT'],
        ['SPEC_RES', 42000],
        ['LAMRMS', 0.0004],
        ['MJD-OBS', 55000.25],
        ['EXPTIME', 600],
        ...cards,
      ],
    );
  const unitOf = (unit: string): Card => ['TUNIT', unit];
  it('ES-01 with and without FLUX_NORM: meta.main says which is the flux, and the other is offered', () => {
    const plain = vectors([wave, column('FLUX', FLUX, unitOf('adu'), ['TUCD', 'phot.flux.density;em.wl;meta.main'])], []);
    expect(read(plain).reading).toMatchObject({ fluxColumn: 'FLUX', maskColumn: null });
    const both = [
      wave,
      column('FLUX_NORM', FLUX, ['TUCD', 'phot.flux.density;em.wl;arith.ratio;meta.main'], ['TUTYP', 'spec:Data.FluxAxis.Value']),
      column('FLUX', WAVE, unitOf('adu'), ['TUCD', 'phot.flux.density;em.wl'], ['TUTYP', 'eso:Data.FluxAxis.Value']),
    ];
    const { reading } = read(vectors(both, [['CONTNORM', true]]));
    expect(reading).toMatchObject({ fluxColumn: 'FLUX_NORM', fluxKind: { value: 'normalised' }, columns: ['WAVE', 'FLUX_NORM', 'FLUX'] });
    expect(read(vectors(both, [['CONTNORM', true]]), { fluxColumn: 'FLUX' }).reading.fluxColumn).toBe('FLUX');
  });
  it('ES-02 SPEC_RES is the resolving power and LAMRMS the error of the wavelength scale', () => {
    const { reading } = read(vectors([wave, flux], []));
    expect(reading.resolvingPower).toEqual({ value: 42000, how: 'stated', where: 'SPEC_RES' });
    expect(reading.wavelengthRmsNm).toEqual({ value: 0.0004, how: 'assumed', where: 'LAMRMS, taken as nm' });
  });
  it.each([
    ['ABSOLUTE', 'absolute'],
    ['UNCALIBRATED', 'uncalibrated'],
  ])('ES-03 FLUXCAL = %s goes along with the spectrum', (card, value) => {
    const { spectrum, reading } = read(vectors([wave, flux], [['FLUXCAL', card]]));
    expect([reading.fluxCalibration.value, spectrum.fluxCalibration]).toEqual([value, value]);
  });
});

describe('orders in rows, as x1d files have them', () => {
  const order = (first: number) => range(40, (i) => first + 0.1 * i);
  const orders = [order(500), order(503), order(510)];
  const bytes = file(
    [
      { name: 'WAVELENGTH', form: '40D', rows: orders, cards: [nm] },
      { name: 'FLUX', form: '40D', rows: orders.map((_, r) => range(40, (i) => 10 * r + i / 100)) },
    ],
    [['EXTNAME', 'SCI']],
  );
  it('are segments of one spectrum: every sample of one order, none mixed or resampled', () => {
    const { spectrum, reading } = read(bytes);
    expect(reading.segments.map(({ name }) => name)).toEqual(['row 1', 'row 2', 'row 3']);
    expect(spectrum.segments).toEqual(reading.segments);
    reading.segments.forEach(({ from, to }, r) => {
      expect([...spectrum.flux.subarray(from, to)].every((value) => Math.floor(value / 10) === r)).toBe(true);
    });
    // the first two share 503 to 503.9 nm, of which each keeps its half
    expect(spectrum.wavelength.length).toBeLessThan(120);
    expect(codes(read(bytes))).toContain('orders_joined');
  });
  it('can each be chosen with all its samples, and taken together again', () => {
    expect(read(bytes).reading.otherPlaces).toEqual(['HDU 1 SCI row 1', 'HDU 1 SCI row 2', 'HDU 1 SCI row 3']);
    const one = read(bytes, { place: 'HDU 1 SCI row 2' });
    expect([one.spectrum.wavelength.length, one.reading.segments.length, one.reading.place]).toEqual([40, 1, 'HDU 1 SCI row 2']);
    expect(one.reading.otherPlaces).toContain('HDU 1 SCI');
  });
});

describe('other tables', () => {
  const rows = range(20, (i) => [400 + 0.25 * i, 1 + 0.01 * i] as const);
  const bytesOf = (text: string, encoding: 'utf-8' | 'latin1' = 'utf-8') =>
    encoding === 'utf-8' ? new TextEncoder().encode(text) : Uint8Array.from(text, (c) => c.charCodeAt(0));
  const lines = (join: (w: number, f: number) => string) => rows.map(([w, f]) => join(w, f)).join('\n');
  const comma = (value: number) => String(value).replace('.', ',');
  it.each([
    ['CSV with a heading', bytesOf(`wave [nm],flux\n${lines((w, f) => `${w},${f}`)}`)],
    ['a unit behind an underscore', bytesOf(`wave_nm,flux\n${lines((w, f) => `${w},${f}`)}`)],
    ['TSV', bytesOf(`wave_nm\tflux\n${lines((w, f) => `${w}\t${f}`)}`)],
    ['blanks and remarks', bytesOf(`# wave_nm flux\n${lines((w, f) => `${w} ${f}`)}`)],
    ['semicolons with decimal commas', bytesOf(`wave_nm;flux\n${lines((w, f) => `${comma(w)};${comma(f)}`)}`)],
    ['Latin-1', bytesOf(`# Beobachter: J\u00e4ger\nwave_nm,flux\n${lines((w, f) => `${w},${f}`)}`, 'latin1')],
    ['a byte-order mark and CR LF', bytesOf(`\ufeffwave_nm,flux\r\n${lines((w, f) => `${w},${f}`).replaceAll('\n', '\r\n')}\r\n`)],
    [
      'ECSV with units and data types',
      bytesOf(
        `# %ECSV 1.0\n# ---\n# datatype:\n# - {name: id, datatype: string}\n# - {name: wave, unit: nm, datatype: float64}\n# - {name: flux, datatype: float64}\nid wave flux\n${lines((w, f) => `7 ${w} ${f}`)}`,
      ),
    ],
  ])('OT-01 %s: 20 rows', (_, bytes) => {
    const { spectrum, reading } = read(bytes);
    expect([...spectrum.wavelength]).toEqual(rows.map(([w]) => w));
    expect([...spectrum.flux]).toEqual(rows.map(([, f]) => f));
    expect(reading.axisUnit).toMatchObject({ value: 'nm', how: 'stated' });
  });
  it('OT-01 NaN and blank cells are missing', () => {
    const { spectrum } = read(bytesOf(`wave_nm,flux\n${rows.map(([w, f], i) => `${w},${i === 2 ? 'NaN' : i === 3 ? '' : f}`).join('\n')}`));
    expect([...spectrum.bad].flatMap((bad, i) => (bad ? [i] : []))).toEqual([2, 3]);
  });
  it('OT-02 what runs down is turned, what is in no order is sorted with a warning, duplicates are merged with one', () => {
    const table = (list: readonly (readonly [number, number])[]) => bytesOf(`wave_nm,flux\n${list.map((row) => row.join(',')).join('\n')}`);
    expect(codes(read(table([...rows].reverse())))).toEqual([]);
    expect([...read(table([...rows].reverse())).spectrum.flux]).toEqual(rows.map(([, f]) => f));
    const mixed = rows.map((_, i) => rows[(i * 7) % 20]!);
    expect([codes(read(table(mixed))), [...read(table(mixed)).spectrum.flux]]).toEqual([['not_in_order'], rows.map(([, f]) => f)]);
    expect(codes(read(table([...rows, rows[19]!])))).toEqual(['duplicates_merged']);
  });
  it('OT-03 the first bad cell is named by line and column', () => {
    const result = read(bytesOf(`wave_nm,flux\n${rows.map(([w, f], i) => `${w},${i === 5 ? 'oops' : f}`).join('\n')}`));
    expect(result.reading.warnings[0]).toMatchObject({ code: 'bad_number', row: 7, column: 'flux' });
    expect(result.reading.warnings[0]!.sentence).toContain('line 7, column flux: "oops"');
  });
  it('a delimiter that was taken wrong can be set right', () => {
    const problem = refusal(corpusFile('bad/decimal_comma_ambiguous.csv'));
    expect(problem.answers).toEqual(['delimiter', 'decimalComma']);
    const tabs = bytesOf(`wave_nm|flux\n${lines((w, f) => `${comma(w)}|${comma(f)}`)}`);
    expect([...read(tabs, { delimiter: '|', decimalComma: true }).spectrum.flux]).toEqual(rows.map(([, f]) => f));
  });
});

describe('time and place', () => {
  const reading = (...cards: Card[]) => read(file([wave, flux], [], cards)).reading;
  it('TM-01 noon of 2000-01-01 is MJD 51544.5, written either way', () => {
    expect(reading(['DATE-AVG', '2000-01-01T12:00:00']).midMjdUtc).toEqual({ value: 51544.5, how: 'stated', where: 'DATE-AVG' });
    expect(reading(['MJD-AVG', 51544.5]).time.value).toEqual({ iso: '2000-01-01T12:00:00.000', scale: 'utc', marks: 'mid' });
  });
  it.each([
    ['2026-03-04T05:06:07Z', '2026-03-04T05:06:07'],
    ['2026-03-04T05:06:07.25+02:00', '2026-03-04T03:06:07.25'],
    ['2026-03-04T23:30:00-0130', '2026-03-05T01:00:00'],
  ])('TM-02 %s is turned into UTC and shown without its zone', (written, iso) =>
    expect(reading(['DATE-OBS', written], ['TIMESYS', 'TAI']).time.value).toEqual({ iso, scale: 'utc', marks: 'start' }),
  );
  it('the middle is half the exposure after the start, or half of what passed until the end', () => {
    const start: Card = ['MJD-OBS', 55000];
    expect(reading(start, ['EXPTIME', 864]).midMjdUtc).toMatchObject({ value: 55000.005, how: 'stated' });
    expect(reading(start, ['EXPTIME', 864], ['MJD-END', 55000.04]).midMjdUtc.value).toBeCloseTo(55000.02, 9);
    expect(reading(start).midMjdUtc).toMatchObject({ value: 55000, how: 'assumed' });
    expect(reading(['DATE-OBS', '2026-03-04'], ['EXPTIME', 864]).midMjdUtc).toMatchObject({ value: null, how: 'not_stated' });
  });
  it('atomic time is turned into UTC', () =>
    expect((55000 - reading(['MJD-AVG', 55000], ['TIMESYS', 'TAI']).midMjdUtc.value!) * 86400).toBeCloseTo(34, 3));
  it('the site is read from geocentric coordinates, geodetic ones, or the cards of an observatory, whose sign of longitude is assumed', () => {
    const geocentric = reading(['OBSGEO-X', 6378137], ['OBSGEO-Y', 0], ['OBSGEO-Z', 0]).site;
    expect(geocentric).toMatchObject({ how: 'stated', value: { latitudeDeg: 0, longitudeDegEast: 0 } });
    expect(geocentric.value!.heightM).toBeCloseTo(0, 6);
    expect(reading(['OBSGEO-B', -24.6], ['OBSGEO-L', 289.6], ['OBSGEO-H', 2600]).site.value).toMatchObject({
      longitudeDegEast: expect.closeTo(-70.4, 9) as number,
    });
    const own = reading(['SITELAT', '+50:10:30'], ['SITELONG', '11 42 00']).site;
    expect([own.how, own.value]).toEqual(['assumed', { latitudeDeg: 50.175, longitudeDegEast: 11.7, heightM: 0 }]);
    expect(reading(['SITELAT', 'north'], ['SITELONG', 'east']).site.value).toBeNull();
  });
  it('a text table says the same in remarks', () => {
    const remarks = [
      'date-obs: 2026-03-04T05:06:07',
      'exposure time: 20 min',
      'latitude: 50.5',
      'longitude: 11.7',
      'altitude: 331 m',
      'ra: 18:03:41.7',
      'dec: -24 23 00',
      'frame: heliocentric',
    ];
    const text = [...remarks.map((one) => `# ${one}`), 'wave_nm,flux', ...WAVE.map((w, i) => `${w},${FLUX[i]!}`)].join('\n');
    const found = read(new TextEncoder().encode(text)).reading;
    expect(found.exposureS.value).toBe(1200);
    expect(found.site.value).toEqual({ latitudeDeg: 50.5, longitudeDegEast: 11.7, heightM: 331 });
    expect(found.pointing.value!.raDeg).toBeCloseTo(270.92375, 9);
    expect(Math.abs(found.observerVelocityKmPerS.value!)).toBeGreaterThan(1);
    expect(found.observerVelocityKmPerS.how).toBe('assumed');
  });
  it('what a person says of time, site and pointing counts, beside what the file said', () => {
    const bytes = file(
      [wave, flux],
      [],
      [
        ['SPECSYS', 'BARYCENT'],
        ['DATE-OBS', '2026-03-04'],
      ],
    );
    expect(read(bytes).reading.observerVelocityKmPerS).toEqual({ value: null, how: 'not_stated', where: '' });
    const { reading: told, spectrum } = read(bytes, {
      time: { iso: '2012-03-04T05:06:07', scale: 'utc', marks: 'mid' },
      exposureS: 60,
      site: { latitudeDeg: -24.6, longitudeDegEast: -70.4, heightM: 2600 },
      pointing: { raDeg: 266, decDeg: -29 },
      objectName: 'Knot 7',
    });
    expect(told.time).toMatchObject({ how: 'corrected', said: { value: { iso: '2026-03-04' }, how: 'stated', where: 'DATE-OBS' } });
    expect([told.objectName.value, told.objectName.said?.value]).toEqual(['Knot 7', null]);
    expect(spectrum.observerVelocityKmPerS).toBe(told.observerVelocityKmPerS.value);
    // the Earth runs towards the galactic centre in March
    expect(spectrum.observerVelocityKmPerS).toBeGreaterThan(20);
  });
});
