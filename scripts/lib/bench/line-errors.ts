import { analyse, DEFAULT_SETTINGS, type Feature, type LineList, type Spectrum } from '@foreveil/shared';
import { chanceOf } from '../../../test/simulation/chance.js';
import type { Shape } from './line-shapes.js';

// Lines of known place, width and strength in noise, many times over: is the scatter of what is measured as large as the stated errors,
// and how near do they come to the Cramer-Rao bound, the least scatter that any unbiased measurement can have?

export interface Trial {
  readonly name: string;
  readonly shape: Shape;
  /** negative: emission */
  readonly depth: number;
  readonly signalToNoise: number;
  /** resolution elements to a second, equal line; absent for lines that stand alone */
  readonly blendedAt?: number;
}

/** Deviations over stated errors, and deviations over the bound, of centre, FWHM and equivalent width. */
export interface Deviations {
  found: number;
  made: number;
  readonly pulls: Record<Quantity, number[]>;
  readonly overBound: Record<Quantity, number[]>;
}
export const QUANTITIES = ['centre', 'fwhm', 'width'] as const;
export type Quantity = (typeof QUANTITIES)[number];

const RESOLVING_POWER = 40_000;
const SAMPLES = 2.6; // per resolution element
const FROM_NM = 500;
const TO_NM = 520;
const NO_LIST: LineList = { name: 'none', version: '0', lines: [] };

export function deviationsOf(trial: Trial, repeats: number): Deviations {
  const out: Deviations = { found: 0, made: 0, pulls: { centre: [], fwhm: [], width: [] }, overBound: { centre: [], fwhm: [], width: [] } };
  for (let repeat = 0; repeat < repeats; repeat++) {
    const { spectrum, centres } = spectrumOf(trial, repeat);
    const { features } = analyse(spectrum, NO_LIST, DEFAULT_SETTINGS);
    for (const nm of centres) weigh(trial, nm, features, out);
  }
  return out;
}

function spectrumOf({ name, shape, depth, signalToNoise, blendedAt }: Trial, repeat: number): { spectrum: Spectrum; centres: number[] } {
  const { normal, between } = chanceOf(`${name} ${signalToNoise} ${repeat}`);
  const step = 1 / (RESOLVING_POWER * SAMPLES);
  const n = Math.floor(Math.log(TO_NM / FROM_NM) / step);
  const wavelength = new Float64Array(n).map((_, i) => FROM_NM * Math.exp(i * step));
  const apart = 16 * shape.fwhm + 2 * (blendedAt ?? 0); // elements from line to line
  const through = new Float64Array(n).fill(1);
  const centres: number[] = [];
  const add = (centre: number) => {
    centres.push(centre);
    const reach = 7 * shape.fwhm * SAMPLES;
    const middle = Math.log(centre / FROM_NM) / step;
    for (let i = Math.max(0, Math.ceil(middle - reach)); i < Math.min(n, middle + reach); i++) {
      const profile = depth * shape.at((i - middle) / SAMPLES);
      through[i] = through[i]! * (1 - profile);
    }
  };
  for (let place = apart; place < n / SAMPLES - apart; place += apart) {
    const centre = FROM_NM * Math.exp((place + between(-0.5, 0.5)) / RESOLVING_POWER);
    add(centre);
    if (blendedAt) add(centre * Math.exp(blendedAt / RESOLVING_POWER));
  }
  const level = wavelength.map((nm) => (500 / nm) ** 5 / Math.expm1(1.438_777e7 / (nm * 9000)));
  const sigma = level.map((f) => f / signalToNoise);
  return {
    spectrum: {
      wavelength,
      flux: level.map((f, i) => f * through[i]! + sigma[i]! * normal()),
      sigma,
      bad: new Uint8Array(n),
      fluxKind: 'per_wavelength',
      resolvingPower: RESOLVING_POWER,
      frame: 'barycentric',
    },
    centres,
  };
}

function weigh({ shape, depth, signalToNoise }: Trial, nm: number, features: readonly Feature[], out: Deviations): void {
  const element = nm / RESOLVING_POWER;
  const near = features.filter((f) => Math.abs(f.wavelengthNm - nm) < 0.6 * shape.fwhm * element);
  out.made++;
  if (near.length !== 1) return;
  out.found++;
  const [f] = near as [Feature];
  const truth = { centre: nm, fwhm: shape.fwhm * element, width: depth * shape.area * element };
  const off = {
    centre: f.wavelengthNm - truth.centre,
    fwhm: f.fwhmNm - truth.fwhm,
    width: f.equivalentWidthNm - truth.width,
  };
  const stated = { centre: f.wavelengthSigmaNm, fwhm: f.fwhmSigmaNm, width: f.equivalentWidthSigmaNm };
  const bound = boundsOf(shape, depth, signalToNoise, element);
  for (const quantity of QUANTITIES) {
    out.pulls[quantity].push(off[quantity] / stated[quantity]);
    out.overBound[quantity].push(off[quantity] / bound[quantity]);
  }
}

/**
 * Cramer-Rao bounds of centre, FWHM and equivalent width of a line of known shape on a known continuum, nm: the inverse of the Fisher
 * matrix of depth, centre and width. Source: common practice, e.g. Kay 1993, Fundamentals of Statistical Signal Processing I, section 3.
 */
function boundsOf(shape: Shape, depth: number, signalToNoise: number, element: number): Record<Quantity, number> {
  const h = 0.01;
  let [dd, ds, ss, cc] = [0, 0, 0, 0];
  for (let i = -Math.ceil(8 * shape.fwhm * SAMPLES); i <= 8 * shape.fwhm * SAMPLES; i++) {
    const x = i / SAMPLES;
    const byDepth = shape.at(x);
    const byCentre = (depth * (shape.at(x + h) - shape.at(x - h))) / (2 * h);
    const byStretch = (-depth * x * (shape.at(x + h) - shape.at(x - h))) / (2 * h); // by the logarithm of the width
    dd += byDepth * byDepth;
    ds += byDepth * byStretch;
    ss += byStretch * byStretch;
    cc += byCentre * byCentre;
  }
  const noise = 1 / signalToNoise ** 2;
  const determinant = dd * ss - ds * ds;
  const [varDepth, varStretch, covariance] = [(ss / determinant) * noise, (dd / determinant) * noise, (-ds / determinant) * noise];
  const relative = varDepth / depth ** 2 + varStretch + (2 * covariance) / depth; // of depth times width
  return {
    centre: Math.sqrt(noise / cc) * element,
    fwhm: shape.fwhm * Math.sqrt(varStretch) * element,
    width: Math.abs(depth) * shape.area * Math.sqrt(relative) * element,
  };
}
