import { readFileSync } from 'node:fs';
import { centralDepth, growthWidth } from '@foreveil/shared';

// Reference: W = (lambda / c) times the integral of 1 - exp(-tau_0 H(a, v / b)) over v, scipy 1.10.1 (wofz, quad to 1e-11). Its wavelengths,
// f and gamma are inputs of the check, not claims. Ours joins a Doppler core and damping wings by a formula instead of integrating: where
// damping takes no part it reaches the reference's 1e-4, elsewhere it is an approximation whose reach is stated below.

interface Atom {
  lambda_vac_nm: number;
  f: number;
  'gamma_s-1': number;
}
interface Growth {
  id: string;
  kind: string;
  line: string;
  b_km_s: number;
  log10_N_cm2: number;
  tau0: number;
  a: number;
  EW_nm: number;
}
interface Thin {
  id: string;
  kind: string;
  line: string;
  N_per_EW_cm2_per_mA: number;
}
interface Doublet {
  id: string;
  kind: string;
  b_km_s: number;
  log10_N_cm2: number;
  tau0_D1: number;
  ratio: number;
}
const { cases, atomic_data } = JSON.parse(readFileSync('test/fixtures/reference/curve_of_growth.json', 'utf8')) as {
  cases: (Growth | Thin | Doublet)[];
  atomic_data: Record<string, Atom>;
};
const of = <T extends { kind: string }>(kind: string) => cases.filter((c) => c.kind === kind) as unknown as T[];
const growth = of<Growth>('cog');
const widthOf = (line: string, logN: number, b: number, damped = true) => {
  const { lambda_vac_nm, f, 'gamma_s-1': gamma } = atomic_data[line]!;
  return growthWidth(10 ** logN, f, lambda_vac_nm, b, damped ? gamma : 0);
};
const largestError = (list: readonly Growth[], damped = true) =>
  Math.max(...list.map((c) => Math.abs(widthOf(c.line, c.log10_N_cm2, c.b_km_s, damped) / c.EW_nm - 1)));

it('has the reference cases', () => expect([growth.length, of('thin_limit').length, of('doublet_ratio').length]).toEqual([204, 4, 27]));

it('gives the optical depth at the centre', () => {
  for (const { line, log10_N_cm2, b_km_s, tau0 } of growth) {
    const { lambda_vac_nm, f } = atomic_data[line]!;
    expect(Math.abs(centralDepth(10 ** log10_N_cm2, f, lambda_vac_nm, b_km_s) / tau0 - 1)).toBeLessThan(1e-6); // digits of the coefficient
  }
});

describe('equivalent width', () => {
  it("is that of a Doppler profile, to the reference's own tolerance, where damping takes no part", () => {
    const pure = growth.filter(({ tau0, a }) => tau0 * a < 1e-4);
    expect(pure.length).toBeGreaterThanOrEqual(30);
    expect(largestError(pure, false)).toBeLessThan(1e-4);
  });

  it('follows the thin limit however large the damping constant', () => {
    for (const { line, N_per_EW_cm2_per_mA } of of<Thin>('thin_limit'))
      for (const logN of [4, 6, 8]) {
        const mA = 1e4 * widthOf(line, logN, 3);
        // at 10^8 the optical depth is 1e-4: half of that is saturation already
        expect(Math.abs((mA * N_per_EW_cm2_per_mA) / 10 ** logN - 1)).toBeLessThan(1e-4);
      }
  });

  // how far damping has come is told by tau_0 a: wings take over where it passes 1
  it.each([
    [0, 1e-2, 0.005],
    [1e-2, 1e-1, 0.005],
    [1e-1, 1, 0.03],
    [1, 1e2, 0.085], // core and wings in equal parts: Rodgers & Williams 1974 name some 8 % for their formula
    [1e2, 1e3, 0.025],
    [1e3, Infinity, 0.0025], // the square-root law
  ])('with damping, tau_0 a from %d to %d: off by less than %d', (from, to, bound) => {
    const part = growth.filter(({ tau0, a }) => tau0 * a >= from && tau0 * a < to);
    expect(part.length).toBeGreaterThan(5);
    expect(largestError(part)).toBeLessThan(bound);
  });

  it('grows with the column and with the Doppler parameter, as in the reference', () => {
    for (const line of Object.keys(atomic_data)) {
      const widths = growth.filter((c) => c.line === line && c.b_km_s === 3).map((c) => widthOf(line, c.log10_N_cm2, 3));
      expect(widths.every((w, i) => i === 0 || w > widths[i - 1]!)).toBe(true);
      expect(widthOf(line, 13, 10)).toBeGreaterThan(widthOf(line, 13, 3));
    }
  });
});

it('gives the ratio of the sodium doublet, from 2 when thin to where damping sets in', () => {
  const doublets = of<Doublet>('doublet_ratio');
  const errors = doublets.map((c) => ({
    tau: c.tau0_D1,
    error: Math.abs(widthOf('NaI_D2', c.log10_N_cm2, c.b_km_s) / widthOf('NaI_D1', c.log10_N_cm2, c.b_km_s) / c.ratio - 1),
  }));
  // errors of both lines mostly cancel
  expect(Math.max(...errors.filter(({ tau }) => tau < 3).map(({ error }) => error))).toBeLessThan(6e-4);
  expect(Math.max(...errors.map(({ error }) => error))).toBeLessThan(0.02);
});
