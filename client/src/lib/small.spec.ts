import { expect, test } from 'vitest';
import { anAnalysis } from '../test/things.js';
import { analysisWords } from './analysis-words.js';
import { looksLikeEmission } from './emission.js';
import { pagePaths, safeNext } from './paths.js';
import { speciesName } from './species.js';
import { ago, day } from './time.js';

test('after signing in one goes to a page of ours, never elsewhere', () => {
  expect(safeNext('/programmes/p?name=x')).toBe('/programmes/p?name=x');
  for (const next of [null, '', 'https://elsewhere.example', '//elsewhere.example', '/\\elsewhere.example', '/sign-in?next=/']) {
    expect(safeNext(next)).toBe(pagePaths.programmes);
  }
});

test('where an analysis stands, in words', () => {
  expect(analysisWords(anAnalysis({ phase: 'EXECUTING', step: 'identification', progress: 0.384 }))).toBe('ranking candidates, 38 %');
  expect(analysisWords(anAnalysis({ features: 1 }))).toBe('1 feature');
  expect(analysisWords(null)).toBe('not analysed yet');
});

test('times are told by their distance, dates as they stand in the file', () => {
  const now = Date.parse('2031-03-14T12:00:00Z');
  expect(ago('2031-03-14T11:59:40Z', now)).toBe('just now');
  expect(ago('2031-03-14T10:00:00Z', now)).toBe('2 h ago');
  expect(ago('2031-03-13T11:00:00Z', now)).toBe('yesterday');
  expect(ago('2030-12-01T11:00:00Z', now)).toBe('1 Dec 2030');
  expect(day('2031-03-14T23:59:59.9')).toBe('14 Mar 2031');
  expect(day('about noon')).toBe('about noon');
});

test('species are written as chemists do', () => {
  expect(['H2O', 'CH+', 'O2', 'Ca II', 'DIB'].map(speciesName)).toEqual(['H₂O', 'CH⁺', 'O₂', 'Ca II', 'DIB']);
});

test('bright lines are told from dark ones, and noise is neither', () => {
  const flat = new Array<number | null>(400).fill(1);
  const peaks = flat.map((v, i) => (i % 40 === 0 ? 9 : v));
  const dips = flat.map((v, i) => (i % 40 === 0 ? 0.1 : v));
  expect(looksLikeEmission(flat, peaks)).toBe(true);
  expect(looksLikeEmission(dips, flat)).toBe(false);
  expect(
    looksLikeEmission(
      flat.map(() => 0.9),
      flat.map(() => 1.1),
    ),
  ).toBe(false);
  expect(looksLikeEmission([null], [null])).toBe(false);
});
