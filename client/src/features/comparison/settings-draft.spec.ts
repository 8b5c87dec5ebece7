import { DEFAULT_COMPARISON_SETTINGS } from '@foreveil/shared';
import { expect, test } from 'vitest';
import { changesOf, draftOf, readField, settingsOf } from './settings-draft.js';

const WAS = { ...DEFAULT_COMPARISON_SETTINGS, extraCloudsKmPerS: [-12.5, 4] };

test('what is written into the fields reads back as it was', () => {
  expect(settingsOf(draftOf(WAS))).toEqual(WAS);
  expect(changesOf(WAS, settingsOf(draftOf(WAS))!)).toEqual([]);
});

test('decimal commas are numbers, clouds stand apart by semicolons, and none is none', () => {
  expect(settingsOf({ ...draftOf(WAS), offsetBKmPerS: '−2,5', extraCloudsKmPerS: '7,25; -3;' })).toMatchObject({
    offsetBKmPerS: -2.5,
    extraCloudsKmPerS: [7.25, -3],
  });
  expect(settingsOf({ ...draftOf(WAS), extraCloudsKmPerS: ' ' })!.extraCloudsKmPerS).toEqual([]);
});

test('what the server would refuse is said at its field and gives no settings', () => {
  expect(readField('offsetAKmPerS', 'fast').wrong).toMatch(/Write a number/);
  expect(readField('offsetAKmPerS', '1001').wrong).toMatch(/1000 km\/s/);
  expect(readField('matchKmPerS', '0').wrong).toMatch(/0\.05/);
  expect(readField('extraCloudsKmPerS', '1;2;3;4;5;6;7;8;9').wrong).toMatch(/8 clouds/);
  expect(settingsOf({ ...draftOf(WAS), matchKmPerS: '' })).toBeNull();
});

test('says which settings the next run changes, and only those', () => {
  const words = changesOf(WAS, { ...WAS, offsetBKmPerS: 2, extraCloudsKmPerS: [4, 9] });
  expect(words).toHaveLength(3);
  expect(words[0]).toMatch(/of B .*\+2\.00 km\/s/);
  expect(words[1]).toMatch(/\+9\.00 km\/s is measured/);
  expect(words[2]).toMatch(/12\.50 km\/s is no longer/);
});
