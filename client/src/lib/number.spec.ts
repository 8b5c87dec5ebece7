import { expect, test } from 'vitest';
import { errorParts, fileSize, fixed, parseNumber, percent, probability, signed, withError } from './number.js';

test('digits follow the error, which keeps two significant ones', () => {
  expect(withError(4226.728, 0.0213)).toBe('4226.728 ± 0.021');
  expect(withError(149.68, 0.4)).toBe('149.68 ± 0.40');
  expect(withError(9432, 213)).toBe('9430 ± 210');
  expect(withError(23452, 1830)).toBe('23\u202f500 ± 1800');
});

test('an error that rounds up to the next decade still shows two digits', () => {
  expect(withError(1.23456, 0.0996)).toBe('1.23 ± 0.10');
  expect(withError(12.345, 0.996)).toBe('12.3 ± 1.0');
});

test('a value without a known error shows no invented digits, and no error', () => {
  for (const sigma of [null, NaN, 0, -1]) expect(errorParts(12.5, sigma)).toEqual({ value: '12.5', sigma: null });
  expect(withError(null, 0.1)).toBe('—');
  expect(withError(NaN, 0.1)).toBe('—');
});

test('minus is U+2212, never a hyphen, and zero has no sign', () => {
  expect(fixed(-3.98, 2)).toBe('\u22123.98');
  expect(signed(-3.98, 2)).toBe('\u22123.98');
  expect(signed(8.94, 2)).toBe('+8.94');
  expect(fixed(-0.001, 2)).toBe('0.00');
  expect(signed(0.001, 2)).toBe('0.00');
  expect(withError(-25.98, 0.04, true)).toBe('\u221225.980 ± 0.040');
});

test('thousands are parted from 10 000 on', () => {
  expect(fixed(5000, 0)).toBe('5000');
  expect(fixed(60000, 0)).toBe('60\u202f000');
  expect(fixed(-1234567.25, 2)).toBe('\u22121\u202f234\u202f567.25');
});

test('a probability is never rounded to certainty', () => {
  expect(probability(0.973)).toBe('0.973');
  expect(probability(0.99996)).toBe('>0.999');
  expect(probability(0.00001)).toBe('<0.001');
});

test('numbers are taken as people type them', () => {
  expect(parseNumber(' 6562.8 ')).toBe(6562.8);
  expect(parseNumber('6.5628e3')).toBe(6562.8);
  expect(parseNumber('588,995')).toBe(588.995);
  expect(parseNumber('\u22123.98')).toBe(-3.98);
  expect(parseNumber('42 000')).toBe(42000);
  for (const text of ['', 'abc', '1.2.3', '12px', '--3']) expect(parseNumber(text)).toBeNull();
});

test('sizes and shares', () => {
  expect(fileSize(999)).toBe('999 B');
  expect(fileSize(1_140_000)).toBe('1.1 MB');
  expect(percent(0.384)).toBe('38 %');
});
