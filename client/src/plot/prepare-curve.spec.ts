import type { Continuum } from '@foreveil/shared';
import { describe, expect, it } from 'vitest';
import { prepareCurve, transferables } from './prepare-curve.js';

const n = 64;
const samples = {
  wavelength: Float64Array.from({ length: n }, (_, i) => 500 + i * 0.01),
  flux: new Float32Array(n).fill(2e-15),
  sigma: new Float32Array(n).fill(1e-16),
  bad: new Uint8Array(n),
};
const continuum: Continuum = {
  ...{ model: 'planck', temperatureK: null, temperatureSigmaK: null, constrained: false, statement: '' },
  ...{ lowerBoundK: null, upperBoundK: null, wienPeakNm: null, chi2PerDegree: null, clippedFraction: 0 },
  ...{ sampleNm: [500, 501], sampleFlux: [2e-15, 4e-15] },
};

describe('what the panels draw', () => {
  it('has the continuum between its samples, flux over it, and residuals in sigma', async () => {
    const data = await prepareCurve({ samples, continuum, features: [] });
    expect(data.fitted!.continuum[50]).toBeCloseTo(3e-15, 20);
    expect(data.fitted!.normalised.values[50]).toBeCloseTo(2 / 3, 5);
    expect(data.fitted!.residual.values[50]).toBeCloseTo(-10, 4);
    expect(data.fluxExponent).toBe(-15);
    expect(data.face!.low).toHaveLength(n);
  });

  it('does without an analysis, without errors, and without a single good sample', async () => {
    const bare = await prepareCurve({
      samples: { ...samples, sigma: null, bad: new Uint8Array(n).fill(1) },
      continuum: null,
      features: [],
    });
    expect(bare.fitted).toBeNull();
    expect(bare.fluxExponent).toBe(0);
    const unweighed = await prepareCurve({ samples: { ...samples, sigma: null }, continuum, features: [] });
    expect(unweighed.fitted!.residual.values[3]).toBeNaN();
  });

  it('counts NaN as masked even when the file does not say so', async () => {
    const flux = samples.flux.slice();
    flux[7] = NaN;
    expect((await prepareCurve({ samples: { ...samples, flux }, continuum, features: [] })).bad[7]).toBe(1);
  });

  it('travels with every buffer once, so a worker can hand it over without copying', async () => {
    const buffers = transferables(await prepareCurve({ samples, continuum, features: [] }));
    expect(new Set(buffers).size).toBe(buffers.length);
    expect(buffers.length).toBeGreaterThan(8);
  });
});
