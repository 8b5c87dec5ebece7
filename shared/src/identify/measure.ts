import { addComponent, equivalentWidth, indexAt, type Component, type NormalisedSamples } from '../profiles/index.js';
import { C_KM_PER_S } from '../units/index.js';
import type { FeatureFlag } from './analysis.js';

/** A feature's numbers before it has a name. */
export interface Measured {
  readonly component: Component;
  readonly equivalentWidthNm: number;
  readonly equivalentWidthSigmaNm: number;
  readonly directNm: number;
  readonly directSigmaNm: number;
  readonly significance: number;
  readonly snr: number;
  readonly flags: FeatureFlag[];
}

const COSMIC_WIDTH = 0.62; // of a resolution element: light that passed the instrument cannot be narrower
const SATURATED_DEPTH = 0.93;
const BAND_KM_S = 450;

/**
 * Equivalent widths (fit and direct sum), errors with the continuum's placement, and flags.
 * Direct sum after Vollmann & Eversberg 2006 (AN 327, 862): pixel noise plus continuum error times the range.
 * @param others components sharing the range: a dip's direct sum has their light divided out, a peak's has it taken off
 * @param continuumSigma relative error of the continuum's placement
 */
export function measure(
  c: Component,
  data: NormalisedSamples,
  others: readonly Component[],
  resolvingPower: number,
  continuumSigma: number,
): Measured {
  const fitted = equivalentWidth(c);
  const half = Math.min(c.reach, (c.damped ? 4 : 1.5) * c.fwhm);
  const from = indexAt(data.wavelength, c.centre - half);
  const to = indexAt(data.wavelength, c.centre + half);
  const dips = new Float64Array(Math.max(0, to - from)).fill(1);
  const peaks = new Float64Array(dips.length);
  for (const o of others) addComponent(o, data.wavelength, from, to, dips, peaks);
  let direct = 0;
  let variance = 0;
  let weights = 0;
  let lost = 0;
  for (let i = from; i < to; i++) {
    const step = 0.5 * (data.wavelength[Math.min(i + 1, data.wavelength.length - 1)]! - data.wavelength[Math.max(i - 1, 0)]!);
    const w = data.weight[i]!;
    if (w === 0) {
      lost++;
      continue;
    }
    const left = data.flux[i]! - peaks[i - from]!;
    const clear = c.kind === 'dip' ? Math.max(dips[i - from]!, 0.05) : 1;
    direct += step * (c.kind === 'dip' ? 1 - left / clear : dips[i - from]! - left);
    variance += (step / clear) ** 2 / w;
    weights += w;
  }
  const placement = continuumSigma * 1.06 * c.fwhm;
  return {
    component: c,
    equivalentWidthNm: fitted.value,
    equivalentWidthSigmaNm: Math.hypot(fitted.sigma, placement),
    directNm: direct,
    directSigmaNm: Math.hypot(Math.sqrt(variance), continuumSigma * (to - from > 0 ? 2 * half : 0)),
    significance: c.amplitude / c.sigmaAmplitude,
    snr: Math.sqrt(weights / Math.max(1, to - from - lost)),
    flags: flagsOf(c, data, others, resolvingPower, from, to, lost),
  };
}

function flagsOf(
  c: Component,
  data: NormalisedSamples,
  others: readonly Component[],
  resolvingPower: number,
  from: number,
  to: number,
  lost: number,
): FeatureFlag[] {
  const flags: FeatureFlag[] = [];
  const element = c.centre / resolvingPower;
  if (c.kind === 'peak' && c.fwhm + 2 * c.fwhm * c.sigmaLogFwhm < COSMIC_WIDTH * element) flags.push('cosmic');
  if (
    others.some(
      (o) =>
        o.kind === c.kind && Math.abs(o.centre - c.centre) < 0.6 * (o.fwhm + c.fwhm) && o.amplitude * o.fwhm > 0.1 * c.amplitude * c.fwhm,
    )
  )
    flags.push('blend');
  if (c.kind === 'dip' && c.amplitude > SATURATED_DEPTH) flags.push('saturated');
  if (from === 0 || to >= data.wavelength.length || lost > 0.15 * (to - from)) flags.push('edge');
  if ((c.fwhm / c.centre) * C_KM_PER_S > BAND_KM_S) flags.push('band');
  return flags;
}
