import { describe, expect, it } from 'vitest';
import { wavelengthDisplay } from '../../../lib/wavelength.js';
import { anIdentification } from '../../../test/things.js';
import { aResult, FEATURES } from '../test/a-result.js';
import { asTsv } from './columns.js';
import { NO_FILTER, nextUndecided, passes, shownRows } from './filters.js';
import { dueLines, plotFeature, staves } from './plot-features.js';
import { choices, lineRows } from './reading.js';

const result = aResult();
const accepted = anIdentification({ featureIndex: 4, lineId: 'NaI-589.756', systemId: 'cloud' });
const rows = lineRows(result, [accepted]);
const whole = { fromNm: 0, toNm: 1e4 };
const indices = (list: readonly { feature: { index: number } }[]) => list.map((r) => r.feature.index);
const display = wavelengthDisplay('nm', 'vacuum');

describe('a row', () => {
  it('reads as the best candidate, or as unidentified when that is likelier', () => {
    expect(rows.map((r) => r.reading.species)).toEqual(['He I', null, 'Na I', 'H2O', 'Na I']);
    expect(rows[1]!.staveId).toBe('unidentified');
  });

  it('reads as people decided, even against the ranking', () => {
    const water = anIdentification({ featureIndex: 2, lineId: 'H2O-589.127', systemId: 'air', state: 'proposed' });
    const row = lineRows(result, [water])[2]!;
    expect(row.reading).toMatchObject({ species: 'H2O', family: 'telluric', probability: 0.021 });
    expect(row.staveId).toBe('air');
    expect(lineRows(result, [anIdentification({ featureIndex: 2, lineId: null, state: 'accepted' })])[2]!.reading.family).toBe(
      'unidentified',
    );
  });

  it('keeps a reading that a new analysis no longer offers, on the nearest staff of its family', () => {
    const old = anIdentification({ featureIndex: 2, lineId: 'gone', systemId: 'gone', species: 'Fe I', velocityKmPerS: -5 });
    const row = lineRows(result, [old])[2]!;
    expect(row.reading).toMatchObject({ species: 'Fe I', candidate: null });
    expect(row.staveId).toBe('cloud');
  });

  it('offers at most nine listed readings, and always "unidentified"', () => {
    const many = { ...FEATURES[2]!, candidates: Array.from({ length: 14 }, () => FEATURES[2]!.candidates[0]!) };
    expect(choices(many)).toHaveLength(10);
    expect(choices({ ...many, candidates: [] }).map((c) => c.lineId)).toEqual([null]);
  });
});

describe('filters', () => {
  it('pass by family, state, system, view and text together', () => {
    const pass = (change: object, view = whole) => indices(shownRows(rows, { ...NO_FILTER, ...change }, view));
    expect(pass({ family: 'interstellar' })).toEqual([2, 4]);
    expect(pass({ state: 'accepted' })).toEqual([4]);
    expect(pass({ family: 'interstellar', state: 'proposed' })).toEqual([2]);
    expect(pass({ system: 'air' })).toEqual([3]);
    expect(pass({ inView: true }, { fromNm: 588, toNm: 589.2 })).toEqual([1, 2]);
    expect(pass({ text: 'na 589.15' })).toEqual([2]);
    expect(pass({ text: 'H₂O' })).toEqual([3]);
    expect(pass({ text: 'unidentified' })).toEqual([1]);
    expect(pass({ text: 'nothing like it' })).toEqual([]);
  });

  it('sort by any column both ways, ties by wavelength', () => {
    const sorted = (sort: string, descending = false) =>
      indices(shownRows(rows, { ...NO_FILTER, sort, descending } as typeof NO_FILTER, whole));
    expect(sorted('wavelength')).toEqual([0, 1, 2, 3, 4]);
    expect(sorted('wavelength', true)).toEqual([4, 3, 2, 1, 0]);
    expect(sorted('probability')).toEqual([1, 3, 2, 4, 0]);
    expect(sorted('reading')).toEqual([3, 0, 2, 4, 1]);
    expect(sorted('state', true)[0]).toBe(4);
  });

  it('take the text as words, not as a pattern', () => expect(passes(rows[0]!, { ...NO_FILTER, text: '(' })).toBe(false));
});

describe('the next line to be decided', () => {
  it('skips decided ones and goes round', () => {
    expect(nextUndecided(rows, 3)?.feature.index).toBe(0);
    expect(nextUndecided(rows, 0, -1)?.feature.index).toBe(3);
    expect(nextUndecided(rows, null)?.feature.index).toBe(0);
  });
  it('is none when all are decided', () => expect(nextUndecided([rows[4]!], null)).toBeNull());
});

describe('the staves', () => {
  it('stand in order, star first, unidentified last', () => {
    expect(staves(result, rows).map((s) => [s.word, s.velocityKmPerS])).toEqual([
      ['star', 8.94],
      ['cloud', -3.98],
      ['air', 11.07],
      ['unidentified', null],
    ]);
  });
  it('carry short labels: bare species in the air', () => {
    expect(rows.map((r) => plotFeature(r, display).label)).toEqual(['He I 587.729', '588.780', 'Na I 589.158', 'H₂O', 'Na I 589.756']);
  });
  it('show what is due and unseen beside the selected line, with the width that is due', () => {
    expect(dueLines(result, rows[2]!, display)).toEqual([
      { staveId: 'cloud', nm: expect.closeTo(590.0922, 3), label: 'K I 590.100, 30 mÅ expected, missing' },
    ]);
    expect(dueLines(result, null, display)).toEqual([]);
  });
});

describe('the copied table', () => {
  it('has a header with units and full precision', () => {
    const [head, , , sodium] = asTsv(rows, display).split('\n');
    expect(head).toContain('wavelength (nm vac)\terror (nm)\tW (mA, positive in absorption)');
    expect(sodium!.split('\t')).toEqual([
      '589.1501',
      '0.0001',
      '149.7',
      '0.4',
      expect.any(String),
      'Na I',
      '589.1583',
      '-4.18',
      '0.03',
      '0.973',
      'proposed',
    ]);
  });
});
