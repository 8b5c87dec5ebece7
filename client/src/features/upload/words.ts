import type { AxisUnit, FluxKind, Frame, How, Medium, ReadingCorrections, Stated, UncertaintyKind } from '@foreveil/shared';

export const MEDIUM_WORD: Record<Medium, string> = { vacuum: 'vacuum', air: 'air' };

export const FRAME_WORD: Record<Frame, string> = {
  topocentric: 'topocentric',
  geocentric: 'geocentric',
  heliocentric: 'heliocentric',
  barycentric: 'barycentric',
  lsrk: 'local standard of rest, kinematic',
  lsrd: 'local standard of rest, dynamic',
  source: 'rest frame of the source',
  unknown: 'not known',
};

export const FLUX_WORD: Record<FluxKind, string> = {
  per_wavelength: 'per wavelength',
  per_frequency: 'per frequency',
  normalised: 'normalised to the continuum',
  counts: 'counts',
  unknown: 'not known',
};

export const UNIT_WORD: Record<AxisUnit, string> = {
  m: 'm',
  nm: 'nm',
  angstrom: 'Å',
  micron: 'µm',
  wavenumber_per_cm: 'cm⁻¹',
  wavenumber_per_m: 'm⁻¹',
  hz: 'Hz',
  ghz: 'GHz',
  thz: 'THz',
  ev: 'eV',
  kev: 'keV',
  velocity: 'km/s',
};

export const ERROR_WORD: Record<UncertaintyKind, string> = {
  sigma: 'standard deviation',
  variance: 'variance',
  inverse_variance: 'inverse variance',
};

const HOW_WORD: Record<How, string> = { stated: 'stated', assumed: 'assumed', corrected: 'said by you', not_stated: 'not stated' };

/** How a fact is known. What the file does not say stands out, because it may be wrong. */
export function howKnown({ how, where }: Pick<Stated<unknown>, 'how' | 'where'>): { words: string; loud: boolean } {
  const detail = how === 'corrected' || !where ? '' : `, ${where}`;
  return { words: HOW_WORD[how] + detail, loud: how === 'assumed' || how === 'not_stated' };
}

/** Choices of a Select from a table of words. */
export const optionsOf = <K extends string>(words: Record<K, string>): { value: K; label: string }[] =>
  (Object.entries(words) as [K, string][]).map(([value, label]) => ({ value, label }));

/** One more correction, or one less: a value equal to what stands is no correction. */
export function withCorrection<K extends keyof ReadingCorrections>(
  corrections: ReadingCorrections,
  field: K,
  value: ReadingCorrections[K] | undefined,
): ReadingCorrections {
  const next = { ...corrections, [field]: value };
  if (value === undefined) delete next[field];
  return next;
}
