import { gzipSync } from 'fflate';
import { cpuSeconds } from './support/cpu.js';
import { codes, range, read, refusal } from './support/read.js';

const N = 20;
const WAVE = range(N, (i) => 400 + 0.25 * i);
const FLUX = range(N, (i) => 2.25e-13 * (1 + 0.01 * i));
const SIGMA = range(N, () => 2.5e-15);
const bytes = (text: string) => new TextEncoder().encode(text);
const table = (row: (w: number, f: number, s: number) => string, head = '', end = '\n') =>
  bytes(head + WAVE.map((w, i) => row(w, FLUX[i]!, SIGMA[i]!)).join(end) + end);
const comma = (value: number) => String(value).replace('.', ',');

describe('dialects of a text table', () => {
  const header = (d: string) => ['wave_nm', 'flux', 'error'].join(d) + '\n';
  it.each([
    ['commas', table((...r) => r.join(','), header(','))],
    ['semicolons', table((...r) => r.join(';'), header(';'))],
    ['semicolons and decimal commas', table((...r) => r.map(comma).join(';'), header(';'))],
    ['tabs', table((...r) => r.join('\t'), header('\t'))],
    ['tabs and decimal commas', table((...r) => r.map(comma).join('\t'), header('\t'))],
    ['bars', table((...r) => r.join(' | '), header(' | '))],
    ['blanks', table((...r) => `  ${r.join('   ')}`, header('   '))],
    ['blanks and decimal commas', table((...r) => r.map(comma).join('   '), header('   '))],
    ['tabs and blanks mixed', table((w, f, s) => `${w}\t${f}  ${s}`, header(' '))],
    ['commas and blanks', table((...r) => r.join(', '), header(', '))],
    ['quotes', table((...r) => r.map((v) => `"${v}"`).join(','), '"wave_nm","flux","error"\n')],
    ['exponents written with D', table((w, f, s) => `${w} ${f.toExponential()} ${s.toExponential()}`.replaceAll('e', 'D'), header(' '))],
    ['a byte-order mark', new Uint8Array([0xef, 0xbb, 0xbf, ...table((...r) => r.join(','), header(','))])],
    ['CR LF line ends', table((...r) => r.join(','), header(',').replace('\n', '\r\n'), '\r\n')],
    ['CR line ends', table((...r) => r.join(','), header(',').replace('\n', '\r'), '\r')],
    ['gzip', gzipSync(table((...r) => r.join(','), header(',')))],
    ['two gzip members', new Uint8Array([...gzipSync(bytes(header(','))), ...gzipSync(table((...r) => r.join(',')))])],
    ['headings behind a mark', table((...r) => r.join(' '), '# some remark\n# wave_nm flux error\n')],
    ['a line of units below the headings', table((...r) => r.join(' '), 'wave flux error\nnm erg/s/cm2/A erg/s/cm2/A\n')],
    ['text above the headings', table((...r) => r.join(','), 'Reduced by the night crew\n\nwave_nm,flux,error\n')],
    ['columns of text beside the numbers', table((w, f, s) => ['star 7', w, f, s].join(','), 'name,wave_nm,flux,error\n')],
  ])('reads %s', (_, content) => {
    const { spectrum, reading } = read(content);
    expect([...spectrum.wavelength]).toEqual(WAVE);
    expect([...spectrum.flux]).toEqual(FLUX);
    expect([...spectrum.sigma!]).toEqual(SIGMA);
    expect(reading.axisUnit).toMatchObject({ value: 'nm', how: 'stated' });
    expect(reading.uncertaintyKind.how).toBe('stated');
  });

  it('reads UTF-16 in both byte orders', () => {
    const text = `wave_nm,flux\n${WAVE.map((w, i) => `${w},${FLUX[i]!}`).join('\n')}`;
    for (const little of [true, false]) {
      const view = new DataView(new ArrayBuffer(2 * text.length + 2));
      [...`\ufeff${text}`].forEach((character, i) => view.setUint16(2 * i, character.charCodeAt(0), little));
      expect([...read(new Uint8Array(view.buffer)).spectrum.flux]).toEqual(FLUX);
    }
  });

  it('reads ECSV: units from its header, not from the names', () => {
    const head = [
      '# %ECSV 1.0',
      '# ---',
      '# datatype:',
      '# - {name: wave, unit: um, datatype: float64}',
      '# - {name: flux, unit: Jy, datatype: float64, description: calibrated}',
      '# - name: err',
      '#   unit: Jy',
      '# meta: {object: HD 1}',
      'wave flux err',
      '',
    ].join('\n');
    const { reading } = read(table((w, f, s) => `${w / 1000} ${f} ${s}`, head));
    expect(reading.axisUnit).toMatchObject({ value: 'micron', how: 'stated' });
    expect([reading.fluxUnit.value, reading.fluxKind.value, reading.uncertaintyColumn]).toEqual(['Jy', 'per_frequency', 'err']);
    expect(reading.firstNm).toBeCloseTo(400, 9);
  });
});

