import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { buildCurveData } from '../../../plot/curve-data.js';
import { NO_FILTER } from '../lines/filters.js';
import { lineRows } from '../lines/reading.js';
import { aResult, someSamples } from '../test/a-result.js';
import { firstView, mostTelling } from './first-view.js';
import { commandFor, type Key } from './keys.js';
import { readPageState, START, writePageState, type PageState } from './url-state.js';

describe('the address', () => {
  it('restores what was written into it', () => {
    const states: fc.Arbitrary<PageState> = fc.record({
      unit: fc.constantFrom('nm', 'angstrom', 'micron', 'wavenumber'),
      medium: fc.constantFrom('vacuum', 'air'),
      mode: fc.constantFrom('flux', 'normalised'),
      base: fc.constantFrom('zero', 'close'),
      lineNm: fc.option(fc.integer({ min: 1, max: 1e8 }).map((n) => n / 1e5)),
      range: fc.option(fc.integer({ min: 1, max: 1e6 }).map((n) => ({ fromNm: n / 1e4, toNm: n / 1e4 + 1 }))),
      filter: fc.record({
        family: fc.constantFrom(null, 'stellar', 'unidentified'),
        state: fc.constantFrom(null, 'accepted'),
        system: fc.constantFrom(null, 's1'),
        text: fc.string(),
        inView: fc.boolean(),
        sort: fc.constantFrom('wavelength', 'probability', 'state'),
        descending: fc.boolean(),
      }),
    });
    fc.assert(
      fc.property(states, (state) => {
        const back = readPageState(new URLSearchParams(writePageState(state).toString()));
        expect(back.filter).toEqual(state.filter);
        expect({ ...back, range: null, filter: null }).toEqual({ ...state, range: null, filter: null });
        if (state.range) expect(back.range!.fromNm).toBeCloseTo(state.range.fromNm, 4);
      }),
    );
  });

  it('takes nonsense for left out', () => {
    const query = new URLSearchParams('from=7&to=3&unit=parsec&view=sideways&line=-4&sort=colour.down&inview=yes&family=feline');
    expect(readPageState(query)).toEqual({ ...START, filter: { ...NO_FILTER, descending: true } });
  });

  it('stays short for a plain view', () => expect(writePageState(START).toString()).toBe('unit=nm&medium=vacuum'));
});

describe('keys', () => {
  const key = (name: string, held: Partial<Key> = {}): Key => ({
    key: name,
    shiftKey: false,
    ctrlKey: false,
    metaKey: false,
    altKey: false,
    ...held,
  });

  it.each([
    [key('ArrowRight'), { do: 'cursor', pixels: 1 }],
    [key('ArrowLeft', { shiftKey: true }), { do: 'cursor', pixels: -10 }],
    [key('ArrowRight', { ctrlKey: true }), { do: 'feature', direction: 1 }],
    [key('3'), { do: 'choose', candidate: 3 }],
    [key('u'), { do: 'choose', candidate: 'unidentified' }],
    [key('a'), { do: 'act', action: 'accept' }],
    [key('x'), { do: 'act', action: 'reject' }],
    [key('0'), { do: 'whole' }],
    [key('['), { do: 'history', direction: -1 }],
  ])('%j does %j', (pressed, command) => expect(commandFor(pressed)).toEqual(command));

  it('leaves to the browser what is its own', () => {
    for (const pressed of [
      key('a', { ctrlKey: true }),
      key('r', { metaKey: true }),
      key('ArrowLeft', { altKey: true }),
      key('Tab'),
      key('F5'),
    ])
      expect(commandFor(pressed)).toBeNull();
  });
});

describe('the first view', () => {
  const result = aResult();
  const data = buildCurveData(someSamples(), result.continuum, result.features);
  const whole = { fromNm: 587, toNm: 591 };

  it('is about the clearest interstellar line, single samples in sight', () => {
    const rows = lineRows(result, []);
    expect(mostTelling(rows)?.feature.index).toBe(2);
    const view = firstView(data, rows, whole, 300);
    expect((view.fromNm + view.toNm) / 2).toBeCloseTo(589.15, 1);
    expect((view.toNm - view.fromNm) / 0.002).toBeLessThan(300 / 1.5);
  });

  it('is everything where nothing was found', () => expect(firstView(data, [], whole, 300)).toEqual(whole));
});
