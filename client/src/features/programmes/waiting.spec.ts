import { expect, test } from 'vitest';
import { anAnalysis, aSpectrum, aTargetSummary } from '../../test/things.js';
import { arrange, readView } from './target-view.js';
import { waitsForMachine, waitsForPeople } from './waiting.js';

const running = (progress: number) => aSpectrum({ id: `s${progress}`, analysis: anAnalysis({ phase: 'EXECUTING', progress }) });
const failed = aSpectrum({ id: 'failed', analysis: anAnalysis({ phase: 'ERROR' }) });
const TARGETS = [
  aTargetSummary({ id: 'a', name: 'Heron 19', open: 14, spectra: [running(0.2)] }),
  aTargetSummary({ id: 'b', name: 'Heron 4', open: 61, spectra: [aSpectrum({ createdAt: '2031-04-01T00:00:00Z' })] }),
  aTargetSummary({ id: 'c', name: 'Sedge Nebula', kind: 'nebula', spectra: [failed, running(0.7)] }),
  aTargetSummary({ id: 'd', name: 'Heron 33' }),
];

test('what waits for people: most open lines first, then what failed, then what is empty', () => {
  expect(waitsForPeople(TARGETS, 'reviewer').map(({ kind, target }) => `${kind} ${target.id}`)).toEqual([
    'decide b',
    'decide a',
    'failed c',
    'empty d',
  ]);
});

test('nothing waits for a reader, who can bring nothing forward', () => {
  expect(waitsForPeople(TARGETS, 'reader')).toEqual([]);
});

test('what the machine is at, the farthest first', () => {
  expect(waitsForMachine(TARGETS).map(({ spectrum }) => spectrum.id)).toEqual(['s0.7', 's0.2']);
});

test('targets are found by name and kind, and ordered as asked; numbers in names count as numbers', () => {
  const names = (query: string) => arrange(TARGETS, readView(new URLSearchParams(query))).map(({ name }) => name);
  expect(names('')).toEqual(['Heron 4', 'Heron 19', 'Heron 33', 'Sedge Nebula']);
  expect(names('order=name&name=hERON')).toEqual(['Heron 4', 'Heron 19', 'Heron 33']);
  expect(names('kind=nebula')).toEqual(['Sedge Nebula']);
  expect(names('order=newest')[0]).toBe('Heron 4');
});

test('an address with values that are not ours shows the usual view', () => {
  expect(readView(new URLSearchParams('kind=galaxy&order=toString'))).toEqual({ text: '', kind: '', order: 'waits' });
});
