import fc from 'fast-check';
import { recipesFor, sameCorrections, transferable, withGeneral } from './corrections.js';
import { isSimilar, signatureKey, signatureOf, signatureWords, type FileSignature } from './signature.js';

const fits = { format: 'fits_table', columns: ['WAVE', 'FLUX'], instrument: 'Echelle', telescope: 'T1' } as const;
const header = ['SIMPLE  =                    T', "ORIGIN  = 'Observatory '       / who", "OBJECT  = 'Heron 4'"];

describe('the signature of a file', () => {
  test('is that of the next night, whose numbers and object are others', () => {
    const tonight = signatureOf({ ...fits, header });
    const tomorrow = signatureOf({ ...fits, header: ["OBJECT  = 'Tern 1'", "DATE-OBS= '2031-03-05'", "ORIGIN  = 'Observatory'"] });
    expect(isSimilar(tonight, tomorrow)).toBe(true);
    expect(tonight.writer).toEqual(['ORIGIN = Observatory']);
  });

  test('is another for other columns, another order of them, another instrument or another writer', () => {
    const mine = signatureOf({ ...fits, header });
    const others = [
      { ...fits, header, columns: ['WAVE', 'FLUX', 'ERR'] },
      { ...fits, header, columns: ['FLUX', 'WAVE'] },
      { ...fits, header, instrument: 'Camera' },
      { ...fits, header, telescope: null },
      { ...fits, header: [], format: 'fits_table' as const },
      { ...fits, header, format: 'text' as const },
    ];
    for (const other of others) expect(isSimilar(mine, signatureOf(other))).toBe(false);
  });

  test('of a text is told by the keys of its comment lines, whatever they say and in whatever order', () => {
    const text = (lines: string[]) =>
      signatureOf({ format: 'text', columns: ['nm', 'flux'], instrument: null, telescope: null, header: lines });
    const one = text(['# Object: Heron 4', '# resolving_power = 5000', 'a line of prose']);
    expect(one.writer).toEqual(['object', 'resolving_power']);
    expect(isSimilar(one, text(['#resolving_power=12', '# object : Tern']))).toBe(true);
    expect(isSimilar(one, text(['# object: Tern']))).toBe(false);
  });

  test('does not depend on capitals and blanks, and similarity goes both ways and on', () => {
    const word = fc.string({ maxLength: 12 });
    const one = fc.record<FileSignature>({
      format: fc.constantFrom('fits_table', 'fits_image', 'text'),
      columns: fc.array(word, { maxLength: 4 }),
      instrument: fc.option(word),
      telescope: fc.option(word),
      writer: fc.array(word, { maxLength: 3 }),
    });
    fc.assert(
      fc.property(one, one, (a, b) => {
        const loud = { ...a, columns: a.columns.map((name) => ` ${name}  `) };
        expect(signatureKey(loud)).toBe(signatureKey(a));
        expect(isSimilar(a, b)).toBe(isSimilar(b, a));
        expect(isSimilar(a, JSON.parse(JSON.stringify(a)) as FileSignature)).toBe(true);
      }),
    );
  });

  test('is said in words', () => {
    expect(signatureWords(signatureOf({ ...fits, header }))).toBe('FITS tables with the columns WAVE, FLUX of Echelle at T1');
    const many = signatureOf({ ...fits, header, columns: Array.from({ length: 9 }, (_, i) => `C${i}`), instrument: null, telescope: null });
    expect(signatureWords(many)).toBe('FITS tables with the columns C0, C1, C2, C3, C4, C5 and 3 more');
  });
});

describe('corrections of a kind', () => {
  const time = { iso: '2031-03-04', scale: 'utc', marks: 'start' } as const;
  const pointing = { raDeg: 10, decDeg: -5 };
  const site = { latitudeDeg: -24, longitudeDegEast: -70, heightM: 2600 };

  test('leave out what belongs to one exposure, and keep where the telescope stands', () => {
    expect(transferable({ medium: 'air', time, pointing, exposureS: 60, objectName: 'Heron', site })).toEqual({ medium: 'air', site });
  });

  test('put on a file, leave it its own time and pointing and replace all else', () => {
    const own = { time, frame: 'unknown', uncertaintyColumn: null } as const;
    expect(withGeneral(own, { medium: 'air', pointing })).toEqual({ time, medium: 'air' });
  });

  test('are the same in whatever order they stand', () => {
    expect(sameCorrections({ medium: 'air', site }, { site: { ...site }, medium: 'air' })).toBe(true);
    expect(sameCorrections({ medium: 'air', frame: undefined }, { medium: 'air' })).toBe(true);
    expect(sameCorrections({ uncertaintyColumn: null }, {})).toBe(false);
    expect(sameCorrections({ medium: 'air' }, { medium: 'vacuum' })).toBe(false);
  });

  test('of a team are offered for files of their kind, the one changed last first', () => {
    const signature = signatureOf({ ...fits, header });
    const recipe = (name: string, changedAt: string, of = signature) => ({ name, changedAt, signature: of });
    const other = signatureOf({ ...fits, header, instrument: 'Camera' });
    const all = [
      recipe('old', '2031-01-01T00:00:00Z'),
      recipe('camera', '2031-03-01T00:00:00Z', other),
      recipe('new', '2031-02-01T00:00:00Z'),
    ];
    expect(recipesFor(all, signature).map(({ name }) => name)).toEqual(['new', 'old']);
  });
});
