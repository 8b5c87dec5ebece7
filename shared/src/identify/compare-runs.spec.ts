import type { Candidate, Feature } from './analysis.js';
import { compareRuns } from './compare-runs.js';

const reading = (species: string, probability = 0.9): Candidate[] => [
  { lineId: species, species, restNm: 500, family: 'stellar', probability } as Partial<Candidate> as Candidate,
];
const feature = (wavelengthNm: number, species: string | null = 'Fe I', more: Partial<Feature> = {}): Feature =>
  ({
    kind: 'dip',
    wavelengthNm,
    fwhmNm: 0.1,
    candidates: species ? reading(species) : [],
    unidentifiedProbability: species ? 0.1 : 1,
    ...more,
  }) as Partial<Feature> as Feature;
const nm = (features: readonly Feature[]) => features.map((f) => f.wavelengthNm);

test('tells what was gained, lost and read otherwise, and how much stayed', () => {
  const before = { features: [feature(500), feature(501), feature(502), feature(503, null)] };
  const after = { features: [feature(500.01), feature(502.03, 'Ti II'), feature(503, 'Ca I'), feature(504)] };
  const { gained, lost, renamed, same } = compareRuns(before, after);
  expect([nm(gained), nm(lost), same]).toEqual([[504], [501], 1]);
  expect(renamed.map(({ was, is }) => [was?.split(' 5')[0] ?? null, is?.split(' 5')[0]])).toEqual([
    ['Fe I', 'Ti II'],
    [null, 'Ca I'],
  ]);
});

test('does not take a peak for a dip, nor one feature for two', () => {
  const before = { features: [feature(500)] };
  const { gained, lost } = compareRuns(before, { features: [feature(500, 'Fe I', { kind: 'peak' })] });
  expect([nm(gained), nm(lost)]).toEqual([[500], [500]]);
  const split = compareRuns(before, { features: [feature(499.97), feature(500.02)] });
  expect([nm(split.gained), nm(split.lost), split.same]).toEqual([[499.97], [], 1]);
});

test('is the same backwards: gained becomes lost', () => {
  const [a, b] = [{ features: [feature(500), feature(501)] }, { features: [feature(501.02), feature(505)] }];
  const [there, back] = [compareRuns(a, b), compareRuns(b, a)];
  expect(nm(there.gained)).toEqual(nm(back.lost));
  expect(nm(there.lost)).toEqual(nm(back.gained));
  expect(there.same).toBe(back.same);
});
