import fc from 'fast-check';
import { plain, roundedToError } from './rounding.js';

test.each([
  [589.13523, 0.0000218, '589.135230', '0.000022'],
  [-12.345, 0.21, '-12.35', '0.21'],
  [24138.4, 5512, '24100', '5500'],
  [106.447, 99.6, '110', '100'], // 99.6 has two significant digits as 100, so the tens are the last digits
  [1.23456, 0.0996, '1.23', '0.10'],
  [0.5, 2, '0.5', '2.0'],
  [-0.04, 3.1, '0.0', '3.1'], // no minus in front of nothing
  [7, 0.001, '7.0000', '0.0010'],
  [1234567, 123456, '1230000', '120000'],
])('%d ± %d is %s ± %s', (value, sigma, text, sigmaText) => {
  expect(roundedToError(value, sigma)).toEqual({ value: text, sigma: sigmaText });
});

test.each([null, 0, -1, NaN, Infinity])('an error of %p is unknown: six digits, and nothing in its place', (sigma) => {
  expect(roundedToError(589.158325, sigma)).toEqual({ value: '589.158', sigma: '' });
});

test.each([NaN, Infinity, -Infinity])('a value of %p is no number', (value) => {
  expect(roundedToError(value, 1)).toEqual({ value: '', sigma: '' });
});

test('never moves a value by more than half of the last digit of its error, and writes it as a plain number', () => {
  const value = fc.double({ min: -1e6, max: 1e6, noNaN: true });
  const sigma = fc.double({ min: 1e-7, max: 1e5, noNaN: true });
  fc.assert(
    fc.property(value, sigma, (v, s) => {
      const rounded = roundedToError(v, s);
      const last = 10 ** (Math.floor(Math.log10(Number(s.toPrecision(2)))) - 1);
      // the second term: the value itself is held to 2^-53 of it
      expect(Math.abs(Number(rounded.value) - v)).toBeLessThanOrEqual(0.5 * last * (1 + 1e-9) + Math.abs(v) * 2 ** -52);
      expect(Math.abs(Number(rounded.sigma) - s)).toBeLessThanOrEqual(0.05 * s * (1 + 1e-9)); // two digits: 5 % at worst, of 1.0...
      expect(rounded.value).toMatch(/^-?\d+(\.\d+)?$/);
      expect(rounded.sigma.replace(/\./, '').replace(/^0+/, '').replace(/0+$/, '').length).toBeLessThanOrEqual(2);
    }),
  );
});

test('numbers without errors keep their digits and lose only zeros', () => {
  expect([plain(0.108, 10), plain(61600000, 10), plain(-0.0000001234, 6), plain(-0, 6)]).toEqual(['0.108', '61600000', '-1.234e-7', '0']);
});
