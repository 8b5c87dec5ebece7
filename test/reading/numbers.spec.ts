import fc from 'fast-check';
import { parseCell, quickNumber } from '../../shared/src/reading/text/number.js';

const quick = (text: string, point = '.') => {
  const bytes = new TextEncoder().encode(text);
  return quickNumber(bytes, 0, bytes.length, point.charCodeAt(0));
};

describe('numbers of text tables', () => {
  const digits = (min: number, max: number) => fc.stringMatching(new RegExp(`^[0-9]{${min},${max}}$`));
  const decimal = fc
    .tuple(
      fc.constantFrom('', '-', '+'),
      digits(1, 12),
      fc.option(digits(0, 12)),
      fc.option(fc.tuple(fc.constantFrom('e', 'E'), fc.integer({ min: -330, max: 330 }))),
    )
    .map(
      ([sign, whole, fraction, exponent]) =>
        `${sign}${whole}${fraction === null ? '' : `.${fraction}`}${exponent ? exponent.join('') : ''}`,
    );

  it('are bit-equal to those of the language, or left to it', () => {
    let taken = 0;
    fc.assert(
      fc.property(decimal, (text) => {
        const value = quick(text);
        if (Number.isNaN(value)) return;
        taken++;
        expect(Object.is(value, Number(text))).toBe(true);
      }),
      { numRuns: 20_000 },
    );
    expect(taken).toBeGreaterThan(1000);
  });

  it('of 16 to 19 digits are rounded right, or left to the language when that is not certain', () => {
    let taken = 0;
    fc.assert(
      fc.property(digits(16, 19), fc.integer({ min: -270, max: 270 }), fc.integer({ min: 0, max: 16 }), (all, power, point) => {
        const text = `${all.slice(0, point)}.${all.slice(point)}e${power}`;
        const value = quick(text);
        if (Number.isNaN(value)) return;
        taken++;
        expect(Object.is(value, Number(text))).toBe(true);
      }),
      { numRuns: 30_000 },
    );
    // nearly all are certain
    expect(taken).toBeGreaterThan(25_000);
  });

  it.each([
    '9007199254740993',
    '9007199254740992.5',
    '1.00000000000000011102230246251565',
    '5e-324',
    '1.7976931348623157e308',
    '8.5e-23',
    '1e23',
  ])('half way between two doubles, or at the ends of their range, are never rounded wrong: %s', (text) =>
    expect([Number(text), NaN]).toContainEqual(quick(text)),
  );

  it('are as they were printed, for every double', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        // minus zero is printed without its sign
        expect(parseCell(String(value), false)).toEqual({ kind: 'number', value: value === 0 ? 0 : value });
      }),
      { numRuns: 5000 },
    );
  });

  it.each(['', '-', '.', 'e5', '1e', '1e+', '1.2.3', '1,5', '0x10', '1_000', ' 1', '1 ', 'NaN', 'Infinity', '1e99999', '--1'])(
    'are not seen in %j',
    (text) => {
      expect(quick(text)).toBeNaN();
    },
  );

  it.each(['', ' ', 'NaN', 'nan', 'NULL', 'INDEF', '-', '--', 'inf', '-Infinity', 'N/A', '...'])('are missing in %j', (text) =>
    expect(parseCell(text, false).kind).toBe('missing'),
  );
  it.each(['abc', '1 2', '=1+1', '0x10', '1,5', '1.5.2'])('are text in %j', (text) => expect(parseCell(text, false).kind).toBe('text'));
  it('overflow is told apart', () => expect(parseCell('-1e999', false).kind).toBe('out_of_range'));
  it('may have a decimal comma where the table has one', () => {
    expect(parseCell('2,5e-3', true)).toEqual({ kind: 'number', value: 2.5e-3 });
    expect(quick('2,5e-3', ',')).toBe(2.5e-3);
  });
});
