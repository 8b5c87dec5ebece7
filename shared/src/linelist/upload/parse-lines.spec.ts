import { parseLines } from './parse-lines.js';
import { readSpecies } from './species.js';

const HEAD = 'species,wavelength_vac [nm],log_gf,e_low [cm-1],j_low,source';
const SODIUM = 'Na I,589.158326,0.108,0,1/2,"one, two"';
const list = (rows: string[], head = HEAD) => [head, ...rows].join('\n');
const sentences = (text: string, statements = {}) => parseLines(text, statements).problems.map(({ sentence }) => sentence);

describe('a row of text', () => {
  it('becomes a line, with what follows from it', () => {
    const { lines, problems } = parseLines(list([SODIUM]));
    expect(problems).toEqual([]);
    expect(lines).toEqual([
      expect.objectContaining({
        ...{ id: 'NaI-589.1583', species: 'Na I', element: 'Na', ionStage: 1, wavelengthNm: 589.158326, type: 'allowed' },
        ...{ logGf: 0.108, lowerEnergyPerCm: 0, lowerJ: 0.5, settings: ['stellar', 'interstellar'], source: 'one, two' },
      }),
    ]);
    // gf = (2J + 1) f, by definition
    expect(lines[0]!.oscillatorStrength).toBeCloseTo(10 ** 0.108 / 2, 12);
  });

  it.each([
    ['wavelength_air [Angstrom]', '5889.9506'], // STANDARDS table of Morton 2000: 588.995060 nm in air is 589.1583 in vacuum
    ['wavelength_air_nm', '588.995060'],
    ['lambda_vac (um)', '0.5891583'],
    ['wavenumber [cm-1]', String(1e7 / 589.1583)],
  ])('has its wavelength in vacuum nm from "%s"', (column, cell) => {
    const { lines } = parseLines(list([`Na I,${cell},x`], `species,${column},source`));
    expect(Math.abs(lines[0]!.wavelengthNm - 589.1583)).toBeLessThan(1e-5);
  });

  it('has its energy in cm^-1 from eV: hc = 1.239841984e-4 eV cm (CODATA 2018)', () => {
    const { lines } = parseLines(list(['Fe II,500,3.0,x'], 'ion,wavelength_vac [nm],e_low [eV],source'));
    expect(lines[0]!.lowerEnergyPerCm).toBeCloseTo(3 / 1.239841984e-4, 2);
    expect(lines[0]!.settings).toEqual(['stellar']);
  });

  it('takes decimal commas between semicolons, comments, CRLF and a byte order mark', () => {
    const text = '\uFEFF# of the team\r\nspecies;wavelength_vac [nm];source\r\nCa II;393,4777;x\r\n\r\n# end\r\nCH+;423,373;y\r\n';
    const { lines } = parseLines(text);
    expect(lines.map(({ species, wavelengthNm, ionStage, type }) => [species, wavelengthNm, ionStage, type])).toEqual([
      ['Ca II', 393.4777, 2, 'allowed'],
      ['CH+', 423.373, 0, 'molecular'],
    ]);
  });

  it('is cited by the list where it names no source itself', () => {
    const text = list(['Na I,589.1583,', 'K I,766.7009,own'], 'species,wavelength_vac [nm],source');
    expect(parseLines(text, { citation: 'Team list' }).lines.map(({ source }) => source)).toEqual(['Team list', 'own']);
    expect(sentences(text)).toEqual([expect.stringContaining('No source')]);
  });

  it('gets an id of its own where two lines would share one', () => {
    const { lines } = parseLines(list([SODIUM, SODIUM]));
    expect(lines.map(({ id }) => id)).toEqual(['NaI-589.1583', 'NaI-589.1583-2']);
  });
});

