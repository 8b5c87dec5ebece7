import type { Identification } from '@foreveil/shared';
import { expect, test } from 'vitest';
import { wavelengthDisplay } from '../../lib/wavelength.js';
import { anIdentification } from '../../test/things.js';
import { asTsv, linesIn } from './lines-view.js';
import { agreedSystems } from './systems.js';

let id = 0;
const line = (velocityKmPerS: number | null, parts: Partial<Identification> = {}) =>
  anIdentification({ id: `i${id++}`, velocityKmPerS, velocitySigmaKmPerS: 0.1, ...parts });

test('lines of one system of one spectrum are one system with the weighted mean velocity', () => {
  const [system, ...others] = agreedSystems([line(-4.2, { velocitySigmaKmPerS: 0.1 }), line(-3.8, { velocitySigmaKmPerS: 0.2 })]);
  expect(others).toEqual([]);
  // weights 100 and 25: (-4.2 * 100 - 3.8 * 25) / 125
  expect(system!.velocityKmPerS).toBeCloseTo(-4.12, 10);
  expect(system!.sigmaKmPerS).toBeCloseTo(1 / Math.sqrt(125), 10);
});

test('the same gas in another spectrum joins, another velocity and another family do not', () => {
  const systems = agreedSystems([
    line(-4.1),
    line(-4.0, { spectrumId: 's2', spectrumLabel: 'low res.', systemId: 'x' }),
    line(-25.98, { systemId: 's2' }),
    line(-4.05, { family: 'stellar', systemId: 's3' }),
  ]);
  expect(systems.map(({ family, lines }) => [family, lines.length])).toEqual([
    ['stellar', 1],
    ['interstellar', 2],
    ['interstellar', 1],
  ]);
  expect(systems[1]!.seenIn).toEqual(['échelle', 'low res.']);
});

test('air of two nights stays apart, because the Earth moved between them', () => {
  const air = { family: 'telluric', systemId: 'air' };
  expect(agreedSystems([line(11.07, air), line(-8.2, { ...air, spectrumId: 's2' })])).toHaveLength(2);
});

test('lines in no list stand together at the end, without a velocity', () => {
  const none = { lineId: null, species: null, family: null, systemId: null };
  const systems = agreedSystems([line(null, none), line(null, { ...none, spectrumId: 's2' }), line(-4)]);
  expect(systems.map(({ family, velocityKmPerS, lines }) => [family, velocityKmPerS, lines.length])).toEqual([
    ['interstellar', -4, 1],
    [null, null, 2],
  ]);
});

test('every line is in exactly one system', () => {
  const lines = [-40, -4, -4.1, 3, 12].flatMap((v, i) => [
    line(v, { systemId: `s${i}` }),
    line(v + 0.05, { systemId: `s${i}`, spectrumId: 's2' }),
  ]);
  const ids = agreedSystems(lines).flatMap((system) => system.lines.map((one) => one.id));
  expect([...ids].sort()).toEqual(lines.map((one) => one.id).sort());
});

test('lines of a state come by wavelength at rest, those in no list by where they were seen', () => {
  const lines = [
    line(0, { restNm: 600 }),
    line(null, { restNm: null, wavelengthNm: 590 }),
    line(0, { restNm: 580 }),
    line(0, { state: 'rejected' }),
  ];
  expect(linesIn(lines, 'accepted').map((one) => one.restNm)).toEqual([580, null, 600]);
});

test('copied text has units in its header, all digits, plain minus signs and one line a row', () => {
  const [head, row, ...rest] = asTsv([line(-4.18, { spectrumLabel: 'a\tb\nc' })], wavelengthDisplay('nm', 'vacuum')).split('\n');
  expect(rest).toEqual([]);
  const cells = row!.split('\t');
  expect(cells).toHaveLength(head!.split('\t').length);
  expect(head).toContain('rest wavelength (nm vac)');
  expect(cells[1]).toBe('589.1583');
  expect(cells[5]).toBe('-4.18');
  expect(cells[7]).toBe('a b c');
});
