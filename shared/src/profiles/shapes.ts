/** Half-widths at half maximum are at u = 1/2: shapes are functions of u = (x - centre) / FWHM with peak value 1 at u = 0. */
export interface Shape {
  readonly name: 'gaussian' | 'rotation';
  /** |u| beyond which the shape is taken as zero */
  readonly reach: number;
  /** integral over u */
  readonly area: number;
  readonly value: Float64Array;
  readonly slope: Float64Array;
  /** table steps per unit of u */
  readonly perUnit: number;
  /** rotation only: FWHM over v sin i */
  readonly fwhmPerVsini?: number;
}

const STEPS = 2048;

function tabulate(name: Shape['name'], reach: number, f: (u: number) => number, area: number): Shape {
  const value = new Float64Array(STEPS + 2);
  const slope = new Float64Array(STEPS + 2);
  const h = reach / STEPS;
  for (let i = 0; i < STEPS; i++) value[i] = f(i * h);
  for (let i = 1; i < STEPS; i++) slope[i] = (value[i + 1]! - value[i - 1]!) / (2 * h);
  return { name, reach, area, value, slope, perUnit: 1 / h };
}

export const FOUR_LN2 = 4 * Math.LN2;
const gauss = (u: number): number => Math.exp(-FOUR_LN2 * u * u);

/** Area of a Gaussian of unit peak and unit FWHM. */
export const GAUSSIAN_AREA = Math.sqrt(Math.PI / FOUR_LN2);
export const GAUSSIAN: Shape = tabulate('gaussian', 1.8, gauss, GAUSSIAN_AREA);

const LIMB_DARKENING = 0.6; // linear coefficient, common practice for optical spectra of stars

/** Line profile of a rotating sphere with linear limb darkening, argument x = v / (v sin i), unit peak not enforced. */
export function rotationKernel(x: number): number {
  const q = 1 - x * x;
  if (q <= 0) return 0;
  return 2 * (1 - LIMB_DARKENING) * Math.sqrt(q) + (Math.PI / 2) * LIMB_DARKENING * q;
}

/**
 * Rotation profile blurred by the instrument (Gray, The Observation and Analysis of Stellar Photospheres, eq. 18.14; from memory).
 * @param blur Gaussian sigma of instrument and thermal broadening in units of v sin i; above about 1 the shape is a Gaussian
 */
export function rotationShape(blur: number): Shape {
  const s = Math.max(blur, LEAST_BLUR);
  const points = 201;
  const blurred = (x: number): number => {
    let sum = 0;
    let norm = 0;
    for (let k = 0; k < points; k++) {
      const t = -1 + (2 * (k + 0.5)) / points;
      const g = Math.exp(-0.5 * ((x - t) / s) ** 2);
      sum += rotationKernel(t) * g;
      norm += rotationKernel(t);
    }
    return sum / norm;
  };
  const peak = blurred(0);
  let low = 0;
  let high = 1 + 3 * s;
  for (let i = 0; i < 50; i++) {
    const mid = 0.5 * (low + high);
    if (blurred(mid) > 0.5 * peak) low = mid;
    else high = mid;
  }
  const fwhm = 2 * low;
  const reach = (1 + 3.2 * s) / fwhm;
  const grid = 256;
  const coarse = Float64Array.from({ length: grid + 1 }, (_, i) => blurred(((i * reach) / grid) * fwhm) / peak);
  const interpolate = (u: number): number => {
    const t = (u / reach) * grid;
    const i = Math.min(grid - 1, Math.floor(t));
    return coarse[i]! + (t - i) * (coarse[i + 1]! - coarse[i]!);
  };
  let area = 0;
  for (let i = 0; i < grid; i++) area += (coarse[i]! + coarse[i + 1]!) * (reach / grid);
  return { ...tabulate('rotation', reach, interpolate, area), fwhmPerVsini: fwhm };
}

const LEAST_BLUR = 0.02;
const PER_FOLD = 8; // shapes a factor e of blur
const held = new Map<number, Shape>();

function shapeOfKey(key: number): Shape {
  let shape = held.get(key);
  if (!shape) held.set(key, (shape = rotationShape(Math.exp(key / PER_FOLD))));
  return shape;
}

/** Rotation profile of a blur between 0.02 and 1, to an eighth of a fold; each made once. */
export const rotationOfBlur = (blur: number): Shape => shapeOfKey(Math.round(Math.log(Math.min(Math.max(blur, LEAST_BLUR), 1)) * PER_FOLD));

/**
 * The profile of a line of given width in a star of given v sin i: what is wider than rotation alone makes it was blurred by heat,
 * turbulence and the instrument, and looks the more like a Gaussian.
 * @param fwhmPerVsini FWHM over v sin i
 */
export function rotationOfWidth(fwhmPerVsini: number): Shape {
  let low = Math.round(Math.log(LEAST_BLUR) * PER_FOLD);
  let high = 0;
  if (fwhmPerVsini > 1.02 * shapeOfKey(high).fwhmPerVsini!) return GAUSSIAN;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (shapeOfKey(mid).fwhmPerVsini! < fwhmPerVsini) low = mid + 1;
    else high = mid;
  }
  return shapeOfKey(low);
}
