import fc from 'fast-check';
import { voigtH } from '../numeric/index.js';
import { DAMPED_COLUMNS, dampedInto, dampedTable, dampedValue, type DampedShape } from './damped.js';
import type { Smear } from './smear.js';

/** The shape by its definition, from the Voigt function, which is tested to 1e-12. */
const exact = ({ tau, a }: DampedShape, u: number) => Math.expm1(-tau * voigtH(a, u)) / Math.expm1(-tau * voigtH(a, 0));
const shapes = fc.record({
  tau: fc.double({ min: Math.log(0.02), max: Math.log(3e4), noNaN: true }).map(Math.exp),
  a: fc.double({ min: Math.log(0.005), max: Math.log(3), noNaN: true }).map(Math.exp),
});
/** Shapes whose wings have fallen below a hundredth at 80 Doppler widths, where the longest profiles are cut. */
const contained = shapes.filter(({ tau, a }) => (tau * a) / Math.sqrt(Math.PI) < 60);
const fractions = fc.double({ min: 0, max: 0.99, noNaN: true });
const WORST = 3e-4; // linear between 384 nodes

describe('damped profile', () => {
  it('is its definition', () => {
    fc.assert(
      fc.property(shapes, fractions, (shape, x) => {
        const table = dampedTable(shape);
        const u = x * table.reach;
        expect(Math.abs(dampedValue(table, u) - exact(shape, u))).toBeLessThan(WORST);
      }),
      { numRuns: 500 },
    );
  });

  it('has derivatives by u, ln tau, ln a and ln of the width that are those of its definition', () => {
    const out = new Float64Array(DAMPED_COLUMNS);
    fc.assert(
      fc.property(shapes, fractions, (shape, x) => {
        const table = dampedTable(shape);
        const u = x * table.reach;
        dampedInto(out, table, u);
        const h = 1e-4;
        const by = (up: number, down: number, step: number) => (up - down) / (2 * step);
        const expected = [
          exact(shape, u),
          by(exact(shape, u + h), exact(shape, Math.abs(u - h)), h),
          by(exact({ ...shape, tau: shape.tau * Math.exp(h) }, u), exact({ ...shape, tau: shape.tau * Math.exp(-h) }, u), h),
          by(exact({ ...shape, a: shape.a * Math.exp(h) }, u), exact({ ...shape, a: shape.a * Math.exp(-h) }, u), h),
          by(exact(shape, u * Math.exp(-h)), exact(shape, u * Math.exp(h)), h),
        ];
        // the slope is linear between nodes too: where the flank is steepest, 1 % of it
        const tolerance = [
          WORST,
          0.01 + 0.02 * Math.abs(expected[1]!),
          1e-3,
          0.01 + 0.01 * Math.abs(expected[3]!),
          0.01 + 0.02 * Math.abs(expected[4]!),
        ];
        expected.forEach((value, q) => expect(Math.abs(out[q]! - value)).toBeLessThan(tolerance[q]!));
      }),
      { numRuns: 500 },
    );
  });

  it('is 1 at the centre, falls, and ends at its reach with less than two thousandths, however far that is', () => {
    fc.assert(
      fc.property(contained, (shape) => {
        const table = dampedTable(shape);
        expect(dampedValue(table, 0)).toBeCloseTo(1, 12);
        for (let k = 1; k < 40; k++)
          expect(dampedValue(table, (k / 40) * table.reach)).toBeLessThanOrEqual(dampedValue(table, ((k - 1) / 40) * table.reach) + 1e-12);
        expect(dampedValue(table, table.reach * 1.001)).toBe(0);
        expect(exact(shape, table.reach)).toBeLessThan(2e-3);
      }),
    );
  });

  it('has the FWHM and the area of its definition', () => {
    fc.assert(
      fc.property(contained, (shape) => {
        const { fwhm, area } = dampedTable(shape);
        let [low, high] = [0, 80];
        for (let i = 0; i < 50; i++) {
          const mid = (low + high) / 2;
          if (exact(shape, mid) > 0.5) low = mid;
          else high = mid;
        }
        expect(Math.abs(fwhm / (2 * low) - 1)).toBeLessThan(2e-3);
        expect(Math.abs(area / areaOf(shape) - 1)).toBeLessThan(5e-3);
      }),
    );
  });
});

