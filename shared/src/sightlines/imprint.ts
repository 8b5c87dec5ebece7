/** What an absorber leaves of itself after the instrument: absorption against velocity, of unit area, symmetric. */
export interface Imprint {
  /** km/s between the values */
  readonly step: number;
  /** per km/s, from the centre outwards */
  readonly value: Float64Array;
  /** FWHM, km/s */
  readonly fwhm: number;
}

const PER_FWHM = 2 * Math.sqrt(2 * Math.LN2);
const known = new Map<string, Imprint>();
const MOST_KNOWN = 4000;

/**
 * 1 - exp(-tau exp(-(v / b)^2)), blurred by a Gaussian of FWHM `elementV`, of unit area.
 * @param tau optical depth at the centre; @param b Doppler parameter, km/s
 */
export function imprintOf(tau: number, b: number, elementV: number): Imprint {
  // steps of 5 % change the shape by less than the noise of any spectrum
  const rounded = (x: number) => Math.round(20 * Math.log(Math.max(x, 1e-3)));
  const key = `${rounded(tau)} ${rounded(b)} ${elementV.toFixed(4)}`;
  let made = known.get(key);
  if (!made) {
    if (known.size > MOST_KNOWN) known.clear();
    made = makeImprint(Math.exp(rounded(tau) / 20), Math.exp(rounded(b) / 20), elementV);
    known.set(key, made);
  }
  return made;
}

/** A Gaussian imprint, for bands. */
export function gaussianImprint(fwhm: number): Imprint {
  const step = fwhm / 24;
  const sigma = fwhm / PER_FWHM;
  const value = Float64Array.from({ length: 48 }, (_, i) => Math.exp(-0.5 * ((i * step) / sigma) ** 2) / (sigma * Math.sqrt(2 * Math.PI)));
  return { step, value, fwhm };
}

function makeImprint(tau: number, b: number, elementV: number): Imprint {
  const sigma = elementV / PER_FWHM;
  const core = b * Math.sqrt(Math.max(4, Math.log(Math.max(tau, 1) * 400)));
  const step = Math.min(0.2 * b, 0.2 * sigma);
  const inner = Math.ceil(core / step);
  const count = Math.ceil((core + 4 * sigma) / step) + 1;
  const own = Float64Array.from({ length: inner + 1 }, (_, i) => -Math.expm1(-tau * Math.exp(-(((i * step) / b) ** 2))));
  const value = new Float64Array(count);
  const kernel = Float64Array.from({ length: Math.ceil((4.5 * sigma) / step) }, (_, i) => Math.exp(-0.5 * ((i * step) / sigma) ** 2));
  for (let i = -inner; i <= inner; i++) {
    const light = own[Math.abs(i)]!;
    for (let k = Math.max(0, i - kernel.length + 1); k < Math.min(count, i + kernel.length); k++)
      value[k]! += light * kernel[Math.abs(k - i)]!;
  }
  let area = -0.5 * value[0]!;
  for (const v of value) area += v;
  area *= 2 * step;
  for (let k = 0; k < count; k++) value[k]! /= area;
  let half = 0;
  while (half < count - 1 && value[half]! > 0.5 * value[0]!) half++;
  return { step, value, fwhm: 2 * step * half };
}

/** The imprint at a distance from its centre, km/s; linear between values. */
export function imprintAt({ step, value }: Imprint, v: number): number {
  const t = Math.abs(v) / step;
  const i = Math.floor(t);
  if (i >= value.length - 1) return 0;
  return value[i]! + (t - i) * (value[i + 1]! - value[i]!);
}
