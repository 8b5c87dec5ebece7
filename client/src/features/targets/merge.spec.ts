import { expect, test } from 'vitest';
import { changed, mergeFacts, type TargetFacts } from './merge.js';

const BASE: TargetFacts = { name: 'Heron 4', kind: 'star', raDeg: 318.53, decDeg: 48.21, notes: '' };

test('changes of different fields both stand, without a question', () => {
  const { settled, conflicts } = mergeFacts(BASE, { ...BASE, notes: 'theirs' }, { ...BASE, name: 'Heron 4 A', raDeg: null });
  expect(conflicts).toEqual([]);
  expect(settled).toEqual({ ...BASE, notes: 'theirs', name: 'Heron 4 A', raDeg: null });
});

test('the same field changed differently is a question; changed alike it is none', () => {
  const { settled, conflicts } = mergeFacts(BASE, { ...BASE, notes: 'theirs', kind: 'nebula' }, { ...BASE, notes: 'mine', kind: 'nebula' });
  expect(conflicts).toEqual(['notes']);
  expect(settled).toEqual({ ...BASE, notes: 'theirs', kind: 'nebula' });
});

test('a request names only what differs', () => {
  expect(changed(BASE, { ...BASE, decDeg: null })).toEqual({ decDeg: null });
  expect(changed(BASE, BASE)).toEqual({});
});
