import { describe, expect, it } from 'vitest';
import { buildCurveData } from '../../../plot/curve-data.js';
import { measureRegion } from './measure-region.js';
import { RegionStore } from './region-store.js';

const n = 2001;
const wavelength = Float64Array.from({ length: n }, (_, i) => 499 + i * 0.001);
const SIGMA_NM = 0.03;
const continuum = {
  ...({ model: 'planck', temperatureK: null, temperatureSigmaK: null, constrained: false, statement: '' } as const),
  ...{ lowerBoundK: null, upperBoundK: null, wienPeakNm: null, chi2PerDegree: null, clippedFraction: 0 },
  ...{ sampleNm: [499, 501], sampleFlux: [2, 2] },
};
const withDepth = (depth: number, bad = new Uint8Array(n), sigma: Float32Array | null = new Float32Array(n).fill(0.02)) => {
  const flux = Float32Array.from(wavelength, (nm) => 2 * (1 - depth * Math.exp(-0.5 * ((nm - 500.1) / SIGMA_NM) ** 2)));
  return buildCurveData({ wavelength, flux, sigma, bad }, continuum, []);
};
const REGION = { fromNm: 499.8, toNm: 500.4 };

describe('a region of a Gaussian line', () => {
  it.each([0.6, -0.6])('of depth %s has its closed-form width, centre and FWHM', (depth) => {
    const m = measureRegion(withDepth(depth), REGION)!;
    expect(m.equivalentWidthNm).toBeCloseTo(depth * SIGMA_NM * Math.sqrt(2 * Math.PI), 5);
    expect(m.centreNm).toBeCloseTo(500.1, 6);
    expect(m.fwhmNm).toBeCloseTo(2 * Math.sqrt(2 * Math.LN2) * SIGMA_NM, 4);
    // 600 samples of 0.001 nm with an error of 1 % of the continuum
    expect(m.equivalentWidthSigmaNm).toBeCloseTo(0.001 * 0.01 * Math.sqrt(600), 5);
    expect([m.samples, m.masked, Math.round(m.snr!)]).toEqual([600, 0, 100]);
    // 0.6 nm at 500.1 nm, to first order c Δλ/λ
    expect(m.lengthKmPerS).toBeCloseTo((299_792.458 * 0.6) / 500.1, 1);
  });

  it('leaves out masked samples and says how many', () => {
    const bad = new Uint8Array(n);
    bad.fill(1, 1100, 1150);
    expect(measureRegion(withDepth(0.6, bad), REGION)).toMatchObject({ samples: 550, masked: 50 });
  });

  it('gives no centre where there is nothing, no error without errors, nothing before an analysis or without samples', () => {
    const flat = measureRegion(withDepth(0.0001), { fromNm: 500.5, toNm: 500.8 })!;
    expect([flat.centreNm, Math.abs(flat.equivalentWidthNm) < 1e-6]).toEqual([null, true]);
    expect(measureRegion(withDepth(0.6, undefined, null), REGION)).toMatchObject({ equivalentWidthSigmaNm: null, snr: null });
    expect(measureRegion(withDepth(0.6), { fromNm: 600, toNm: 601 })).toBeNull();
    expect(measureRegion({ ...withDepth(0.6), fitted: null }, REGION)).toBeNull();
  });
});

describe('marking a region', () => {
  const after = (...steps: ((store: RegionStore) => void)[]) => {
    const store = new RegionStore();
    steps.forEach((step) => step(store));
    return store.get();
  };

  it('takes two ends in either order, and moves one end of what is marked', () => {
    expect(
      after(
        (s) => s.edge('start', 5),
        (s) => s.edge('end', 4),
      ).region,
    ).toEqual({ fromNm: 4, toNm: 5 });
    expect(
      after(
        (s) => s.mark(4, 6),
        (s) => s.edge('end', 5),
      ).region,
    ).toEqual({ fromNm: 4, toNm: 5 });
  });

  it('begins anew when an end passes the other one, and is nothing of no length', () => {
    expect(
      after(
        (s) => s.mark(4, 6),
        (s) => s.edge('start', 7),
      ),
    ).toMatchObject({ region: null, start: 7 });
    expect(after((s) => s.mark(4, 4)).region).toBeNull();
    expect(
      after(
        (s) => s.mark(4, 6),
        (s) => s.clear(),
      ).region,
    ).toBeNull();
  });
});
