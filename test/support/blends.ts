import { addComponent, newComponent, settle, type Component, type NormalisedSamples } from '@foreveil/shared';

export const grid = (from: number, to: number, step: number) =>
  Float64Array.from({ length: Math.round((to - from) / step) + 1 }, (_, i) => from + i * step);

/** Light of components over a continuum of 1. */
export function light(wavelength: Float64Array, components: readonly Component[]): Float64Array {
  const value = new Float64Array(wavelength.length).fill(1);
  const peaks = new Float64Array(wavelength.length);
  for (const c of components) addComponent(c, wavelength, 0, wavelength.length, value, peaks);
  return value.map((v, i) => v + peaks[i]!);
}

/** Components as a spectrograph would see them, with noise when a source of it is given. */
export function samples(
  components: readonly Component[],
  signalToNoise: number,
  normal?: () => number,
  wavelength = grid(498, 502, 0.01),
): NormalisedSamples {
  const model = light(wavelength, components);
  return {
    wavelength,
    flux: normal ? model.map((m) => m + normal() / signalToNoise) : model,
    weight: new Float64Array(wavelength.length).fill(signalToNoise ** 2),
  };
}

export const dip = (centre: number, fwhm: number, depth: number) => newComponent('dip', centre, fwhm, depth);
export const peak = (centre: number, fwhm: number, height: number) => newComponent('peak', centre, fwhm, height);
export function damped(centre: number, doppler: number, depth: number, tau: number, a: number): Component {
  const c = dip(centre, doppler, depth);
  c.damped = { tau, a };
  c.scale = doppler;
  settle(c);
  return c;
}
export const copies = (components: readonly Component[]): Component[] => components.map((c) => ({ ...c }));