describe('headings', () => {
  const withHeads = (heads: string) => read(table((...r) => r.join(';'), `${heads}\n`)).reading;
  it.each([
    ['wave [nm];flux;err', 'nm'],
    ['wave_nm;flux;err', 'nm'],
    ['Wavelength (nm);Flux;Err', 'nm'],
    ['lambda/nm;flux;err', 'nm'],
    ['Wavelength, nm;flux;err', 'nm'],
    ['WAVELENGTH [Angstrom];FLUX;ERR', 'angstrom'],
    ['wave_A;flux;err', 'angstrom'],
    ['Wellenlänge (Å);Fluss;Fehler', 'angstrom'],
    ['wavelength_micron;flux;err', 'micron'],
    ['lambda (µm);flux;err', 'micron'],
    ['frequency [GHz];flux;err', 'ghz'],
    ['energy (eV);flux;err', 'ev'],
    ['wavenumber (cm-1);flux;err', 'wavenumber_per_cm'],
    ['wavenumber [1/cm];flux;err', 'wavenumber_per_cm'],
  ])('%s is an axis in %s', (heads, unit) => {
    expect(withHeads(heads).axisUnit).toMatchObject({ value: unit, how: 'stated', where: 'column name' });
  });

  it.each([
    ['Flux (erg/s/cm^2/A)', 'per_wavelength'],
    ['Flux [10^-17 erg/s/cm2/AA]', 'per_wavelength'],
    ['flux (W m-2 um-1)', 'per_wavelength'],
    ['flux (W/(m2 um))', 'per_wavelength'],
    ['flux [mJy]', 'per_frequency'],
    ['flux (erg s-1 cm-2 Hz-1)', 'per_frequency'],
    ['f_lambda', 'per_wavelength'],
    ['fnu', 'per_frequency'],
    ['flux [adu]', 'counts'],
    ['flux_norm', 'normalised'],
    ['flux', 'unknown'],
  ])('%s is flux %s', (head, kind) => expect(withHeads(`wave_nm;${head};err`).fluxKind.value).toBe(kind));

  it('knows air and vacuum by name, in the heading or a remark', () => {
    expect(withHeads('wave_air_nm;flux;err').medium).toEqual({ value: 'air', how: 'stated', where: 'column name' });
    expect(withHeads('vacuum wavelength (nm);flux;err').medium).toEqual({ value: 'vacuum', how: 'stated', where: 'column name' });
    expect(withHeads('# medium: air\nwave_nm;flux;err').medium).toEqual({ value: 'air', how: 'stated', where: 'remark "medium"' });
    expect(withHeads('# air wavelengths, airmass 1.2\nwave_nm;flux;err').medium).toMatchObject({ value: 'air', how: 'stated' });
    expect(withHeads('# airmass 1.2\nwave_nm;flux;err').medium).toEqual({ value: 'vacuum', how: 'not_stated', where: '' });
  });

  it('uses the calibrated flux of several and the column a person names', () => {
    const content = table((w, f, s) => [w, 7, f, s, 0].join(';'), 'wave_nm;flux_raw;flux_cal;err;quality\n');
    expect(read(content).reading).toMatchObject({ fluxColumn: 'flux_cal', uncertaintyColumn: 'err', maskColumn: 'quality' });
    expect(read(content, { fluxColumn: 'flux_raw', uncertaintyColumn: null }).spectrum).toMatchObject({ sigma: null });
  });

  it('takes the unit from a remark on the wavelengths', () => {
    expect(withHeads('# wavelength unit: Angstrom\nlam;flux;err').axisUnit).toMatchObject({
      value: 'angstrom',
      where: 'remark "wavelength unit"',
    });
    expect(withHeads('# lam - wavelength in microns\nlam;flux;err').axisUnit).toMatchObject({
      value: 'micron',
      where: 'remark on wavelengths',
    });
  });
});

