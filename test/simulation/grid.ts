/** Speed of light, km/s; exact by the definition of the metre. */
export const LIGHT_KM_PER_S = 299_792.458;

/** Fine grid of equal velocity steps on which light is computed before an instrument sees it. */
export interface Grid {
  readonly fromNm: number;
  readonly stepKmPerS: number;
  readonly size: number;
  readonly nm: Float64Array;
}

export function gridOf(fromNm: number, toNm: number, stepKmPerS: number): Grid {
  const step = stepKmPerS / LIGHT_KM_PER_S;
  const size = Math.ceil(Math.log(toNm / fromNm) / step) + 1;
  return { fromNm, stepKmPerS, size, nm: new Float64Array(size).map((_, i) => fromNm * Math.exp(i * step)) };
}

/** Place of a wavelength on the grid, in steps from its start. */
export const placeOf = (grid: Grid, nm: number) => (Math.log(nm / grid.fromNm) * LIGHT_KM_PER_S) / grid.stepKmPerS;

/** Observed over rest wavelength at a velocity, relativistic. */
export const dopplerOf = (kmPerS: number) => Math.sqrt((LIGHT_KM_PER_S + kmPerS) / (LIGHT_KM_PER_S - kmPerS));

/** A kernel of odd length and unit sum, its middle at zero velocity. */
export type Kernel = Float64Array;

function kernel(halfKmPerS: number, stepKmPerS: number, shape: (kmPerS: number) => number): Kernel {
  const half = Math.max(1, Math.ceil(halfKmPerS / stepKmPerS));
  const out = new Float64Array(2 * half + 1).map((_, i) => shape((i - half) * stepKmPerS));
  const sum = out.reduce((a, b) => a + b, 0);
  return out.map((value) => value / sum);
}

/**
 * Instrument profile: a Gaussian, leaning by `skew` (third Gauss-Hermite moment; van der Marel & Franx 1993, ApJ 407, 525),
 * its centroid kept in the middle so that a lean alone moves no line.
 */
export function instrumentKernel(fwhmKmPerS: number, stepKmPerS: number, skew: number): Kernel {
  const sigma = fwhmKmPerS / 2.354_82;
  const raw = (v: number) => {
    const u = v / sigma;
    return Math.max(0, Math.exp(-0.5 * u * u) * (1 + (skew * (2 * u ** 3 - 3 * u)) / Math.sqrt(3)));
  };
  const plain = kernel(4.5 * sigma, stepKmPerS, raw);
  const middle = (plain.length - 1) / 2;
  const centroid = plain.reduce((sum, value, i) => sum + value * (i - middle), 0) * stepKmPerS;
  return kernel(4.5 * sigma, stepKmPerS, (v) => raw(v + centroid));
}

/** Rotation of a star with linear limb darkening 0.6, and its macroturbulence. Source: Gray 2008, eq. 18.14. */
export function rotationKernel(vsini: number, macroKmPerS: number, stepKmPerS: number): Kernel {
  const e = 0.6;
  const rotation = kernel(vsini, stepKmPerS, (v) => {
    const y = 1 - (v / vsini) ** 2;
    return y <= 0 ? 0 : 2 * (1 - e) * Math.sqrt(y) + 0.5 * Math.PI * e * y;
  });
  const macro = kernel(3 * macroKmPerS, stepKmPerS, (v) => Math.exp(-((v / macroKmPerS) ** 2)));
  return chained(rotation, macro);
}

/** The kernel of two kernels one after the other. */
export function chained(a: Kernel, b: Kernel): Kernel {
  const out = new Float64Array(a.length + b.length - 1);
  for (let i = 0; i < a.length; i++) for (let k = 0; k < b.length; k++) out[i + k] = out[i + k]! + a[i]! * b[k]!;
  return out;
}

/** Values seen through a kernel; beyond the ends they go on as at the ends. */
export function through(values: Float64Array, by: Kernel): Float64Array {
  const half = (by.length - 1) / 2;
  const n = values.length;
  const padded = new Float64Array(n + 2 * half);
  padded.fill(values[0]!, 0, half);
  padded.set(values, half);
  padded.fill(values[n - 1]!, half + n);
  const out = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    let sum = 0;
    for (let k = 0; k < by.length; k++) sum += by[k]! * padded[i + by.length - 1 - k]!;
    out[i] = sum;
  }
  return out;
}
