import { extinctionCurve, planck, type FluxKind, type Spectrum } from '@foreveil/shared';

/** Reproducible chance: the mulberry32 generator, and normal deviates from it by Box and Muller. */
export function chance(seed: number): { uniform: () => number; normal: () => number } {
  let state = seed | 0;
  const uniform = () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
  const normal = () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
  return { uniform, normal };
}

/** A dip (positive depth) or a peak (negative), Gaussian, multiplying the continuum. */
export interface RecipeLine {
  readonly nm: number;
  readonly depth: number;
  readonly fwhmNm: number;
}

export interface Recipe {
  readonly fromNm: number;
  readonly toNm: number;
  readonly resolvingPower: number;
  readonly temperatureK: number;
  readonly signalToNoise: number;
  readonly seed: number;
  readonly av?: number;
  readonly lines?: readonly RecipeLine[];
  /** smooth factor over the range, from -1 to 1 */
  readonly response?: (x: number) => number;
  readonly samplesPerElement?: number;
  readonly fluxKind?: FluxKind;
}

export interface Reciped {
  readonly spectrum: Spectrum;
  readonly continuum: Float64Array;
  /** 1 where a line takes or adds more than a hundredth of the noise */
  readonly inLine: Uint8Array;
}

/** A simulated spectrum of a body of one temperature, 1 in the middle of its range, with photon-like noise of known sigma. */
export function noisySpectrum(recipe: Recipe): Reciped {
  const { fromNm, toNm, resolvingPower, temperatureK, signalToNoise, seed } = recipe;
  const step = 1 / (resolvingPower * (recipe.samplesPerElement ?? 2.5));
  const n = Math.floor(Math.log(toNm / fromNm) / step) + 1;
  const { normal } = chance(seed);
  const wavelength = new Float64Array(n).map((_, i) => fromNm * Math.exp(i * step));
  const middle = planck(wavelength[n >> 1]!, temperatureK) * dust(wavelength[n >> 1]!, recipe.av);
  const continuum = wavelength.map(
    (nm, i) => (planck(nm, temperatureK) / middle) * dust(nm, recipe.av) * (recipe.response?.((2 * i) / (n - 1) - 1) ?? 1),
  );
  const through = new Float64Array(n).fill(1);
  const indexOf = (nm: number) => Math.min(n, Math.max(0, Math.ceil(Math.log(nm / fromNm) / step)));
  for (const line of recipe.lines ?? []) drawLine(through, wavelength, line, indexOf);
  const sigma = continuum.map((c, i) => (c / signalToNoise) * Math.sqrt(Math.max(0.04, through[i]!)));
  return {
    spectrum: {
      wavelength,
      flux: continuum.map((c, i) => c * through[i]! + sigma[i]! * normal()),
      sigma,
      bad: new Uint8Array(n),
      fluxKind: recipe.fluxKind ?? 'per_wavelength',
      resolvingPower,
      frame: 'barycentric',
    },
    continuum,
    inLine: Uint8Array.from(through, (t) => (Math.abs(1 - t) * signalToNoise > 0.01 ? 1 : 0)),
  };
}

const dust = (nm: number, av = 0) => 10 ** (-0.4 * av * extinctionCurve(nm));

function drawLine(through: Float64Array, wavelength: Float64Array, { nm, depth, fwhmNm }: RecipeLine, indexOf: (nm: number) => number) {
  const sigma = fwhmNm / 2.3548;
  for (let i = indexOf(nm - 8 * sigma), end = indexOf(nm + 8 * sigma); i < end; i++) {
    const u = (wavelength[i]! - nm) / sigma;
    through[i] = through[i]! * (1 - depth * Math.exp(-0.5 * u * u));
  }
}

/** `count` dips at chance places, depths crowded towards shallow ones, widths of some resolution elements. */
export function crowdOfDips(seed: number, count: number, fromNm: number, toNm: number, resolvingPower: number): RecipeLine[] {
  const { uniform } = chance(seed);
  return Array.from({ length: count }, () => {
    const nm = fromNm + (toNm - fromNm) * uniform();
    return { nm, depth: 0.8 * uniform() ** 3, fwhmNm: (nm / resolvingPower) * (1 + 2 * uniform()) };
  });
}
