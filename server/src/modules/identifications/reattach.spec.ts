import fc from 'fast-check';
import { reattach, type Decided } from './reattach.js';

const decided = (id: string, wavelengthNm: number, fwhmNm = 0.1, kind: Decided['kind'] = 'dip'): Decided => ({
  id,
  kind,
  wavelengthNm,
  fwhmNm,
});
const found = (index: number, wavelengthNm: number, kind: Decided['kind'] = 'dip') => ({ index, kind, wavelengthNm });
const places = (...args: Parameters<typeof reattach>) => Object.fromEntries(reattach(...args));

test('takes the nearest of the same kind within half the width', () => {
  const features = [found(0, 499.9), found(1, 500.03), found(2, 500.01, 'peak'), found(3, 500.04)];
  expect(places([decided('a', 500)], features)).toEqual({ a: 1 });
  expect(places([decided('a', 500, 0.059)], features)).toEqual({});
  expect(places([decided('a', 500, 0.1, 'peak')], features)).toEqual({ a: 2 });
});

test('gives a feature to the nearer of two decisions, and the other one the next best', () => {
  expect(places([decided('a', 500), decided('b', 500.02)], [found(0, 500.021), found(1, 500.049)])).toEqual({ b: 0, a: 1 });
  expect(places([decided('a', 500), decided('b', 500.02)], [found(0, 500.019)])).toEqual({ b: 0 });
});

test('never gives a feature twice, nor one that is too far or of the other kind, whatever there is', () => {
  const nm = fc.double({ min: 500, max: 501, noNaN: true });
  const kind = fc.constantFrom<Decided['kind']>('dip', 'peak');
  const decisions = fc.array(fc.tuple(nm, fc.double({ min: 0.001, max: 0.5, noNaN: true }), kind), { maxLength: 20 });
  fc.assert(
    fc.property(decisions, fc.array(fc.tuple(nm, kind), { maxLength: 20 }), (a, b) => {
      const before = a.map(([wavelengthNm, fwhmNm, k], i) => decided(`${i}`, wavelengthNm, fwhmNm, k));
      const after = b.map(([wavelengthNm, k], i) => found(i, wavelengthNm, k));
      const result = reattach(before, after);
      expect(new Set(result.values()).size).toBe(result.size);
      for (const [id, index] of result) {
        const [decision, feature] = [before[Number(id)]!, after[index]!];
        expect(feature.kind).toBe(decision.kind);
        expect(Math.abs(feature.wavelengthNm - decision.wavelengthNm)).toBeLessThanOrEqual(decision.fwhmNm / 2);
      }
    }),
  );
});
