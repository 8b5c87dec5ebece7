import { expect, test } from 'vitest';
import { declination, parseCoordinate, position, rightAscension } from './position.js';

test('positions are shown in hours and degrees', () => {
  // 21h 14m 07.31s = 15 * (21 + 14/60 + 7.31/3600) degrees
  expect(rightAscension(318.530458333)).toBe('21 14 07.31');
  expect(declination(48.214333333)).toBe('+48 12 51.6');
  expect(declination(-0.5)).toBe('\u221200 30 00.0');
  expect(position(318.530458333, null)).toBe('21 14 07.31');
  expect(position(null, null)).toBeNull();
});

test('rounding carries over into minutes and degrees instead of showing 60 seconds', () => {
  expect(declination(12.9999999)).toBe('+13 00 00.0');
  expect(rightAscension(359.9999999)).toBe('00 00 00.00');
});

test('coordinates are taken in degrees or in three numbers', () => {
  expect(parseCoordinate('21 14 07.31', 'hours')).toBeCloseTo(318.530458333, 8);
  expect(parseCoordinate('21h14m07.31s', 'hours')).toBeCloseTo(318.530458333, 8);
  expect(parseCoordinate('318,5305', 'hours')).toBe(318.5305);
  expect(parseCoordinate('\u221200 30 00', 'degrees')).toBe(-0.5);
  for (const text of ['99 99', '1 2 3 4', 'north', '12 30.5 61']) expect(parseCoordinate(text, 'degrees')).toBeNull();
});

test('what is shown reads back as what it was, to the last digit shown', () => {
  for (const deg of [0, 0.0041, 83.82208, 201.36506, 318.5304583, 359.9]) {
    expect(Math.abs(parseCoordinate(rightAscension(deg), 'hours')! - deg)).toBeLessThan(0.5 * 0.01 * (15 / 3600) + 1e-9);
  }
});