describe('remarks', () => {
  it('give frame, medium, object, resolving power, date and instrument', () => {
    const remarks = [
      '# object: HD 1 (simulated)',
      '# frame: barycentric',
      '# medium = vacuum',
      '# resolving_power: 48000',
      '# date-obs: 2026-03-04T05:06:07Z',
      '% instrument: GIRAFE',
      '// ra: 10.5',
      '! dec: -3.25',
      '',
    ].join('\n');
    const { reading } = read(table((...r) => r.join(','), `${remarks}wave_nm,flux,err\n`));
    expect(reading.objectName.value).toBe('HD 1 (simulated)');
    expect(reading.frame).toEqual({ value: 'barycentric', how: 'stated', where: 'remark "frame"' });
    expect(reading.medium).toMatchObject({ value: 'vacuum', how: 'stated' });
    expect([reading.resolvingPower.value, reading.observedAt.value, reading.instrument]).toEqual([48000, '2026-03-04T05:06:07', 'GIRAFE']);
    expect([reading.raDeg, reading.decDeg]).toEqual([10.5, -3.25]);
    expect(reading.header).toEqual([...remarks.trim().split('\n'), 'wave_nm,flux,err']);
  });

  it('may stand between the rows', () => {
    const { spectrum, reading } = read(bytes('wave_nm,flux\n1,1\n# cloud\n2,2\n\n3,3\n'));
    expect([...spectrum.wavelength]).toEqual([1, 2, 3]);
    expect(reading.header).toEqual(['wave_nm,flux', '# cloud']);
  });
});

