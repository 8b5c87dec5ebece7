import { csvOf, KINDS, sceneOf, simulate, matter, chanceOf, type Scene } from '../simulation/index.js';
import { layerOf, photosphericLines, type Star } from '../simulation/photosphere.js';

// The simulator is what the program's probabilities and errors are held against, so it is held against published numbers itself.

const INSTRUMENT = {
  fromNm: 520,
  toNm: 532,
  resolvingPower: 60_000,
  samplesPerElement: 3,
  signalToNoise: 1e5,
  skew: 0,
  bend: 0,
  noiseSmoothing: 0,
  cosmicHits: 0,
  gaps: 0,
  statesSigma: true,
  ripple: 0,
};
const EMPTY: Scene = {
  name: 'empty',
  kind: 'sightline',
  seed: 1,
  temperatureK: 6000,
  av: 0,
  medium: 'vacuum',
  stars: [],
  absorption: [],
  emission: [],
  systems: [],
  instrument: INSTRUMENT,
};

const SUN: Star = {
  id: 'star',
  temperatureK: 5777,
  velocityKmPerS: 0,
  vsini: 2,
  macroKmPerS: 3,
  microKmPerS: 1,
  metals: 0,
  scatter: { element: 0, line: 0 },
  lightShare: 1,
};

describe('simulated spectra', () => {
  it('are the same for the same order, and others for another seed', () => {
    const bytes = (seed: number) => csvOf(simulate(sceneOf({ kind: 'nebula', index: 1, seed })));
    const once = bytes(3);
    expect(bytes(3)).toBe(once);
    expect(bytes(4)).not.toBe(once);
  });

  it('hold lines of the systems that their truth names, in every kind but the featureless', () => {
    for (const kind of KINDS.filter((k) => k !== 'featureless')) {
      const scene = sceneOf({ kind, index: 0, seed: 5 });
      const named = new Set(scene.systems.map(({ id }) => id));
      const used = [...scene.absorption, ...scene.emission.flatMap(({ lines }) => lines)].filter(({ listed }) => listed);
      expect(used.length + scene.stars.length).toBeGreaterThan(0);
      expect(used.filter(({ system }) => system !== 'bands' && !named.has(system))).toEqual([]);
      expect(scene.stars.filter(({ star }) => !named.has(star.id))).toEqual([]);
    }
  });

  it('show an absorption line with the equivalent width and width that the truth gives', () => {
    const shape = (v: number) => Math.exp(-((v / 6) ** 2));
    const line = {
      species: 'Na I',
      restNm: 526,
      setting: 'interstellar',
      system: 'cloud',
      velocityKmPerS: 20,
      listed: true,
      shape,
      reach: 30,
    } as const;
    const { spectrum, truth } = simulate({ ...EMPTY, absorption: [{ ...line, central: 3 }] });
    const at = truth.lines[0]!;
    const inside = [...spectrum.wavelength.keys()].filter((i) => Math.abs(spectrum.wavelength[i]! - at.obs_nm) < 0.15);
    const outside = [...spectrum.wavelength.keys()].filter((i) => Math.abs(Math.abs(spectrum.wavelength[i]! - at.obs_nm) - 0.2) < 0.04);
    const level = outside.reduce((sum, i) => sum + spectrum.flux[i]!, 0) / outside.length;
    const stepNm = spectrum.wavelength[inside[1]!]! - spectrum.wavelength[inside[0]!]!;
    const direct = inside.reduce((sum, i) => sum + (1 - spectrum.flux[i]! / level) * stepNm, 0);
    // the slope of Planck's law over 0.3 nm is far below this
    expect(direct / at.ew_nm).toBeCloseTo(1, 2);
    expect(at.obs_nm).toBeCloseTo(526 * (1 + 20 / 299_792.458), 4);
  });

  // Moore, Minnaert & Houtgast 1966, NBS Monograph 61; equivalent widths in mA, from memory. One layer is good to half.
  it.each([
    ['Fe I', 525.021, 62],
    ['Fe I', 525.065, 101],
    ['Na I', 588.995, 752],
    ['Ca I', 616.217, 222],
    ['Mg I', 518.36, 1584],
    ['H I', 656.28, 4020],
  ])('give the Sun %s %d nm about the width it has', (species, airNm, milliAngstrom) => {
    const m = matter();
    const layer = layerOf(m, SUN.temperatureK, 0);
    const lines = photosphericLines(m, SUN, layer, airNm - 1, airNm + 1, chanceOf('sun')).filter((l) => l.line.species === species);
    const instrument = { ...INSTRUMENT, fromNm: airNm - 5, toNm: airNm + 5 };
    const { truth } = simulate({ ...EMPTY, instrument, temperatureK: 5777, stars: [{ star: SUN, lines }] });
    const near = truth.lines.filter((l) => Math.abs(l.rest_nm / 1.00028 - airNm) < 0.02);
    const width = 1e4 * Math.max(...near.map(({ ew_nm }) => ew_nm));
    expect(width / milliAngstrom).toBeGreaterThan(0.67);
    expect(width / milliAngstrom).toBeLessThan(1.5);
  });

  it('keep the ratios of nebular lines from one upper level: [O III] 2.98, [N II] 3.05 (Storey & Zeippen 2000)', () => {
    const { emission } = sceneOf({ kind: 'nebula', index: 0, seed: 2, trouble: 'plain' });
    const flux = (species: string, airNm: number) =>
      emission[0]!.lines.find((l) => l.species === species && Math.abs(l.restNm / 1.00028 - airNm) < 0.05)!.flux;
    // each line has a tenth of a magnitude of scatter of its own
    expect(flux('O III', 500.684) / flux('O III', 495.891) / 2.98).toBeCloseTo(1, 0);
    expect(flux('N II', 658.345) / flux('N II', 654.805) / 3.05).toBeCloseTo(1, 0);
  });

  it('bend wavelengths no further than asked, and blind samples where the detector has gaps', () => {
    const bent = simulate({ ...EMPTY, instrument: { ...INSTRUMENT, bend: 0.1, gaps: 2 } });
    expect(bent.truth.distorted).toBe(true);
    expect(bent.spectrum.bad.some((b) => b === 1)).toBe(true);
    expect(bent.spectrum.flux.every((f, i) => Number.isNaN(f) === (bent.spectrum.bad[i] === 1))).toBe(true);
  });
});
