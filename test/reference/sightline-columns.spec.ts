import { readFileSync } from 'node:fs';
import { absorbedWidth, apparentColumn, fitGrowth, solveDoublet, tabledWidth, thinColumn, type Transition } from '@foreveil/shared';

// Reference: equivalent widths by scipy 1.10.1 (wofz, quad to 1e-11) and apparent columns by numpy's trapezoids over synthetic profiles, after
// Savage & Sembach 1991, ApJ 379, 245. Its wavelengths, f and gamma are inputs of the checks, not claims; tolerances are the file's own.

interface Case {
  readonly id: string;
  readonly kind: string;
  readonly line: string;
  readonly b_km_s: number;
  readonly log10_N_cm2: number;
  readonly EW_nm: number;
}
interface Doublet extends Case {
  readonly EW_D2_mA: number;
  readonly EW_D1_mA: number;
  readonly ratio: number;
}
interface Depth extends Case {
  readonly v_km_s: number[];
  readonly normalised_flux: number[];
  readonly v_limits_km_s: [number, number];
  readonly flux_floor: number;
  readonly snr: number;
  readonly log10_Na: number;
  readonly Na_err_cm2: number | null;
  readonly true_log10_N: number;
  readonly instrument_fwhm_km_s: number;
  readonly max_tau_a: number;
}
const file = JSON.parse(readFileSync('test/fixtures/reference/curve_of_growth.json', 'utf8')) as {
  cases: Case[];
  atomic_data: Record<string, { lambda_vac_nm: number; f: number; 'gamma_s-1': number }>;
};
const of = <T extends Case>(kind: string) => file.cases.filter((c) => c.kind === kind) as T[];
const line = (name: string): Transition => {
  const { lambda_vac_nm, f, 'gamma_s-1': gammaPerS } = file.atomic_data[name]!;
  return { wavelengthNm: lambda_vac_nm, oscillatorStrength: f, gammaPerS };
};

it('uses every row of the reference', () =>
  expect(['cog', 'thin_limit', 'doublet_ratio', 'aod'].reduce((n, kind) => n + of(kind).length, 0)).toBe(file.cases.length));

it('gives every equivalent width to 1e-4, from the thin limit to the square-root law', () => {
  const cases = of<Case>('cog');
  expect(cases).toHaveLength(204);
  for (const c of cases) expect(Math.abs(absorbedWidth(line(c.line), 10 ** c.log10_N_cm2, c.b_km_s) / c.EW_nm - 1)).toBeLessThan(1e-4);
});

// straight lines between the table's rows: at most 1.4e-3 too wide, where the damping wings of a saturated line take over
it('gives them to 2e-3 from a table', () => {
  for (const c of of<Case>('cog'))
    expect(Math.abs(tabledWidth(line(c.line), 10 ** c.log10_N_cm2, c.b_km_s) / c.EW_nm - 1)).toBeLessThan(2e-3);
});

it('turns the width of a thin line into its column', () => {
  for (const c of of<Case & { N_per_EW_cm2_per_mA: number }>('thin_limit'))
    expect(Math.abs(10 ** thinColumn(line(c.line), 1e-4) / c.N_per_EW_cm2_per_mA - 1)).toBeLessThan(2e-5); // its rounded wavelengths' digits
});

describe('the sodium doublet', () => {
  const doublets = of<Doublet>('doublet_ratio');
  const widths = (c: Doublet) => [
    { ...line('NaI_D2'), widthNm: c.EW_D2_mA * 1e-4, sigmaNm: c.EW_D2_mA * 1e-6 },
    { ...line('NaI_D1'), widthNm: c.EW_D1_mA * 1e-4, sigmaNm: c.EW_D1_mA * 1e-6 },
  ];

  it('has the ratio of the reference, thin to damped', () => {
    expect(doublets).toHaveLength(27);
    for (const c of doublets) {
      const [d2, d1] = ['NaI_D2', 'NaI_D1'].map((l) => absorbedWidth(line(l), 10 ** c.log10_N_cm2, c.b_km_s));
      expect(Math.abs(d2! / d1! / c.ratio - 1)).toBeLessThan(2e-4);
    }
  });

  it('gives column and Doppler parameter back to 0.01 dex and 2 % where the ratio tells them', () => {
    const telling = doublets.filter((c) => c.ratio > 1.15 && c.ratio < 1.9);
    expect(telling.length).toBeGreaterThan(9);
    for (const c of telling) {
      const [strong, weak] = widths(c);
      // with damping wings two columns fit one ratio: the reference's is one of them
      const near = solveDoublet(strong!, weak!).filter(
        (x) => Math.abs(x.logN - c.log10_N_cm2) < 0.01 && Math.abs(x.bKmPerS / c.b_km_s - 1) < 0.02,
      );
      expect(near).toHaveLength(1);
    }
  });

  it('is fitted with errors that hold, from widths known to 1 %', () => {
    for (const c of doublets.filter((d) => d.ratio > 1.15 && d.ratio < 1.9 && d.log10_N_cm2 < 13)) {
      const [sodium] = fitGrowth([{ species: 'Na I', lines: widths(c) }]).columns;
      expect(Math.abs(sodium!.logN - c.log10_N_cm2)).toBeLessThan(2.5 * sodium!.logNSigma + 0.01);
    }
  });

  it('has no solution when the weak line is as strong as no curve of growth lets it be', () => {
    const [strong] = widths(doublets[0]!);
    expect(solveDoublet(strong!, { ...line('NaI_D1'), widthNm: 1.5 * strong!.widthNm, sigmaNm: 1e-6 })).toEqual([]);
  });
});

it('integrates apparent optical depth as the reference does, errors too', () => {
  const cases = of<Depth>('aod');
  expect(cases).toHaveLength(22);
  for (const c of cases) {
    const inside = c.v_km_s.map((v, i) => i).filter((i) => c.v_km_s[i]! >= c.v_limits_km_s[0] && c.v_km_s[i]! <= c.v_limits_km_s[1]);
    const take = (x: number[]) => inside.map((i) => x[i]!);
    const sigma = c.snr ? inside.map(() => 1 / c.snr) : null;
    const made = apparentColumn(line(c.line), take(c.v_km_s), take(c.normalised_flux), sigma, c.flux_floor);
    expect(Math.abs(Math.log10(made.column) - c.log10_Na)).toBeLessThan(0.0005);
    expect(made.deepest).toBeCloseTo(c.max_tau_a, 5);
    // half steps at both ends, where the reference takes whole ones
    if (c.Na_err_cm2) expect(Math.abs(made.columnSigma / c.Na_err_cm2 - 1)).toBeLessThan(0.011);
  }
});

it('falls short of the true column where the instrument hides saturation, and not where the line is resolved and thin', () => {
  for (const c of of<Depth>('aod').filter((k) => !k.snr)) {
    if (c.instrument_fwhm_km_s > 0) expect(c.log10_Na).toBeLessThan(c.true_log10_N);
    else expect(c.log10_Na).toBeCloseTo(c.true_log10_N, 2);
  }
});
