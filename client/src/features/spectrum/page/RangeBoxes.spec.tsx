import { screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it } from 'vitest';
import { wavelengthDisplay } from '../../../lib/wavelength.js';
import { ViewStore } from '../../../plot/view.js';
import { show } from '../../../test/show.js';
import { RangeBoxes } from './RangeBoxes.js';

const boxes = (unit: 'nm' | 'angstrom' | 'wavenumber' = 'nm') => {
  const view = new ViewStore({ fromNm: 400, toNm: 700 }, { fromNm: 500, toNm: 510 });
  show(<RangeBoxes view={view} display={wavelengthDisplay(unit, 'vacuum')} />);
  const [from, to] = screen.getAllByRole('textbox') as [HTMLElement, HTMLElement];
  const type = async (box: HTMLElement, text: string) => {
    await userEvent.clear(box);
    await userEvent.type(box, `${text}{Enter}`);
  };
  return { view, from, to, type };
};

describe('the range boxes', () => {
  it('move the window, with a decimal comma too', async () => {
    const { view, from, to, type } = boxes();
    await type(from, '505,5');
    expect(view.get()).toEqual({ fromNm: 505.5, toNm: 510 });
    await type(to, '520');
    expect(view.get()).toEqual({ fromNm: 505.5, toNm: 520 });
    view.back();
    expect(view.get().toNm).toBe(510);
  });

  it('take the window along when one end is typed beyond the other', async () => {
    const { view, from, to, type } = boxes();
    await type(from, '600');
    expect(view.get()).toEqual({ fromNm: 600, toNm: 610 });
    await type(to, '450');
    expect(view.get()).toEqual({ fromNm: 440, toNm: 450 });
  });

  it('read and show the unit that is chosen', async () => {
    const { view, from, type } = boxes('angstrom');
    expect(from).toHaveValue('5000.0');
    await type(from, '5050');
    expect(view.get().fromNm).toBeCloseTo(505, 9);
  });

  it('leave the window alone for what is no number', async () => {
    const { view, from, type } = boxes();
    await type(from, 'sodium');
    expect(view.get()).toEqual({ fromNm: 500, toNm: 510 });
    expect(from).toHaveValue('500.00');
  });
});