describe('order, duplicates and faults', () => {
  it('reverses a descending table, uncertainties and mask with it', () => {
    const { spectrum, reading } = read(bytes('wave_nm,flux,err,mask\n503,3,0.3,0\n502,2,0.2,1\n501,1,0.1,0\n'));
    expect([[...spectrum.wavelength], [...spectrum.flux], [...spectrum.sigma!], [...spectrum.bad]]).toEqual([
      [501, 502, 503],
      [1, 2, 3],
      [0.1, 0.2, 0.3],
      [0, 1, 0],
    ]);
    expect([reading.firstNm, reading.lastNm]).toEqual([503, 501]);
  });

  it('sorts what is in no order, and names the first line out of order', () => {
    const result = read(bytes('wave_nm,flux\n500,1\n503,2\n501,3\n504,4\n502,5\n'));
    expect([...result.spectrum.flux]).toEqual([1, 3, 5, 2, 4]);
    expect(result.reading.warnings.find((warning) => warning.code === 'not_in_order')).toMatchObject({ row: 4 });
  });

  it('merges duplicates with weights 1/sigma^2, leaving out bad ones', () => {
    const { spectrum } = read(bytes('wave_nm,flux,err\n500,1,1\n501,2,0.1\n501,4,0.2\n502,5,0.1\n502,NaN,0.1\n503,1,1\n'));
    expect([...spectrum.wavelength]).toEqual([500, 501, 502, 503]);
    // (2/0.01 + 4/0.04) / (1/0.01 + 1/0.04) = 300 / 125
    expect(spectrum.flux[1]).toBeCloseTo(2.4, 12);
    expect(spectrum.sigma![1]).toBeCloseTo(1 / Math.sqrt(125), 12);
    expect([spectrum.flux[2], spectrum.bad[2]]).toEqual([5, 0]);
  });

  it('names line and column of cells that are no numbers, and of short rows', () => {
    const result = read(bytes(`wave_nm,flux\n${range(30, (i) => `${500 + i},${i === 4 ? 'abc' : i}`).join('\n')}\n600\n`));
    const bad = result.reading.warnings.find((warning) => warning.code === 'bad_number');
    expect(bad).toMatchObject({ row: 6, column: 'flux' });
    expect(bad!.sentence).toContain('line 6, column flux: "abc"');
    expect(result.reading.warnings.find((warning) => warning.code === 'short_row')).toMatchObject({ row: 32 });
  });

  it('refuses a table of which most cells are no numbers', () => {
    const good = range(70, (i) => `${500 + i},1`).join('\n');
    const problem = refusal(bytes(`wave_nm,flux\n${good}\n${range(100, () => 'x,y').join('\n')}`));
    expect(problem).toMatchObject({ code: 'not_numbers', row: 72 });
  });

  it('refuses a second table below the first, naming the line', () => {
    expect(refusal(bytes('wave_nm,flux\n500,1\n501,2\nwave_nm,flux\n500,1\n'))).toMatchObject({ code: 'repeated_header', row: 4 });
  });

  it('refuses decimal commas that cannot be told from delimiters', () => {
    expect(refusal(bytes('500,0,1,000\n500,1,1,001\n500,2,1,002\n')).code).toBe('decimal_comma');
  });

  it('does not show control or direction marks of the file in a sentence', () => {
    const { sentence } = refusal(bytes('wave [fur\u202elong],flux\n1,2\n2,3\n'));
    expect(sentence).toContain('"fur long"');
  });

  it('lets a person say which column of a table without headings is which', () => {
    const content = table((w, f, s) => `${s} ${f} ${w}`);
    const { reading, spectrum } = read(content, { wavelengthColumn: 'column 3', uncertaintyColumn: 'column 1', fluxColumn: 'column 2' });
    expect([reading.wavelengthColumn, reading.fluxColumn, reading.uncertaintyColumn]).toEqual(['column 3', 'column 2', 'column 1']);
    expect([...spectrum.wavelength]).toEqual(WAVE);
    expect(read(content, { wavelengthColumn: 'column 3' }).reading).toMatchObject({ wavelengthColumn: 'column 3', fluxColumn: 'column 1' });
    expect(refusal(content, { wavelengthColumn: 'column 4' }).code).toBe('column_not_found');
  });

  it('takes a third column without heading for the error only when it can be one', () => {
    expect(read(table((...r) => r.join(' '))).reading.uncertaintyColumn).toBe('column 3');
    const other = read(table((w, f) => `${w} ${f} ${f * 2}`));
    expect(other.reading.uncertaintyColumn).toBeNull();
    expect(codes(other)).toContain('columns_assumed');
  });

  it('sees the size of a gzip file that would unpack to too much, before it is unpacked', () => {
    const bomb = gzipSync(new Uint8Array(64 * 1024 * 1024), { level: 9 });
    expect(refusal(bomb).code).toBe('too_large');
    expect(refusal(gzipSync(gzipSync(bytes('a,b\n1,2\n')))).code).toBe('nested_gzip');
  });

  it('answers hostile lines of 100 000 characters within 0.1 s of processor time', () => {
    const long = 100_000;
    const hostile = [
      ' '.repeat(long),
      '('.repeat(long),
      `a(${'('.repeat(long)}`,
      '"'.repeat(long),
      ','.repeat(900),
      `# ${'a:'.repeat(long / 2)}`,
      `#${' '.repeat(long)}x`,
      `1${'e1'.repeat(long / 2)}`,
      '-'.repeat(long),
    ];
    const contents = hostile.flatMap((line) => [line, `${line}\n1 2\n2 3\n`, `wave flux\n1 2\n${line}\n3 4\n`]);
    contents.forEach(refusalOrSpectrum);
    for (const content of contents) expect(cpuSeconds(() => refusalOrSpectrum(content)).seconds).toBeLessThan(0.1);
  });
});

function refusalOrSpectrum(content: string) {
  try {
    read(bytes(content));
  } catch (error) {
    expect(String(error)).not.toContain('reader_fault');
  }
}
