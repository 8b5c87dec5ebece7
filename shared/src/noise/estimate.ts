import { quantileInPlace } from '../numeric/index.js';
import type { Spectrum } from '../spectrum/index.js';
import { DIFFERENCE_TO_SIGMA } from './der-snr.js';
import type { NoiseModel } from './model.js';

const WINDOW = 128;

/** The noise of a spectrum: what the file states, checked against the scatter, or an estimate from the scatter. */
export function estimateNoise(spectrum: Spectrum, _level?: Float64Array): NoiseModel {
  const { flux, sigma, bad } = spectrum;
  const n = flux.length;
  if (sigma) return { sigma: filled(sigma, bad), how: 'stated', correlation: [1], rescale: 1 };
  const out = new Float64Array(n).fill(NaN);
  const scratch = new Float64Array(WINDOW);
  for (let a = 0; a < n; a += WINDOW) {
    const b = Math.min(n, a + WINDOW);
    let m = 0;
    for (let i = Math.max(a, 2); i < Math.min(b, n - 2); i++) {
      const d = Math.abs(2 * flux[i]! - flux[i - 2]! - flux[i + 2]!);
      if (d === d) scratch[m++] = d;
    }
    if (m > 8) out.fill(DIFFERENCE_TO_SIGMA * quantileInPlace(scratch, m, 0.5), a, b);
  }
  return { sigma: filled(out, bad), how: 'estimated', correlation: [1], rescale: 1 };
}

/** A copy in which samples without a usable sigma take that of the nearest good one to the left (or the first one). */
function filled(sigma: Float64Array, bad: Uint8Array): Float64Array {
  const out = new Float64Array(sigma.length);
  let last = NaN;
  for (let i = 0; i < out.length; i++) {
    const s = sigma[i]!;
    if (!bad[i] && s > 0 && s < Infinity) last = s;
    out[i] = last;
  }
  for (let i = out.length - 1; i >= 0; i--) {
    if (out[i] === out[i]) last = out[i]!;
    else out[i] = last === last ? last : 1;
  }
  return out;
}
