import fc from 'fast-check';
import { analyse, DEFAULT_SETTINGS, readSpectrum, vacuumToAir, type Analysis, type Spectrum, type VacuumNm } from '@foreveil/shared';
import { matter, sceneOf, simulate, type Kind } from '../simulation/index.js';
import { dopplerOf } from '../simulation/grid.js';

// What must not change what lines are taken for: where the source moves, how bright it is, in which unit, medium and sampling a file is
// written. Held on simulated spectra that are cheap to analyse. Properties of the method, no published values.

const { list } = matter();
const run = (spectrum: Spectrum) => analyse(spectrum, list, DEFAULT_SETTINGS);
/** Well sampled, so that samples may be joined; a short range, so that it is soon analysed. */
function sourceOf(kind: Kind, index: number, range: { fromNm: number; toNm: number }): Spectrum {
  const scene = sceneOf({ kind, index, seed: 12, trouble: 'plain' });
  return simulate({ ...scene, instrument: { ...scene.instrument, ...range, samplesPerElement: 4.5 } }).spectrum;
}
const SOURCES = {
  nebula: sourceOf('nebula', 1, { fromNm: 480, toNm: 690 }),
  clouds: sourceOf('ultraviolet', 0, { fromNm: 120, toNm: 140 }),
};
const BEFORE = { nebula: run(SOURCES.nebula), clouds: run(SOURCES.clouds) };
const names = ['nebula', 'clouds'] as const;

/** Sure readings of clear features, with where they stand. */
const sure = ({ features }: Analysis, least = 0.95) =>
  features
    .filter(({ significance, candidates: [c] }) => significance > 10 && (c?.probability ?? 0) > least)
    .map(({ wavelengthNm, candidates: [c] }) => ({ nm: wavelengthNm, line: c!.lineId }));

/** Of sure readings, how many the other analysis reads in the same way at the same place; it may be less sure. */
function agreement(before: Analysis, after: Analysis, placeOf: (nm: number) => number): number {
  const wanted = sure(before);
  const there = wanted.filter(({ nm, line }) =>
    after.features.some((f) => f.candidates[0]?.lineId === line && Math.abs(f.wavelengthNm - placeOf(nm)) < 0.5 * f.fwhmNm),
  );
  return there.length / wanted.length;
}

it('is asked of spectra with enough sure readings', () => {
  for (const name of names) expect(sure(BEFORE[name]).length).toBeGreaterThan(10);
});

it('does not hang on the velocity of the whole', () => {
  fc.assert(
    fc.property(fc.constantFrom(...names), fc.double({ min: -90, max: 90, noNaN: true }), (name, kmPerS) => {
      const factor = dopplerOf(kmPerS);
      const { wavelength } = SOURCES[name];
      const after = run({ ...SOURCES[name], wavelength: wavelength.map((nm) => nm * factor) });
      // lines enter and leave at the ends of the range, and velocity grids do not move along
      expect(agreement(BEFORE[name], after, (nm) => nm * factor)).toBeGreaterThan(0.97);
    }),
    { numRuns: 2, seed: 5 },
  );
});

it('does not hang on the scale of the flux', () => {
  fc.assert(
    fc.property(fc.constantFrom(...names), fc.double({ min: -20, max: 12, noNaN: true }), (name, dex) => {
      const by = (values: Float64Array) => values.map((f) => f * 10 ** dex);
      const { flux, sigma } = SOURCES[name];
      const after = run({ ...SOURCES[name], flux: by(flux), sigma: sigma && by(sigma) });
      expect(agreement(BEFORE[name], after, (nm) => nm)).toBe(1);
    }),
    { numRuns: 1, seed: 6 },
  );
});

describe('files of one spectrum', () => {
  const { wavelength, flux, sigma, resolvingPower } = SOURCES.nebula;
  const written = (head: string, place: (nm: number) => number) => {
    const rows = Array.from(wavelength, (nm, i) => `${place(nm)},${flux[i]},${sigma![i]}`);
    const text = [`# frame: barycentric`, `# resolving_power: ${resolvingPower}`, head, ...rows].join('\n');
    const read = readSpectrum(Buffer.from(text), 'file.csv');
    if (!read.ok) throw new Error(read.problem.sentence);
    return run(read.spectrum);
  };
  const nm = written('wavelength_vac (nm),flux,flux_error', (x) => x);

  it.each<[string, string, (nm: number) => number]>([
    ['Angstrom in air', 'wavelength_air (Angstrom),flux,flux_error', (x) => 10 * vacuumToAir(x as VacuumNm)],
    ['micrometres in vacuum', 'wavelength_vac (um),flux,flux_error', (x) => x / 1000],
  ])('in nm in vacuum and in %s are read alike', (_, head, place) => {
    const after = written(head, place);
    expect(after.features).toHaveLength(nm.features.length);
    after.features.forEach((f, i) => {
      // wavelengths come back to 1e-13; detection and fits are no more sensitive than this allows
      expect(Math.abs(f.wavelengthNm / nm.features[i]!.wavelengthNm - 1)).toBeLessThan(1e-8);
      expect(f.candidates[0]?.lineId).toBe(nm.features[i]!.candidates[0]?.lineId);
    });
  });
});

it('does not hang on the sampling: samples joined in pairs, errors with them', () => {
  for (const name of names) {
    const after = run(coarser(SOURCES[name]));
    expect(agreement(BEFORE[name], after, (nm) => nm)).toBeGreaterThan(0.95);
  }
});

/** Samples joined in pairs, every fifth left alone: coarser and uneven, with all the light kept. */
function coarser({ wavelength, flux, sigma, bad, ...rest }: Spectrum): Spectrum {
  const groups: number[][] = [];
  for (let i = 0; i + 4 < flux.length; i += 5) groups.push([i, i + 1], [i + 2, i + 3], [i + 4]);
  const mean = (values: Float64Array) => Float64Array.from(groups, (g) => g.reduce((sum, i) => sum + values[i]!, 0) / g.length);
  return {
    ...rest,
    wavelength: mean(wavelength),
    flux: mean(flux),
    sigma: sigma && Float64Array.from(groups, (g) => Math.sqrt(g.reduce((sum, i) => sum + sigma[i]! ** 2, 0)) / g.length),
    bad: Uint8Array.from(groups, (g) => Math.max(...g.map((i) => bad[i]!))),
  };
}

it('says "not in the list" of lines whose list is gone, and finds the same features', () => {
  const without = analyse(SOURCES.nebula, { ...list, lines: list.lines.filter((l) => !l.settings.includes('nebular')) }, DEFAULT_SETTINGS);
  expect(without.features).toHaveLength(BEFORE.nebula.features.length);
  expect(without.systems.filter(({ family }) => family === 'nebular')).toEqual([]);
  expect(without.features.filter(({ candidates: [c] }) => c?.family === 'nebular')).toEqual([]);
});
