import fc from 'fast-check';
import Papa from 'papaparse';
import { digits, text, writeCsv } from './csv.js';

const parse = (csv: string): string[][] => Papa.parse<string[]>(csv, { delimiter: ',', newline: '\r\n' }).data.slice(0, -1);

test('writes RFC 4180: quotes where needed, doubled inside, CR LF at the end of every row', () => {
  const row = [text('a,b'), text('say "so"'), text('two\nlines'), text(' blank'), text('plain'), text(null), digits('-12.3'), digits('')];
  expect(writeCsv([], ['x', 'y'], [row])).toBe('x,y\r\n"a,b","say ""so""","two\nlines"," blank",plain,,-12.3,\r\n');
});

test.each(['=1+1', '+1', '-1+cmd', '@SUM(A1)', '\t=1', '\r=1', '\0=1', '＝1+1', '＋1', '－1', '＠x'])(
  'disarms the formula %j',
  (formula) => {
    expect(parse(writeCsv([], ['c'], [[text(formula)]]))[1]![0]).toBe(`'${formula}`);
  },
);

test('keeps an apostrophe that was there before a formula character', () => {
  expect(parse(writeCsv([], ['c'], [[text("'=1")]]))[1]![0]).toBe("''=1");
});

test.each(['1=1', 'Na I', "'quoted", 'a-b', '589.0 nm', ''])('leaves %j alone', (harmless) => {
  expect(parse(writeCsv([], ['c'], [[text(harmless), text('x')]]))[1]![0]).toBe(harmless);
});

test.each(['-12.3', '0.00', '1e-7', '-1.5E+10', '5'])('writes the number %s as it is', (number) => {
  expect(writeCsv([], [], [[digits(number)]])).toBe(`\r\n${number}\r\n`);
});

test.each(['=1', '1,2', 'NaN', 'Infinity', '1 ', '--1', '+1', '0x10', '1.', '.5'])('refuses %j as a number', (bad) => {
  expect(() => writeCsv([], [], [[digits(bad)]])).toThrow(RangeError);
});

test('gives any text back through a reader, but for the one apostrophe that disarms it', () => {
  const anyText = fc.oneof(fc.string({ unit: 'binary' }), fc.constantFrom('=', '-', '"', ',', '\r\n', ';', '\0', '＝'), fc.string());
  fc.assert(
    fc.property(fc.array(fc.array(anyText, { minLength: 2, maxLength: 4 }), { minLength: 1, maxLength: 4 }), (rows) => {
      const back = parse(
        writeCsv(
          [],
          ['head', 'row'],
          rows.map((row) => row.map(text)),
        ),
      ).slice(1);
      const plain = back.map((row) => row.map((cell) => cell.replace(/^'(?='*[=+\-@\t\r\0＝＋－＠])/, '')));
      expect(plain).toEqual(rows);
      for (const cell of back.flat()) expect(cell).not.toMatch(/^[=+\-@\t\r\0＝＋－＠]/);
    }),
  );
});

test('keeps a comment on its line and none of its pieces a formula, wherever a spreadsheet splits it', () => {
  fc.assert(
    fc.property(
      fc.string({ unit: 'binary' }),
      fc.constantFrom(',=', ';=', ', +', '\n=', '\r\n-', '";=', ',"='),
      fc.string(),
      (a, bait, b) => {
        const csv = writeCsv([`target: ${a}${bait}cmd${b}`], ['x'], []);
        const lines = csv.split('\r\n');
        expect(lines).toHaveLength(3);
        expect(lines[0]!.startsWith('# target: ')).toBe(true);
        expect([...lines[0]!].filter((c) => c === '"' || c < ' ')).toEqual([]);
        for (const piece of lines[0]!.split(/[,;\t]/)) expect(piece.trimStart()).not.toMatch(/^[=+\-@＝＋－＠]/);
      },
    ),
  );
});
