/** 'FLUX_ERR', 'fluxErr', 'Flux err' and 'flux-err' all become ['flux', 'err']. */
export function words(name: string): string[] {
  return name
    .slice(0, 200)
    .replace(/(\p{Ll})(\p{Lu})/gu, '$1 $2')
    .toLowerCase()
    .split(/[^\p{L}\p{N}]+/u)
    .filter((word) => word !== '');
}

const has = (set: ReadonlySet<string>) => (word: string) => set.has(word);
const list = (text: string): ReadonlySet<string> => new Set(text.split(' '));

/** What a spectral axis may count. */
export type SpectralQuantity = 'length' | 'log10_length' | 'frequency' | 'energy' | 'wavenumber' | 'velocity';

const LENGTH = list(
  'wave waves wavelength wavelengths wavel wlen wl wvl wav lambda lambdas lamda lam awav lbda wellenlaenge wellenlänge wellenlange λ longitud longueur lunghezza',
);
const LOG_LENGTH = list('loglam loglambda logwave logwl logwavelength lglambda');
const FREQUENCY = list('freq frequency frequencies frequenz frequence fréquence frecuencia frequenza');
const ENERGY = list('energy ener energie energies énergie energía energia');
const WAVENUMBER = list('wavenumber wavenumbers wavenum wavn wn wellenzahl');
const VELOCITY = list('velocity velocities velo vopt vrad vel');
/** A column about the axis, but not the axis itself. */
const NOT_AN_AXIS = list(
  'err error errors sigma unc uncertainty lo hi low high min max bin width fwhm step res resolution delta dlambda disp dispersion shift corr rest',
);

/** The spectral quantity that a column's name stands for; null when it is not a spectral axis. */
export function axisQuantity(name: string): SpectralQuantity | null {
  const found = words(name);
  if (found.some(has(NOT_AN_AXIS))) return null;
  if (found.some(has(LOG_LENGTH))) return 'log10_length';
  if (found.some(has(LENGTH))) return found.includes('log') || found.includes('log10') ? 'log10_length' : 'length';
  // 'wave number' in two words
  if (found.some(has(WAVENUMBER)) || (found.includes('wave') && found.includes('number'))) return 'wavenumber';
  if (found.some(has(FREQUENCY))) return 'frequency';
  if (found.some(has(ENERGY))) return 'energy';
  if (found.some(has(VELOCITY))) return 'velocity';
  return null;
}

const FLUX = list('flux fluxes flx flam flambda fnu fluss flujo flusso');
const LIKE_FLUX = list(
  'intensity intensities intens intensität intensitaet intensité intensidad intensità int counts count cts adu electrons spec spectrum signal net data brightness radiance irradiance normalised normalized norm amplitude',
);
/** Words that make a flux column another one than the object's. */
const NOT_THE_FLUX = list(
  'raw sky background bg bkg bkgd back cont continuum model bestfit best fit gross telluric weight ratio response sens ref blaze dark flat template npts npix exp exptime units unit',
);
const CALIBRATED = list('cal calibrated norm normalised normalized');

const ERROR = list('err error errors errs sigma sig stddev stdev std sd unc uncert uncertainty noise rms dflux eflux fehler erreur');
const VARIANCE = list('var variance fluxvar');
const INVERSE = list('ivar invvar ivariance inverse inv');
/** Errors of something else, or one-sided ones. */
const NOT_THE_ERROR = list('sys syserror syserr systematic lo low lower hi high upper plus minus');

const MASK = list('mask masks qual quality dq dqflag dqflags dataqual flag flags bad badpix badpixel badpixels');
/** Masks of that kind hold remarks; the faults among them are zeros of the inverse variance already. */
const NOT_THE_MASK = list('and or full');

export type NameRole = 'flux' | 'sigma' | 'variance' | 'inverse_variance' | 'mask';

/** Role that a column's name speaks for, and how strongly (larger is better); null when the name says nothing. */
export function nameRole(name: string): { role: NameRole; strength: number } | null {
  const found = words(name);
  const aboutAxis = axisQuantity(found.filter((word) => !NOT_AN_AXIS.has(word)).join(' ')) !== null;
  if (aboutAxis) return null;
  const uncertainty = uncertaintyRole(found);
  if (uncertainty) return found.some(has(NOT_THE_ERROR)) ? null : { role: uncertainty, strength: found.length === 1 ? 9 : 8 };
  if (found.some(has(MASK))) return found.some(has(NOT_THE_MASK)) ? null : { role: 'mask', strength: 8 };
  const base = found.some(has(FLUX)) || found.some((word) => word.endsWith('flux')) ? 9 : found.some(has(LIKE_FLUX)) ? 7 : 0;
  if (base === 0) return null;
  const other = found.some(has(NOT_THE_FLUX)) ? -6 : 0;
  const alone = found.length === 1 || found.every((word) => FLUX.has(word) || LIKE_FLUX.has(word) || CALIBRATED.has(word)) ? 1 : 0;
  return { role: 'flux', strength: base + other + alone };
}

function uncertaintyRole(found: readonly string[]): 'sigma' | 'variance' | 'inverse_variance' | null {
  if (found.length === 1 && found[0] === 'inverse') return 'inverse_variance';
  if (found.some(has(INVERSE)) && (found.some((word) => word.includes('var')) || found.includes('ivar'))) return 'inverse_variance';
  if (found.some(has(VARIANCE))) return 'variance';
  // 'ferr', 'fluxerr', 'staterror', 'e_flux'
  if (found.some(has(ERROR)) || found.some((word) => /err(?:ors?|s)?$/.test(word)) || found[0] === 'e') return 'sigma';
  return null;
}

/** Medium that a name or a unit text mentions: 'wavelength_air', 'VACUUM_WAVE'. */
export function mediumWord(text: string): 'air' | 'vacuum' | null {
  const found = words(text);
  if (found.includes('air') || found.includes('awav')) return 'air';
  return found.some((word) => word === 'vac' || word === 'vacuum' || word === 'vakuum') ? 'vacuum' : null;
}

/** True when a name says that the continuum was divided out. */
export const saysNormalised = (name: string): boolean =>
  words(name).some((word) => word === 'norm' || /^normali[sz](?:ed|iert)$/.test(word));
