import { DEFAULT_SETTINGS, analyse, type LineList, type Spectrum } from '@foreveil/shared';

const POINTS = 3_000;
/** a first job may be waiting behind this */
const AT_MOST_MS = 1_500;
const ROUNDS = 15;

/**
 * Runs the analysis on small made-up spectra, so that the compiler has seen its loops before the first real job: without this the first
 * jobs of a thread take several times as long. Whatever goes wrong here will go wrong again, and be told, in a real job.
 */
export function warmUp(list: LineList): void {
  try {
    const end = performance.now() + AT_MOST_MS;
    for (let round = 0; round < ROUNDS && performance.now() < end; round++) analyse(madeUpSpectrum(round), list, DEFAULT_SETTINGS);
  } catch {
    return;
  }
}

/** A sloping continuum with dips and noise; the same for the same seed. */
function madeUpSpectrum(seed: number): Spectrum {
  const wavelength = Float64Array.from({ length: POINTS }, (_, i) => 400 + (300 * i) / POINTS);
  const random = numbers(seed + 1);
  const sigma = new Float64Array(POINTS).fill(0.01);
  const flux = wavelength.map((nm) => (700 / nm) ** 2 * (1 - dips(nm)) + 0.017 * (random() + random() + random() - 1.5));
  return { wavelength, flux, sigma, bad: new Uint8Array(POINTS), fluxKind: 'per_wavelength', resolvingPower: 10_000, frame: 'barycentric' };
}

/** A dip every 7 nm, each 0.06 nm wide. */
const dips = (nm: number): number => 0.5 * Math.exp(-0.5 * (((nm % 7) - 3.5) / 0.06) ** 2);

/** Equally distributed in 0 to 1 (linear congruential, Numerical Recipes' constants). */
function numbers(seed: number): () => number {
  let state = seed >>> 0;
  return () => (state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0) / 2 ** 32;
}
