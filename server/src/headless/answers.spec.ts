import { readSpectrum } from '@foreveil/shared';
import { answersOf, hintFor } from './answers.js';
import { readOptions } from './options.js';

const table = new TextEncoder().encode(
  `alpha,beta2\n${Array.from({ length: 30 }, (_, i) => `${1500 + ((i * 7) % 30)},${(i * 11) % 30}`).join('\n')}\n`,
);
const refusalOf = (corrections = {}) => {
  const result = readSpectrum(table, 'table.csv', corrections);
  if (result.ok) throw new Error('read instead of refused');
  return result.problem;
};

it('says which options answer a refusal, and names the columns', () =>
  expect(hintFor(refusalOf())).toBe('answer with --wavelength-column; columns: alpha, beta2'));

it('turns the options into corrections that let the file be read', () => {
  const answered = answersOf({ 'wavelength-column': 'alpha', 'flux-column': 'beta2', 'axis-unit': 'nm', 'error-column': 'none' });
  if ('problem' in answered) throw new Error(answered.problem);
  const result = readSpectrum(table, 'table.csv', answered.corrections);
  expect(result.ok && [result.reading.wavelengthColumn, result.reading.axisUnit.how]).toEqual(['alpha', 'corrected']);
});

it('goes along with the other options of the command line', () =>
  expect(readOptions(['a.fits', '--frame', 'barycentric', '--part', 'HDU 2 RED', '--delimiter', 'tab'])).toEqual({
    files: ['a.fits'],
    corrections: { frame: 'barycentric', place: 'HDU 2 RED', delimiter: '\t' },
  }));

it.each([
  ['--axis-unit', 'furlong'],
  ['--rest-wavelength', 'red'],
  ['--delimiter', 'dot'],
])('refuses %s %s and says what it takes', (flag, value) =>
  expect(readOptions(['a.fits', flag, value])).toEqual({ problem: expect.stringContaining(`${flag} takes`) as string }),
);

it('gives no hint where nothing answers', () => expect(hintFor({ code: 'empty', sentence: 'The file is empty.' })).toBe(''));