describe('a list that cannot be taken', () => {
  it.each([
    ['', 'No column of wavelengths'],
    ['species,log_gf\nNa I,1', 'No column of wavelengths'],
    ['wavelength_vac [nm]\n500', 'No column of species'],
    ['species,wavelength_vac,source\nNa I,589,x', 'have no unit'],
    ['species,wavelength_vac [furlong],source\nNa I,589,x', '"furlong" is no unit'],
    ['species,wavelength [nm],source\nNa I,589,x', 'in air or in vacuum'],
    ['species,wavelength_vac [nm],e_low,source\nNa I,589,0,x', 'The energies have no unit'],
    [HEAD, 'holds no row'],
    ['<?xml version="1.0"?><VOTABLE><RESOURCE/></VOTABLE>', 'holds no table'],
    ['<?xml version="1.0"?><VOTABLE><RESOURCE>', 'XML'],
  ])('%j says why', (text, reason) => expect(sentences(text)[0]).toContain(reason));

  it('names row, column and remedy of every fault, as lines of the file', () => {
    const rows = [
      '# a remark',
      'Na I,0,0,0,1/2,x',
      'Xx 99,500,0,0,0,x',
      'Fe I,500,loud,0,0,x',
      'Fe I,500,0,-1,0,x',
      'Fe I,500,0,0,0.3,x',
      SODIUM,
    ];
    const { lines, problems, problemCount } = parseLines(list(rows));
    expect(problems.map(({ row, column }) => [row, column])).toEqual([
      [3, 'wavelength_vac [nm]'],
      [4, 'species'],
      [5, 'log_gf'],
      [6, 'e_low [cm-1]'],
      [7, 'j_low'],
    ]);
    expect(problemCount).toBe(5);
    expect(lines).toHaveLength(1);
  });

  it('refuses ids that stand twice', () => {
    const text = list(['a,Na I,589.1583,x', 'b,K I,766.7,x', 'a,K I,770.1,x'], 'id,species,wavelength_vac [nm],source');
    expect(parseLines(text).problems).toEqual([expect.objectContaining({ row: 4, column: 'id' })]);
  });
});

// The names are those of the IVOA Simple Spectral Lines Data Model 1.0 and of Simple Line Access Protocol 2.0; the table itself is made up.
const votable = (fields: string, rows: string) =>
  `<?xml version="1.0"?><VOTABLE version="1.4" xmlns="http://www.ivoa.net/xml/VOTable/v1.3"><RESOURCE type="results">` +
  `<INFO name="QUERY_STATUS" value="OK"/><TABLE>${fields}<DATA><TABLEDATA>${rows}</TABLEDATA></DATA></TABLE></RESOURCE></VOTABLE>`;

describe('a VOTable', () => {
  it('is read by data model names: metres and joules', () => {
    const fields =
      '<FIELD name="a" datatype="double" unit="m" utype="ssldm:Line.wavelength.value"/><FIELD name="b" datatype="char" utype="ssldm:Line.species.name"/>' +
      '<FIELD name="c" datatype="double" unit="J" utype="ssldm:Line.finalLevel.energy.value"/><FIELD name="reference_doi" datatype="char"/>';
    const row = `<TR><TD>5.891583e-7</TD><TD>Na I</TD><TD>${1.602176634e-19}</TD><TD>a &amp; b</TD></TR>`;
    const { lines, problems } = parseLines(votable(fields, row), { medium: 'vacuum' });
    expect(problems).toEqual([]);
    expect(lines[0]).toMatchObject({ species: 'Na I', source: 'a & b' });
    expect(lines[0]!.wavelengthNm).toBeCloseTo(589.1583, 9);
    expect(lines[0]!.lowerEnergyPerCm).toBeCloseTo(8065.5439, 3); // 1 eV, CODATA 2018
  });

  it('is read by the field names of SLAP 2: element and charge make the stage', () => {
    const fields =
      '<FIELD name="vacuum_wavelength" datatype="double" unit="m"/><FIELD name="species_name" datatype="char"/><FIELD name="ion_charge" datatype="int"/>';
    const { lines } = parseLines(votable(fields, '<TR><TD>5.00824e-7</TD><TD>O</TD><TD>2</TD></TR>'), { citation: 'x' });
    expect(lines[0]).toMatchObject({ species: 'O III', element: 'O', ionStage: 3 });
  });

  it('with an error of its service, binary data or entities of its own is refused', () => {
    const failed = '<VOTABLE><RESOURCE><INFO name="QUERY_STATUS" value="ERROR">too wide</INFO></RESOURCE></VOTABLE>';
    expect(sentences(failed)[0]).toContain('too wide');
    const binary = '<VOTABLE><RESOURCE><TABLE><FIELD name="x"/><DATA><BINARY2><STREAM/></BINARY2></DATA></TABLE></RESOURCE></VOTABLE>';
    expect(sentences(binary)[0]).toContain('TABLEDATA');
    expect(sentences(`<!DOCTYPE a [<!ENTITY b "c">]>${failed}`)[0]).toContain('document type');
  });
});

it.each([
  ['Na I', 'Na I', 1, false],
  ['NaI', 'Na I', 1, false],
  ['[O III]', 'O III', 3, true],
  ['Fe 2', 'Fe II', 2, false],
  ['C2', 'C2', 0, false],
  ['DIB', 'DIB', 0, false],
  ['H2O', 'H2O', 0, false],
])('%s is %s', (text, name, stage, forbidden) => expect(readSpecies(text)).toMatchObject({ name, stage, forbidden }));

it.each(['Na', '', '589', 'sodium, neutral', 'Na IIII'])('%j is no species', (text) => expect(readSpecies(text)).toBeNull());
