/** What a simulated absorption spectrum holds. Wavelengths are as the observer's air would have them. */
export interface Simulation {
  readonly fromNm: number;
  readonly toNm: number;
  readonly stepNm: number;
  readonly temperatureK: number;
  /** per sample, in the continuum */
  readonly signalToNoise: number;
  readonly lines: readonly { readonly airNm: number; readonly depth: number; readonly sigmaNm: number }[];
  readonly seed: number;
}

/** The Na I doublet in air, NIST: 588.995 and 589.592 nm; and He I 587.562 nm. Moved by -12.3 km/s and +8 km/s. */
const moved = (restNm: number, kmPerS: number) => restNm * (1 + kmPerS / 299_792.458);
export const HOT_STAR_BEHIND_A_CLOUD: Simulation = {
  fromNm: 583,
  toNm: 595,
  stepNm: 0.002,
  temperatureK: 18_000,
  signalToNoise: 120,
  lines: [
    { airNm: moved(588.995, -12.3), depth: 0.72, sigmaNm: 0.006 },
    { airNm: moved(589.592, -12.3), depth: 0.55, sigmaNm: 0.006 },
    { airNm: moved(587.562, 8), depth: 0.22, sigmaNm: 0.06 },
  ],
  seed: 7,
};

/** The simulation as a text table that says its unit but not whether it means air or vacuum. Same simulation, same bytes. */
export function csvOfUnstatedMedium(simulation: Simulation): string {
  const { fromNm, toNm, stepNm, signalToNoise } = simulation;
  const noise = gaussians(simulation.seed);
  const scale = planck((fromNm + toNm) / 2, simulation.temperatureK);
  const rows = ['wavelength (nm),flux,flux_error'];
  for (let i = 0; fromNm + i * stepNm <= toNm; i++) {
    const nm = fromNm + i * stepNm;
    const continuum = planck(nm, simulation.temperatureK) / scale;
    const sigma = continuum / signalToNoise;
    const flux = continuum * transmission(nm, simulation) + sigma * noise();
    rows.push(`${nm.toFixed(4)},${flux.toFixed(6)},${sigma.toFixed(6)}`);
  }
  return `${rows.join('\n')}\n`;
}

const transmission = (nm: number, { lines }: Simulation) =>
  lines.reduce((through, { airNm, depth, sigmaNm }) => through * (1 - depth * Math.exp(-0.5 * ((nm - airNm) / sigmaNm) ** 2)), 1);

/** Planck's law per wavelength, up to a factor. */
const planck = (nm: number, kelvin: number) => nm ** -5 / Math.expm1(1.438_776_877e7 / (nm * kelvin));

/** Normal deviates by Box and Muller from a small generator (mulberry32), so that every run sees the same noise. */
function gaussians(seed: number): () => number {
  let state = seed;
  const uniform = () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
  return () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
}
