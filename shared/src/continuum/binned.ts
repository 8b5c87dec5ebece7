import type { Spectrum } from '../spectrum/index.js';
import type { Blocks } from './blocks.js';

/** A spectrum as the rounds see it: full, or with neighbouring samples averaged. */
export interface Binned {
  readonly wavelength: Float64Array;
  readonly flux: Float64Array;
  /** 1 / sigma; 0 where bad */
  readonly inverseSigma: Float64Array;
  /** the same blocks, over these samples */
  readonly blocks: Blocks;
}

/**
 * Averages of `factor` neighbouring samples, weighted with their inverse variances.
 * @param inflation variance of a mean of many samples over that of independent ones, for correlated noise
 */
export function binned(spectrum: Spectrum, sigma: Float64Array, blocks: Blocks, factor: number, inflation: number): Binned {
  const { flux, bad, wavelength } = spectrum;
  const n = flux.length;
  if (factor === 1) {
    const inverseSigma = new Float64Array(n);
    for (let i = 0; i < n; i++) inverseSigma[i] = bad[i] ? 0 : 1 / sigma[i]!;
    return { wavelength, flux, inverseSigma, blocks };
  }
  const bins = Math.ceil(n / factor);
  const out = { wavelength: new Float64Array(bins), flux: new Float64Array(bins), inverseSigma: new Float64Array(bins) };
  for (let k = 0, i = 0; k < bins; k++) {
    const end = Math.min(n, i + factor);
    out.wavelength[k] = 0.5 * (wavelength[i]! + wavelength[end - 1]!);
    let w = 0;
    let wf = 0;
    for (; i < end; i++) {
      if (bad[i]) continue;
      const weight = 1 / (sigma[i]! * sigma[i]!);
      w += weight;
      wf += weight * flux[i]!;
    }
    if (w > 0) {
      out.flux[k] = wf / w;
      out.inverseSigma[k] = Math.sqrt(w / inflation);
    }
  }
  const first = blocks.first.map((i) => Math.min(bins, Math.round(i / factor)));
  return { ...out, blocks: { ...blocks, first } };
}
