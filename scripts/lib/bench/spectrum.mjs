// A simulated spectrum for timing: Planck light, listed lines of a star and a cloud as Gaussian dips, noise. Seeded, so every run sees the same.

/** Uniform numbers in [0, 1) from a seed (mulberry32). */
function uniform(seed) {
  let a = seed >>> 0;
  return () => {
    a = (a + 0x6d2b79f5) >>> 0;
    let t = Math.imul(a ^ (a >>> 15), a | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

const C_KM_PER_S = 299792.458;
const normal = (u) => Math.sqrt(-2 * Math.log(1 - u())) * Math.cos(2 * Math.PI * u());

/**
 * @param {number} pixels log-spaced from 380 to 690 nm
 * @param {number} dips number of absorption lines
 * @param {{ wavelengthNm: number, settings: readonly string[] }[]} lines the list to draw them from
 */
export function simulate(pixels, dips, lines, seed = 7) {
  const u = uniform(seed);
  const wavelength = Float64Array.from({ length: pixels }, (_, i) => 380 * (690 / 380) ** (i / (pixels - 1)));
  const step = Math.log(690 / 380) / (pixels - 1);
  const resolvingPower = Math.round(1 / (2.5 * step));
  const flux = wavelength.map((w) => (500 / w) ** 5 / Math.expm1(1.438777e7 / (w * 11500)));
  const inside = lines.filter((l) => l.wavelengthNm > 381 && l.wavelengthNm < 689 && l.settings.includes('stellar'));
  for (let k = 0; k < dips; k++) {
    const rest = inside[Math.floor(u() * inside.length)].wavelengthNm;
    const centre = rest * (1 + 23.4 / C_KM_PER_S);
    const depth = 0.04 + 0.5 * u() ** 2;
    const sigma = (centre / resolvingPower / 2.3548) * (1.1 + 1.5 * u());
    const at = Math.log(centre / 380) / step;
    const reach = Math.ceil((6 * sigma) / (centre * step));
    for (let i = Math.max(0, Math.floor(at) - reach); i < Math.min(pixels, at + reach); i++) {
      flux[i] *= 1 - depth * Math.exp(-0.5 * ((wavelength[i] - centre) / sigma) ** 2);
    }
  }
  const level = flux[pixels >> 1];
  const sigma = new Float64Array(pixels).fill(level / 120);
  for (let i = 0; i < pixels; i++) flux[i] += sigma[i] * normal(u);
  return { wavelength, flux, sigma, bad: new Uint8Array(pixels), fluxKind: 'per_wavelength', resolvingPower, frame: 'barycentric' };
}

/** The list with invented weak photospheric lines among its own, up to a length: what a complete list of a crowded region would be like. */
export function grown(list, length, seed = 11) {
  const u = uniform(seed);
  const patterns = list.lines.filter((l) => l.settings.includes('stellar') && l.type === 'allowed' && l.logGf !== null);
  const invented = Array.from({ length: Math.max(0, length - list.lines.length) }, (_, k) => {
    const pattern = patterns[Math.floor(u() * patterns.length)];
    return { ...pattern, id: `invented-${k}`, wavelengthNm: 370 * (700 / 370) ** u(), logGf: pattern.logGf - 1 - 2 * u() };
  });
  return { ...list, lines: [...list.lines, ...invented].sort((a, b) => a.wavelengthNm - b.wavelengthNm) };
}