/** The definition smeared, by a plain sum over the smear: a Gaussian, or a rotation profile with limb darkening 0.6 (Gray). */
function smeared(shape: DampedShape, { kind, width }: Smear, u: number): number {
  const steps = 4001;
  const reach = kind === 'rotation' ? 1 : 6;
  let sum = 0;
  let norm = 0;
  for (let i = 0; i < steps; i++) {
    const t = reach * (-1 + (2 * (i + 0.5)) / steps);
    const q = Math.max(0, 1 - t * t);
    const w = kind === 'rotation' ? 0.8 * Math.sqrt(q) + 0.3 * Math.PI * q : Math.exp(-0.5 * t * t);
    sum += w * -Math.expm1(-shape.tau * voigtH(shape.a, Math.abs(u - t * width)));
    norm += w;
  }
  return sum / norm;
}

describe('damped profile, smeared', () => {
  it.each<[Smear['kind'], number, DampedShape]>([
    ['instrument', 0.8, { tau: 3, a: 0.01 }],
    ['instrument', 2, { tau: 300, a: 0.002 }],
    ['rotation', 4, { tau: 2, a: 0.3 }],
    ['rotation', 8, { tau: 12, a: 0.1 }],
  ])('is what the %s of %d Doppler widths makes of it', (kind, width, shape) => {
    const smear = { kind, width };
    const table = dampedTable({ ...shape, smear });
    const peak = smeared(shape, smear, 0);
    for (let u = 0; u < 2.5 * width + 4; u += 0.37)
      // linear between nodes before and after the smear, and sums of 15 and 40 points in place of the integral
      expect(Math.abs(dampedValue(table, u) - smeared(shape, smear, u) / peak)).toBeLessThan(4e-3);
  });

  it('keeps the light: smearing moves the equivalent width of a thin line nowhere', () => {
    const shape = { tau: 0.05, a: 0.05 };
    const smear: Smear = { kind: 'instrument', width: 1.5 };
    const [sharp, blurred] = [dampedTable(shape), dampedTable({ ...shape, smear })];
    const peaks = [-Math.expm1(-shape.tau * voigtH(shape.a, 0)), smeared(shape, smear, 0)];
    expect((blurred.area * peaks[1]!) / (sharp.area * peaks[0]!)).toBeCloseTo(1, 2);
  });
});

/** Integral over all u, far wings and all: u = tan(t) maps the line to a finite range. */
function areaOf(shape: DampedShape): number {
  const steps = 2000;
  let sum = 0;
  for (let i = 0; i < steps; i++) {
    const t = (Math.PI / 2) * ((i + 0.5) / steps);
    sum += exact(shape, Math.tan(t)) / Math.cos(t) ** 2;
  }
  return (Math.PI / steps) * sum;
}

describe('limits of the damped profile', () => {
  const A = [0.01, 0.1, 0.5, 1, 2.5];

  it.each(A)('is a Voigt profile while optically thin, a = %d', (a) => {
    const shape = { tau: 0.02, a };
    const table = dampedTable(shape);
    for (let u = 0; u < 6; u += 0.1)
      // saturation lowers the centre by half the optical depth against the wings
      expect(Math.abs(dampedValue(table, u) - voigtH(a, u) / voigtH(a, 0))).toBeLessThan(0.5 * shape.tau + WORST);
  });

  it.each(A)('has the area of a Voigt profile while optically thin, sqrt(pi) / H(a, 0), a = %d', (a) => {
    const { area } = dampedTable({ tau: 0.02, a });
    expect(Math.abs((area * voigtH(a, 0)) / Math.sqrt(Math.PI) - 1)).toBeLessThan(0.02);
  });

  it('has wings of tau a / (sqrt(pi) u^2)', () => {
    const [tau, a] = [40, 0.3];
    const table = dampedTable({ tau, a });
    for (const u of [30, 50, 70]) {
      const wing = (tau * a) / Math.sqrt(Math.PI) / u ** 2; // and 1 + 3 / (2 u^2) of it, which is below 2e-3 here
      expect(Math.abs(dampedValue(table, u) / -Math.expm1(-wing) - 1)).toBeLessThan(0.03);
    }
  });

  it('has a flat core where saturated', () => {
    const table = dampedTable({ tau: 3e3, a: 0.05 });
    for (let u = 0; u < 2; u += 0.1) expect(1 - dampedValue(table, u)).toBeLessThan(1e-3);
  });

  it('has the area of the square-root law, 2 sqrt(sqrt(pi) tau a), where wings rule', () => {
    // the integral of 1 - exp(-c / u^2) over all u is 2 sqrt(pi c)
    for (const [tau, a] of [
      [3e3, 0.03],
      [1e3, 0.1],
    ] as const)
      expect(Math.abs(dampedTable({ tau, a }).area / (2 * Math.sqrt(Math.sqrt(Math.PI) * tau * a)) - 1)).toBeLessThan(0.03);
  });

  it('is made once for a shape', () => {
    const shape = { tau: 3, a: 0.2 };
    expect(dampedTable(shape)).toBe(dampedTable(shape));
  });
});
