/** Exact SI values (CODATA 2018 and 2022): Planck constant J s, speed of light m/s, Boltzmann constant J/K. */
const H = 6.62607015e-34;
const C = 299_792_458;
const K = 1.380649e-23;

/** Second radiation constant h c / k in nm K. */
export const C2_NM_K = ((H * C) / K) * 1e9;
/** 2 h c^2 scaled so that B_lambda comes out in erg s^-1 cm^-2 Angstrom^-1 sr^-1 for wavelengths in nm. */
const C1 = 2 * H * C * C * 1e45 * 1e-7;
const LN_C1 = Math.log(C1);
/** Wien's displacement constant in nm K: wavelength of the peak of B_lambda times temperature. */
export const WIEN_NM_K = 2.897771955185172e6;

/** Planck's B_lambda in erg s^-1 cm^-2 Angstrom^-1 sr^-1; 0 where it underflows. */
export function planck(wavelengthNm: number, temperatureK: number): number {
  const l2 = wavelengthNm * wavelengthNm;
  const front = C1 / (l2 * l2 * wavelengthNm);
  const x = C2_NM_K / (wavelengthNm * temperatureK);
  if (x < 700) return front / Math.expm1(x);
  // exp(x) would overflow while the whole need not underflow
  const half = Math.exp(-0.5 * x);
  return front * half * half;
}

/** Natural log of B_lambda in the unit of `planck`; finite also where B_lambda itself underflows. */
export function lnPlanck(wavelengthNm: number, temperatureK: number): number {
  return LN_C1 - 5 * Math.log(wavelengthNm) - lnExpm1(C2_NM_K / (wavelengthNm * temperatureK));
}

/** ln(exp(x) - 1): what of ln B_lambda depends on the temperature, with x = c2 / (lambda T) > 0. */
export const lnExpm1 = (x: number): number => (x > 40 ? x : Math.log(Math.expm1(x)));

/** d ln B_lambda / d ln T, from 1 in the Rayleigh-Jeans tail to x = c2 / (lambda T) on the Wien side. */
export function planckSlope(wavelengthNm: number, temperatureK: number): number {
  const x = C2_NM_K / (wavelengthNm * temperatureK);
  return -x / Math.expm1(-x);
}

/** Wavelength of the peak of B_lambda, nm (Wien's displacement law). */
export const wienPeakNm = (temperatureK: number): number => WIEN_NM_K / temperatureK;

/** Temperature at which B_lambda at this wavelength is `intensity` (unit of `planck`), K; NaN unless positive. */
export function brightnessTemperature(wavelengthNm: number, intensity: number): number {
  if (!(intensity > 0)) return NaN;
  const l2 = wavelengthNm * wavelengthNm;
  return C2_NM_K / (wavelengthNm * Math.log1p(C1 / (l2 * l2 * wavelengthNm * intensity)));
}
