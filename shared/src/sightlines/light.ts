import type { Analysis, Feature } from '../identify/index.js';
import { estimateNoise } from '../noise/index.js';
import { GAUSSIAN, indexAt, newComponent, rotationShape, settle, type Component, type NormalisedSamples } from '../profiles/index.js';
import type { Spectrum } from '../spectrum/index.js';
import { C_KM_PER_S, dopplerFactor, velocityOfFactor, type KmPerS } from '../units/index.js';
import type { SightlineSummary } from './comparison.js';

/** One end of a comparison: a spectrum and what an analysis made of it. */
export interface Sightline {
  readonly spectrum: Spectrum;
  readonly analysis: Analysis;
}

/** A sightline made ready: light over continuum, the analysis' features as profiles, and the way from wavelengths to the common scale. */
export interface Light {
  readonly data: NormalisedSamples;
  readonly analysis: Analysis;
  readonly features: readonly Feature[];
  /** profile of each feature */
  readonly components: readonly Component[];
  /** largest distance at which a feature still takes light, nm */
  readonly furthestNm: number;
  /** FWHM of the instrument profile, km/s */
  readonly elementV: number;
  /** by how much correlated noise widens the error of anything broader than a few samples */
  readonly noiseFactor: number;
  /** wavelength in the spectrum of a line at a velocity on the common scale */
  wavelengthOf(restNm: number, velocityKmPerS: number): number;
  /** velocity on the common scale of a line seen at a wavelength of the spectrum */
  velocityOf(wavelengthNm: number, restNm: number): number;
}

const SMOOTHEST = 1 / 400; // as in the analysis: less scatter than this tells of smoothing

/** @param offsetKmPerS added to the velocities of this side */
export function lightOf({ spectrum, analysis }: Sightline, offsetKmPerS: number): Light {
  const shift = dopplerFactor(offsetKmPerS as KmPerS);
  const noise = estimateNoise(spectrum);
  const components = analysis.features.map(componentOf);
  const correlated = noise.correlation.slice(1).reduce((sum, r) => sum + 2 * Math.max(0, r), 1);
  return {
    data: normalised(spectrum, analysis, noise.sigma, noise.how === 'estimated'),
    analysis,
    features: analysis.features,
    components,
    furthestNm: components.reduce((far, c) => Math.max(far, c.reach), 0),
    elementV: C_KM_PER_S / analysis.resolvingPower,
    noiseFactor: Math.sqrt(correlated),
    wavelengthOf: (rest, velocity) => (rest * dopplerFactor(velocity as KmPerS)) / shift,
    velocityOf: (wavelength, rest) => velocityOfFactor((wavelength * shift) / rest),
  };
}

/** Flux over the analysis' continuum, linear between its samples; weight 0 where a sample must not count. */
function normalised(spectrum: Spectrum, analysis: Analysis, sigma: Float64Array, estimated: boolean): NormalisedSamples {
  const { wavelength, flux: light, bad } = spectrum;
  const { sampleNm, sampleFlux } = analysis.continuum;
  const n = wavelength.length;
  const flux = new Float64Array(n).fill(1);
  const weight = new Float64Array(n);
  let j = 0;
  for (let i = 0; i < n; i++) {
    const nm = wavelength[i]!;
    while (j < sampleNm.length - 2 && sampleNm[j + 1]! < nm) j++;
    const t = Math.min(1, Math.max(0, (nm - sampleNm[j]!) / (sampleNm[j + 1]! - sampleNm[j]!)));
    const level = sampleNm.length > 1 ? sampleFlux[j]! + t * (sampleFlux[j + 1]! - sampleFlux[j]!) : (sampleFlux[0] ?? NaN);
    const s = estimated ? Math.max(sigma[i]!, SMOOTHEST * level) : sigma[i]!;
    if (bad[i] || !(s > 0) || !(level > 0) || !Number.isFinite(light[i])) continue;
    flux[i] = light[i]! / level;
    weight[i] = (level / s) ** 2;
  }
  return { wavelength, flux, weight };
}

const ROTATION = rotationShape(0.2);

function componentOf(f: Feature): Component {
  const c = newComponent(f.kind, f.wavelengthNm, f.fwhmNm, Math.abs(f.depth), f.shape === 'rotation' ? ROTATION : GAUSSIAN);
  if (f.damped) {
    c.damped = { tau: f.damped.tau, a: f.damped.a };
    c.scale = f.damped.dopplerNm;
    settle(c);
  }
  return c;
}

/** Indices of the features whose profile reaches into a range; features ascend in wavelength. */
export function featuresWithin({ features, components, furthestNm }: Light, fromNm: number, toNm: number): number[] {
  let low = 0;
  let high = features.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (features[mid]!.wavelengthNm < fromNm - furthestNm) low = mid + 1;
    else high = mid;
  }
  const out: number[] = [];
  for (let i = low; i < features.length && features[i]!.wavelengthNm < toNm + furthestNm; i++) {
    const c = components[i]!;
    if (c.centre + c.reach > fromNm && c.centre - c.reach < toNm) out.push(i);
  }
  return out;
}

export function summaryOf(light: Light): SightlineSummary {
  const { analysis: a } = light;
  const strongest = (family: string) => {
    const [best] = a.systems.filter((s) => s.family === family).sort((x, y) => y.significance - x.significance);
    return best ? light.velocityOf(dopplerFactor(best.velocityKmPerS as KmPerS), 1) : null;
  };
  return {
    frame: a.frame,
    resolvingPower: a.resolvingPower,
    snr: a.snr,
    fromNm: a.fromNm,
    toNm: a.toNm,
    starKmPerS: strongest('stellar'),
    airKmPerS: strongest('telluric'),
  };
}

/** First sample at or beyond a wavelength of the spectrum. */
export const sampleAt = (light: Light, nm: number): number => indexAt(light.data.wavelength, nm);
