/** Planck's law per wavelength, up to a factor. */
export const planckLight = (nm: number, kelvin: number) => (nm / 500) ** -5 / Math.expm1(1.438_776_877e7 / (nm * kelvin));

/**
 * Absorption by dust, A(lambda) / A(V), R_V = 3.1: Cardelli, Clayton & Mathis 1989, ApJ 345, 245, without the small far-ultraviolet
 * curvature below 3.3 per micron's bump terms beyond their eq. 4.
 */
export function dustLaw(nm: number): number {
  const x = 1000 / nm;
  const [a, b] = x < 1.1 ? infrared(x) : x < 3.3 ? optical(x) : ultraviolet(x);
  return a + b / 3.1;
}

const infrared = (x: number): [number, number] => [0.574 * x ** 1.61, -0.527 * x ** 1.61];

const series = (y: number, coefficients: readonly number[]) => coefficients.reduceRight((sum, c) => sum * y + c, 0);
const optical = (x: number): [number, number] => [
  series(x - 1.82, [1, 0.17699, -0.50447, -0.02427, 0.72085, 0.01979, -0.7753, 0.32999]),
  series(x - 1.82, [0, 1.41338, 2.28305, 1.07233, -5.38434, -0.62251, 5.3026, -2.09002]),
];

function ultraviolet(x: number): [number, number] {
  if (x > 8) return [series(x - 8, [-1.073, -0.628, 0.137, -0.07]), series(x - 8, [13.67, 4.257, -0.42, 0.374])];
  const d = x < 5.9 ? 0 : x - 5.9;
  return [
    1.752 - 0.316 * x - 0.104 / ((x - 4.67) ** 2 + 0.341) - 0.04473 * d ** 2 - 0.009779 * d ** 3,
    -3.09 + 1.825 * x + 1.206 / ((x - 4.62) ** 2 + 0.263) + 0.213 * d ** 2 + 0.1207 * d ** 3,
  ];
}

/** Voigt's H(a, u) for small damping: a Doppler core and Lorentz wings that begin outside it; good to some per cent for a below 0.3. */
export function voigtCore(a: number, u: number): number {
  const u2 = u * u;
  const core = u2 < 60 ? Math.exp(-u2) : 0;
  return core + (a / Math.sqrt(Math.PI)) * (u2 < 1e-3 ? 1 : (1 - core) / (u2 + 0.5 * core));
}
