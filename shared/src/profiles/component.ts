import { GAUSSIAN, LORENTZ, type Shape } from './shapes.js';

/**
 * One profile of a blend. Dips multiply the light, (1 - amplitude * phi); peaks add amplitude * phi, in units of the continuum.
 * phi = (1 - eta) * core + eta * Lorentz, both of the same FWHM.
 */
export interface Component {
  readonly kind: 'dip' | 'peak';
  core: Shape;
  /** vacuum nm */
  centre: number;
  /** nm */
  fwhm: number;
  /** depth or height over the continuum, never negative */
  amplitude: number;
  /** share of the Lorentzian, 0 for a pure core */
  eta: number;
  /** whether eta may move in the fit */
  winged: boolean;
  /** 1 sigma of amplitude, centre (nm), ln(fwhm), and their covariance, from the last fit; NaN before */
  sigmaAmplitude: number;
  sigmaCentre: number;
  sigmaLogFwhm: number;
  covAmplitudeLogFwhm: number;
}

export function newComponent(kind: Component['kind'], centre: number, fwhm: number, amplitude: number): Component {
  return { kind, core: GAUSSIAN, centre, fwhm, amplitude, eta: 0, winged: false, sigmaAmplitude: NaN, sigmaCentre: NaN, sigmaLogFwhm: NaN, covAmplitudeLogFwhm: NaN };
}

/** Distance from the centre, nm, beyond which the component is taken as absent. */
export function reachOf(c: Component): number {
  return c.fwhm * (c.eta > 0 || c.winged ? LORENTZ.reach : c.core.reach);
}

/** Integral of phi over wavelength divided by FWHM. */
export const areaOf = (c: Component): number => (1 - c.eta) * c.core.area + c.eta * LORENTZ.area;

/** phi at a wavelength. */
export function phi(c: Component, wavelength: number): number {
  const u = Math.abs(wavelength - c.centre) / c.fwhm;
  const core = look(c.core.value, c.core, u);
  return c.eta === 0 ? core : (1 - c.eta) * core + c.eta * look(LORENTZ.value, LORENTZ, u);
}

/** Table look-up, linear between steps. */
export function look(table: Float64Array, shape: Shape, u: number): number {
  const t = u * shape.perUnit;
  const i = t | 0;
  if (i >= table.length - 2) return 0;
  const a = table[i]!;
  return a + (t - i) * (table[i + 1]! - a);
}

/** Equivalent width, nm, positive in absorption: exact for a dip alone, additive for peaks. */
export function equivalentWidth(c: Component): { value: number; sigma: number } {
  const value = c.amplitude * c.fwhm * areaOf(c);
  const relativeVariance = (c.sigmaAmplitude / c.amplitude) ** 2 + c.sigmaLogFwhm ** 2 + (2 * c.covAmplitudeLogFwhm) / c.amplitude;
  return { value: c.kind === 'dip' ? value : -value, sigma: value * Math.sqrt(Math.max(relativeVariance, 0)) };
}
