import { C_KM_PER_S } from '@foreveil/shared';
import fc from 'fast-check';
import { carried, wavelengthMap, type Placed } from './carry-decisions.js';

const N = 50;
const flux = Float64Array.from({ length: N }, (_, i) => Math.sin(i * 12.9898));
const grid = (nm: (i: number) => number) => Float64Array.from({ length: N }, (_, i) => nm(i));
const before = { wavelength: grid((i) => 500 + i), flux };

test('a place between two samples lies between the same two after the axis was read anew', () => {
  const after = { wavelength: grid((i) => 500.14 + 1.0003 * i), flux };
  const map = wavelengthMap(before, after);
  fc.assert(
    fc.property(fc.double({ min: 500, max: 549, noNaN: true }), (nm) => {
      expect(map(nm)).toBeCloseTo(500.14 + 1.0003 * (nm - 500), 9); // straight between samples, so exact to rounding
    }),
  );
  expect(map(499.9)).toBeNull();
  expect(map(549.1)).toBeNull();
});

test('follows samples that come in the opposite order, as when wavenumbers were taken for wavelengths', () => {
  const after = { wavelength: grid((i) => 1e7 / (549 - i)), flux: Float64Array.from(flux).reverse() };
  const map = wavelengthMap(before, after);
  expect(map(500)).toBeCloseTo(1e7 / 500, 6);
  expect(map(549)).toBeCloseTo(1e7 / 549, 6);
});

test('knows no place where the samples are other ones', () => {
  const others = { wavelength: grid((i) => 600 + i), flux: flux.map((value) => value + 1) };
  expect(wavelengthMap(before, others)(510)).toBeNull();
  expect(wavelengthMap(before, { wavelength: others.wavelength.slice(1), flux: flux.slice(1) })(510)).toBeNull();
});

test('stays where it is when only the flux is read otherwise', () => {
  expect(wavelengthMap(before, { wavelength: before.wavelength, flux: flux.map((value) => 3 * value) })(510.5)).toBe(510.5);
});

const decision: Placed = {
  ...{ wavelengthNm: 510, wavelengthSigmaNm: 0.01, fwhmNm: 0.2, equivalentWidthNm: 0.03, equivalentWidthSigmaNm: 0.001 },
  velocityKmPerS: 10,
};

test('a decision takes its width and velocity along: 1 part in 10 000 is 30 km/s', () => {
  const after = carried(decision, (nm) => nm * 1.0001)!;
  expect(after.equivalentWidthNm / after.wavelengthNm).toBeCloseTo(decision.equivalentWidthNm / decision.wavelengthNm, 12);
  expect(after.velocityKmPerS! - 10).toBeCloseTo(1e-4 * C_KM_PER_S, 1); // to first order; the next one is 2 m/s
  expect(carried({ ...decision, velocityKmPerS: null }, (nm) => nm)!.velocityKmPerS).toBeNull();
  expect(carried(decision, () => null)).toBeNull();
});
