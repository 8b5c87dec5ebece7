import { C_KM_PER_S } from '../units/index.js';

/** F(tau) = integral over x >= 0 of 1 - exp(-tau exp(-x^2)): saturation of a Gaussian absorber; its ln tabulated in log10 tau. */
const LOG_MIN = -4;
const LOG_MAX = 8;
const PER_DEX = 50;
const TABLE: Float64Array = Float64Array.from({ length: (LOG_MAX - LOG_MIN) * PER_DEX + 1 }, (_, i) =>
  Math.log(saturationIntegral(10 ** (LOG_MIN + i / PER_DEX))),
);

function saturationIntegral(tau: number): number {
  const h = 0.02;
  let sum = 0.5 * -Math.expm1(-tau);
  for (let x = h; x < 6; x += h) sum += -Math.expm1(-tau * Math.exp(-x * x));
  return sum * h;
}

/** F(tau), a power law between table entries, good to 1e-4; thin limit below 1e-4. */
export function saturation(tau: number): number {
  const t = (Math.log10(tau) - LOG_MIN) * PER_DEX;
  if (!(t > 0)) return (tau * Math.sqrt(Math.PI)) / 2;
  const i = Math.min(TABLE.length - 2, Math.floor(t));
  return Math.exp(TABLE[i]! + (t - i) * (TABLE[i + 1]! - TABLE[i]!));
}

/**
 * Optical depth at the centre of a Gaussian absorber.
 * @param column cm^-2; @param f oscillator strength; @param wavelengthNm vacuum nm; @param b Doppler parameter, km/s
 * Source: tau_0 = sqrt(pi) e^2 / (m_e c) N f lambda / b; 1.497e-15 for lambda in Angstrom and b in km/s (Spitzer 1978, eq. 3-50; from memory).
 */
export const centralDepth = (column: number, f: number, wavelengthNm: number, b: number): number =>
  (1.497364e-14 * column * f * wavelengthNm) / b;

/**
 * Equivalent width, nm, of one absorbing component. Doppler core and radiation-damped wings are joined as Rodgers & Williams 1974 (JQSRT 14,
 * 319; from memory) join the widths of Doppler and Lorentz profiles, so that both the thin limit and the square-root law hold; in between
 * it is up to 9 % too wide.
 * @param gamma damping constant, s^-1 (about the line's Einstein A for resonance lines); 0 leaves the wings out
 */
export function growthWidth(column: number, f: number, wavelengthNm: number, b: number, gamma: number): number {
  const tau = centralDepth(column, f, wavelengthNm, b);
  if (!(tau > 0)) return 0;
  const thin = (b / C_KM_PER_S) * Math.sqrt(Math.PI) * tau;
  const core = ((2 * b) / C_KM_PER_S) * saturation(tau);
  // square-root part: W/lambda = lambda/c sqrt(e^2/(m_e c) N f gamma) for tau >> 1; e^2/(m_e c) = 8.448e-3 cm^2/s
  const wings = (wavelengthNm * 1e-7 * Math.sqrt(8.448e-3 * column * f * gamma)) / 2.99792458e10;
  const lorentz = (thin * wings) / Math.hypot(thin, wings);
  return wavelengthNm * Math.hypot(core, lorentz * Math.sqrt(Math.max(0, 1 - (core / thin) ** 2)));
}
