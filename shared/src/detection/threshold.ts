/**
 * Expected number of false maxima beyond k sigma of one sign when white noise passes a zero-mean Gaussian filter of width sigma (pixels).
 * Upward crossings of a smooth Gaussian process (Rice 1944, Bell Syst. Tech. J. 23, 282): exp(-k^2/2) / (2 pi) x the root of its
 * second spectral moment, 1 / (sqrt 2 sigma) for a Gaussian kernel. Never more than one a pixel's worth of independent trials,
 * since a lattice sees fewer crossings than the continuous process.
 */
export function falseMaxima(k: number, pixels: number, sigma: number): number {
  const rice = Math.exp(-0.5 * k * k) / (2 * Math.PI * Math.SQRT2 * sigma);
  return pixels * Math.min(rice, upperTail(k));
}

/** One-sided tail of the normal distribution; relative error under 1e-3 for k above 2 (Abramowitz & Stegun 26.2.12 expansion). */
function upperTail(k: number): number {
  const q = k * k;
  return (Math.exp(-0.5 * q) / (k * Math.sqrt(2 * Math.PI))) * (1 - 1 / q + 3 / (q * q));
}

/** k at which the expected number of false maxima, both signs, all widths, equals `wanted`. */
export function chanceThreshold(wanted: number, pixels: number, widths: readonly number[]): number {
  const expected = (k: number): number => 2 * widths.reduce((sum, s) => sum + falseMaxima(k, pixels, s), 0);
  let low = 2;
  let high = 9;
  for (let i = 0; i < 60; i++) {
    const mid = 0.5 * (low + high);
    if (expected(mid) > wanted) low = mid;
    else high = mid;
  }
  return 0.5 * (low + high);
}
