import { C_KM_PER_S, type Line } from '@foreveil/shared';
import { coverageOf, dopplerFactor, type Coverage, type FeatureView } from '../../shared/src/identify/views.js';

/** What a spectrum of even quality could show. */
export function evenCoverage(fromNm: number, toNm: number, resolvingPower: number, signalToNoise: number): Coverage {
  const step = (fromNm + toNm) / 2 / resolvingPower / 2.5;
  const wavelength = Float64Array.from({ length: Math.floor((toNm - fromNm) / step) }, (_, i) => fromNm + i * step);
  return coverageOf(wavelength, new Float64Array(wavelength.length).fill(signalToNoise ** 2), resolvingPower, 4.5);
}

/** A feature as it would be measured; its index is set when features are put in order. */
export function featureAtNm(nm: number, widthNm: number, fwhmV: number, more: Partial<FeatureView> = {}): FeatureView {
  return {
    index: 0,
    kind: 'dip',
    wavelength: nm,
    sigmaV: 0.1,
    logW: Math.log10(widthNm),
    sigmaLogW: 0.02,
    fwhmNm: (fwhmV * nm) / C_KM_PER_S,
    fwhmV,
    significance: 40,
    flags: [],
    ...more,
  };
}

/** The feature that a line makes at a velocity. */
export const featureOf = (line: Line, kmPerS: number, widthNm: number, fwhmV: number, more: Partial<FeatureView> = {}): FeatureView =>
  featureAtNm(line.wavelengthNm * dopplerFactor(kmPerS), widthNm, fwhmV, more);

/** Features ascending in wavelength, numbered. */
export const inOrder = (features: readonly FeatureView[]): FeatureView[] =>
  [...features].sort((a, b) => a.wavelength - b.wavelength).map((f, index) => ({ ...f, index }));
