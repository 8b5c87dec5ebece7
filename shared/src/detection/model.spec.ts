import fc from 'fast-check';
import { dip, grid, peak, samples } from '../../../test/support/blends.js';
import type { Component, NormalisedSamples } from '../profiles/index.js';
import { blendsOf, LineModel } from './model.js';

const LIMITS = () => ({ narrowest: 0.01, widest: 5 });
const WAVELENGTH = grid(498, 510, 0.01);
const modelOf = (data: NormalisedSamples, components: readonly Component[]) => {
  const model = new LineModel(data, LIMITS);
  model.add(components);
  model.refresh();
  return model;
};
const blank = samples([], 100, undefined, WAVELENGTH);

const components = fc
  .array(
    fc.record({
      centre: fc.double({ min: 498, max: 510, noNaN: true }),
      fwhm: fc.double({ min: Math.log(0.02), max: Math.log(3), noNaN: true }).map(Math.exp),
      kind: fc.constantFrom('dip', 'peak'),
    }),
    { minLength: 1, maxLength: 60 },
  )
  .map((list) => list.map(({ centre, fwhm, kind }) => (kind === 'dip' ? dip : peak)(centre, fwhm, 0.3)));

const centres = (list: readonly Component[]) => list.map(({ centre }) => centre).sort((a, b) => a - b);

/** What overlaps a blend, by looking at every component. */
function overlappingByHand(model: LineModel, blend: readonly Component[]): number[] {
  const from = Math.min(...blend.map((c) => c.centre - c.reach));
  const to = Math.max(...blend.map((c) => c.centre + c.reach));
  return centres(model.components.filter((c) => !blend.includes(c) && c.centre + c.reach > from && c.centre - c.reach < to));
}

describe('line model', () => {
  it('is the continuum where it has no components', () => expect(modelOf(blank, []).value.every((v) => v === 1)).toBe(true));

  it('multiplies dips and adds peaks', () => {
    const [a, b, p] = [dip(502, 0.3, 0.5), dip(502.1, 0.2, 0.4), peak(502.05, 0.4, 2)];
    const values = [[a], [b], [p], [a, b, p]].map((list) => modelOf(blank, list).value);
    values[3]!.forEach((v, i) => expect(v).toBeCloseTo(values[0]![i]! * values[1]![i]! + values[2]![i]! - 1, 12));
  });

  it('keeps its components in order', () => {
    const model = modelOf(blank, [dip(505, 0.1, 0.1), dip(501, 0.1, 0.1)]);
    model.add([dip(503, 0.1, 0.1)]);
    expect(model.components.map(({ centre }) => centre)).toEqual([501, 503, 505]);
    model.remove(new Set([model.components[1]!]));
    expect(model.components.map(({ centre }) => centre)).toEqual([501, 505]);
  });

  it('fits all blends, or those that were touched', () => {
    const truth = [dip(501, 0.2, 0.5), dip(505, 0.2, 0.5)];
    const moved = truth.map((c) => dip(c.centre + 0.03, 0.25, 0.4));
    const model = modelOf(samples(truth, 300, undefined, WAVELENGTH), moved);
    model.refit(1, new Set([moved[0]!]));
    expect(moved[0]!.centre).toBeCloseTo(501, 4);
    expect(moved[1]!.centre).toBe(505.03);
    model.refit(1);
    expect(moved[1]!.centre).toBeCloseTo(505, 4);
  });
});

describe('neighbours', () => {
  it('are the components that reach into a blend, as looking at each would find', () => {
    fc.assert(
      fc.property(components, fc.nat(), (list, pick) => {
        const model = modelOf(blank, list);
        const blend = [model.components[pick % model.components.length]!];
        expect(centres(model.overlapping(blend))).toEqual(overlappingByHand(model, blend));
      }),
    );
  });

  it('are found anew after a fit has widened one', () => {
    const broad = dip(503, 1.5, 0.6);
    const far = dip(504.5, 0.1, 0.4);
    const narrow = ['a', 'b', 'c', 'd', 'e'].map((_, i) => dip(506 + i * 0.5, 0.1, 0.3));
    const data = samples([broad, far, ...narrow], 500, undefined, WAVELENGTH);
    const start = dip(503, 0.1, 0.6);
    const model = modelOf(data, [start, far, ...narrow]);
    expect(centres(model.overlapping([far]))).toEqual([]);
    model.refit(3);
    expect(start.fwhm).toBeGreaterThan(1);
    expect(centres(model.overlapping([far]))).toEqual(overlappingByHand(model, [far]));
    expect(centres(model.overlapping([far]))).toContain(start.centre);
  });
});

describe('blends', () => {
  it('hold every component once', () => {
    fc.assert(
      fc.property(components, (list) => {
        const sorted = [...list].sort((a, b) => a.centre - b.centre);
        const blends = blendsOf(sorted);
        expect(blends.flat()).toHaveLength(list.length);
        expect(new Set(blends.flat()).size).toBe(list.length);
        expect(Math.max(...blends.map((b) => b.length))).toBeLessThanOrEqual(7);
        expect(blends.every((b) => b.length > 0)).toBe(true);
      }),
    );
  });

  it('are lines of like width within reach of each other; broad and narrow ones are fitted in turn', () => {
    const [a, b, far, broad] = [dip(500, 0.1, 0.3), dip(500.12, 0.1, 0.3), dip(501, 0.1, 0.3), dip(500.05, 2, 0.2)];
    const blends = blendsOf([a, broad, b, far]).map((list) => new Set(list));
    expect(blends).toContainEqual(new Set([a, b]));
    expect(blends).toContainEqual(new Set([far]));
    expect(blends).toContainEqual(new Set([broad]));
  });

  it('of long chains are cut where the gap is widest', () => {
    const chain = Array.from({ length: 12 }, (_, i) => dip(500 + 0.1 * i + (i >= 6 ? 0.05 : 0), 0.1, 0.3));
    expect(blendsOf(chain).map((b) => b.length)).toEqual([6, 6]);
  });
});
