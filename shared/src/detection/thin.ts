import type { NormalisedSamples } from '../profiles/index.js';

const ENOUGH = 5; // samples a resolution element: a bin then widens a line by less than 1 %
const JUMP = 3; // steps: samples this far apart lie on two sides of a gap

export interface Thinned {
  readonly data: NormalisedSamples;
  /** autocorrelation of the noise at lags 0, 1, ... of the samples returned */
  readonly correlation: readonly number[];
}

/**
 * Averages neighbouring samples where a file holds many more than its resolution needs: nothing is lost, and the work is bounded. Weights
 * allow for noise that is correlated from sample to sample. Spectra of fewer than ten samples a resolution element come back as they are.
 */
export function thin(data: NormalisedSamples, resolvingPower: number, correlation: readonly number[]): Thinned {
  const { wavelength, flux, weight } = data;
  const n = wavelength.length;
  const middle = n >> 1;
  const span = Math.min(200, middle);
  const step = span > 0 ? (wavelength[middle + span - 1]! - wavelength[middle - span]!) / Math.max(1, 2 * span - 1) : Infinity;
  const bin = Math.floor(wavelength[middle]! / resolvingPower / step / ENOUGH);
  if (!(bin >= 2)) return { data, correlation };
  const [zero, ...lags] = covariances(correlation, bin);
  const out = { wavelength: new Float64Array(n), flux: new Float64Array(n), weight: new Float64Array(n) };
  let count = 0;
  for (let from = 0; from < n; count++) {
    let to = from + 1;
    while (to < n && to - from < bin && wavelength[to]! - wavelength[to - 1]! < JUMP * step) to++;
    let place = 0;
    let w = 0;
    let wf = 0;
    for (let i = from; i < to; i++) {
      place += wavelength[i]!;
      w += weight[i]!;
      wf += weight[i]! * flux[i]!;
    }
    out.wavelength[count] = place / (to - from);
    out.flux[count] = w > 0 ? wf / w : 1;
    out.weight[count] = w / (zero! * bin);
    from = to;
  }
  return {
    data: { wavelength: out.wavelength.slice(0, count), flux: out.flux.slice(0, count), weight: out.weight.slice(0, count) },
    correlation: [1, ...lags.map((c) => c / zero!)],
  };
}

/** Covariance of means of `bin` samples at lags 0, 1, ... of such means, in variances of one sample. */
function covariances(correlation: readonly number[], bin: number): number[] {
  const at = (lag: number): number => correlation[Math.abs(lag)] ?? 0;
  const lags = Math.ceil(correlation.length / bin) + 1;
  return Array.from({ length: lags }, (_, lag) => {
    let sum = 0;
    for (let k = 1 - bin; k < bin; k++) sum += (bin - Math.abs(k)) * at(lag * bin + k);
    return sum / (bin * bin);
  });
}
