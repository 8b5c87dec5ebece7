import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { PlotFeature, Stave } from './plot-feature.js';
import { labelWidth, layoutStaves } from './stave-layout.js';

const stave: Stave = { id: 's1', family: 'interstellar', word: 'cloud', velocityKmPerS: -4 };
const feature = (index: number, nm: number, priority = 10, label = `Na I ${nm.toFixed(3)}`): PlotFeature => ({
  index,
  kind: 'dip',
  wavelengthNm: nm,
  fwhmNm: 0.01,
  depth: 0.5,
  equivalentWidthNm: 0.005,
  family: 'interstellar',
  state: 'proposed',
  staveId: 's1',
  label,
  priority,
});
const lay = (features: PlotFeature[], selected: number | null = null) =>
  layoutStaves([stave], features, { fromNm: 500, toNm: 600 }, 1000, selected)[0]!;

describe('a staff', () => {
  it('shows every line in view, none twice, and counts those without a label', () => {
    const lines = fc.array(fc.double({ min: 480, max: 620, noNaN: true }), { maxLength: 80 });
    fc.assert(
      fc.property(lines, (nms) => {
        const features = [...nms].sort((a, b) => a - b).map((nm, i) => feature(i, nm, (i * 37) % 11));
        const row = lay(features);
        expect(row.marks.map((m) => m.feature.index)).toEqual(
          features.filter((f) => f.wavelengthNm >= 500 && f.wavelengthNm < 600).map((f) => f.index),
        );
        expect(row.unlabelled).toBe(row.marks.filter((m) => m.standing !== 'labelled').length);
      }),
    );
  });

  it('lets no label run into another or into a mark', () => {
    const features = Array.from({ length: 40 }, (_, i) => feature(i, 500 + i * 2.3, i % 7));
    const row = lay(features);
    const marks = row.marks.filter((m) => m.standing !== 'tick');
    const labels = row.marks
      .filter((m) => m.standing === 'labelled')
      .map((m) => ({ from: m.x + 9, to: m.x + 9 + labelWidth(m.feature.label) }));
    expect(labels.length).toBeGreaterThan(0);
    for (const { from, to } of labels) {
      expect(marks.filter((m) => m.x > from && m.x < to + 5)).toEqual([]);
      expect(labels.filter((other) => other.from < to && other.to > from)).toHaveLength(1);
    }
  });

  it('gives the selected line its label even where there is no room', () => {
    const crowd = Array.from({ length: 9 }, (_, i) => feature(i, 550 + i, 100));
    expect(lay(crowd).marks[3]!.standing).not.toBe('labelled');
    expect(lay(crowd, 3).marks[3]!.standing).toBe('labelled');
  });

  it('keeps the weightier of two marks that cover each other, and draws the other as a tick', () => {
    const row = lay([feature(0, 550, 5), feature(1, 550.2, 50)]);
    expect(row.marks.map((m) => m.standing)).toEqual(['tick', 'labelled']);
  });

  it('does not repeat a label nearby', () => {
    const row = lay([feature(0, 520, 9, 'H₂O'), feature(1, 528, 8, 'H₂O'), feature(2, 560, 7, 'H₂O')]);
    expect(row.marks.map((m) => m.standing)).toEqual(['labelled', 'mark', 'labelled']);
  });
});
