import { dampedTable, dampedValue, type DampedShape } from './damped.js';
import { GAUSSIAN, type Shape } from './shapes.js';
import type { Smear } from './smear.js';

/**
 * One profile of a blend. Dips multiply the light, (1 - amplitude * phi); peaks add amplitude * phi, in units of the continuum.
 * phi has unit peak and is either a fixed shape scaled in width, or a damped one with two shape parameters of its own.
 */
export interface Component {
  readonly kind: 'dip' | 'peak';
  core: Shape;
  /** null for a fixed shape */
  damped: DampedShape | null;
  /** vacuum nm */
  centre: number;
  /** nm that stand for one unit of the shape's argument: FWHM for fixed shapes, Doppler width for damped ones */
  scale: number;
  /** depth or height over the continuum, never negative */
  amplitude: number;
  /** nm; follows scale and shape */
  fwhm: number;
  /** integral of phi over wavelength, nm; follows scale and shape */
  area: number;
  /** nm from the centre beyond which the profile is taken as absent; follows scale and shape */
  reach: number;
  /** 1 sigma of amplitude, centre (nm), ln FWHM and equivalent width (nm) from the last fit; NaN before */
  sigmaAmplitude: number;
  sigmaCentre: number;
  sigmaLogFwhm: number;
  sigmaEquivalentWidth: number;
}

export function newComponent(kind: Component['kind'], centre: number, fwhm: number, amplitude: number, core: Shape = GAUSSIAN): Component {
  const c: Component = {
    kind,
    core,
    damped: null,
    centre,
    scale: fwhm,
    amplitude,
    fwhm,
    area: 0,
    reach: 0,
    sigmaAmplitude: NaN,
    sigmaCentre: NaN,
    sigmaLogFwhm: NaN,
    sigmaEquivalentWidth: NaN,
  };
  settle(c);
  return c;
}

/** Brings FWHM, area and reach in line with scale and shape. */
export function settle(c: Component): void {
  if (c.damped) {
    const extent = dampedTable(c.damped);
    c.fwhm = extent.fwhm * c.scale;
    c.area = extent.area * c.scale;
    c.reach = extent.reach * c.scale;
  } else {
    c.fwhm = c.scale;
    c.area = c.core.area * c.scale;
    c.reach = c.core.reach * c.scale;
  }
}

/**
 * A copy with a damped profile of about the same FWHM.
 * @param shape what to start from; by default moderately saturated, moderately winged
 * @param smear what smears the line, its width in nm; null where that does not matter
 */
export function asDamped(
  c: Component,
  shape: { readonly tau: number; readonly a: number } = { tau: 4, a: 0.6 },
  smear: { readonly kind: Smear['kind']; readonly nm: number } | null = null,
): Component {
  const { tau, a } = shape;
  const smearFwhm = smear ? smear.nm * (smear.kind === 'rotation' ? ROTATION_FWHM : FWHM_PER_SIGMA) : 0;
  const own = Math.sqrt(Math.max(c.fwhm ** 2 - smearFwhm ** 2, (0.3 * c.fwhm) ** 2));
  const scale = own / dampedTable({ tau, a }).fwhm;
  const out: Component = { ...c, damped: smear ? { tau, a, smear: { kind: smear.kind, width: smear.nm / scale } } : { tau, a }, scale };
  settle(out);
  return out;
}

const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2);
const ROTATION_FWHM = 1.6; // v sin i, for a rotation profile that nothing else broadens

/** A copy with a fixed shape of the same FWHM. */
export function withCore(c: Component, core: Shape): Component {
  const out: Component = { ...c, damped: null, core, scale: c.fwhm };
  settle(out);
  return out;
}

/** Table look-up, linear between steps. */
export function look(table: Float64Array, shape: Shape, u: number): number {
  const t = u * shape.perUnit;
  const i = t | 0;
  if (i >= table.length - 2) return 0;
  const a = table[i]!;
  return a + (t - i) * (table[i + 1]! - a);
}

/** Function that gives phi at a wavelength for one component as it is now. */
export function profileOf(c: Component): (wavelength: number) => number {
  const { centre, core, damped } = c;
  const inverse = 1 / c.scale;
  if (!damped) return (x) => look(core.value, core, Math.abs(x - centre) * inverse);
  const table = dampedTable(damped);
  return (x) => dampedValue(table, Math.abs(x - centre) * inverse);
}

/** Equivalent width, nm, positive in absorption. */
export function equivalentWidth(c: Component): { value: number; sigma: number } {
  const value = c.amplitude * c.area;
  return { value: c.kind === 'dip' ? value : -value, sigma: c.sigmaEquivalentWidth };
}
