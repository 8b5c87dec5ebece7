import type { Reliability } from '@foreveil/shared';
import { screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { show } from '../../test/show.js';
import { Tests } from './ProbabilitiesPage.js';

const reliability: Reliability = {
  programVersion: '1.2.3',
  lineListVersion: '2026.1',
  sources: 'abc',
  seed: 5,
  spectra: { nebula: 2, 'cool-star': 3 },
  families: [
    {
      family: 'stellar',
      first: [
        { from: 0.5, to: 0.9, count: 0, right: 0, mean: 0 },
        { from: 0.9, to: 1, count: 100, right: 91, mean: 0.95 },
      ],
      further: [],
    },
    { family: 'nebular', first: [], further: [] },
  ],
};

describe('the page of tests', () => {
  it('gives every family its diagram and its numbers with intervals, and says what was simulated', () => {
    show(<Tests reliability={reliability} />);
    const stars = screen.getByRole('region', { name: 'Lines of stars' });
    expect(within(stars).getByText('On average stated and true share differ by 0.040.')).toBeTruthy();
    expect(within(stars).getByRole('img', { name: /Stated probability against the share that was right/ })).toBeTruthy();
    const [, empty, full] = within(stars).getAllByRole('row');
    expect(
      within(empty!)
        .getAllByRole('cell')
        .map((cell) => cell.textContent),
    ).toEqual(['', '0', '']);
    // Wilson at one sigma: 91 of 100
    expect(
      within(full!)
        .getAllByRole('cell')
        .map((cell) => cell.textContent),
    ).toEqual(['91', '100', '88–93 %']);
    expect(screen.getByText(/nebula 2, cool star 3/)).toBeTruthy();
  });

  it('says when a family was not met', () => {
    show(<Tests reliability={reliability} />);
    expect(within(screen.getByRole('region', { name: 'Lines of nebulae' })).getByText('None in the tests.')).toBeTruthy();
  });
});
