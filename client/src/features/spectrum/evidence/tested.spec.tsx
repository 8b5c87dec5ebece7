import type { Candidate, Feature, Reliability } from '@foreveil/shared';
import { screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { show } from '../../../test/show.js';
import { fromCandidate, unidentified } from '../lines/reading.js';
import { FEATURES } from '../test/a-result.js';
import { sentenceOf, Tested } from './Tested.js';

const feature: Feature = FEATURES[2]!;
const first: Candidate = feature.candidates[0]!;
const reliability: Reliability = {
  programVersion: '9.9.9',
  lineListVersion: '1',
  sources: 'abc',
  seed: 1,
  spectra: { sightline: 3 },
  families: [
    {
      family: 'interstellar',
      first: [{ from: 0.95, to: 0.99, count: 240, right: 235, mean: 0.972 }],
      further: [{ from: 0.95, to: 0.99, count: 3, right: 2, mean: 0.96 }],
    },
    { family: 'unidentified', first: [{ from: 0.5, to: 0.7, count: 12, right: 7, mean: 0.6 }], further: [] },
  ],
};

describe('what tests say of a probability', () => {
  it('is a count of readings like it, by family and range', () => {
    expect(sentenceOf(fromCandidate({ ...first, probability: 0.973 }), feature, reliability)).toBe(
      'Of 240 readings of clouds rated 0.95 to 0.99, 235 were right in tests.',
    );
    expect(sentenceOf(unidentified(0.55), feature, reliability)).toBe(
      'Of 12 readings as not listed rated 0.5 to 0.7, 7 were right in tests.',
    );
  });

  it('keeps readings that came second apart, and says when cases are few', () => {
    const second = fromCandidate({ ...first, systemId: 'another', probability: 0.96 });
    expect(sentenceOf(second, feature, reliability)).toBe(
      'Of 3 readings of clouds ranked second or later and rated 0.95 to 0.99, 2 were right in tests. That is too few to lean on.',
    );
  });

  it('says when the tests hold nothing like it', () => {
    expect(sentenceOf(fromCandidate({ ...first, probability: 0.2 }), feature, reliability)).toBe(
      'The tests hold no readings of clouds rated like this.',
    );
  });

  it('names the version that was tested when the analysis came from another, and leads to all tests', () => {
    show(<Tested reading={fromCandidate(first)} feature={feature} programVersion="0.0.1" reliability={reliability} />);
    expect(screen.getByText(/Tested was version 9\.9\.9 of the program, not 0\.0\.1\./)).toBeTruthy();
    expect(screen.getByRole('link', { name: 'How probabilities are tested' }).getAttribute('href')).toBe('/probabilities');
  });
});
