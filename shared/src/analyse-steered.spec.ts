import { defaultList, demoSlice } from '../../test/support/demo-slices.js';
import { noisySpectrum } from '../../test/support/noisy-spectrum.js';
import { analyse } from './analyse.js';
import { moveAt } from './continuum/index.js';
import { completeSettings, type Analysis, type AnalysisSettings, type Feature } from './identify/index.js';
import type { Spectrum } from './spectrum/index.js';

// What each setting of a person does to a run, on simulated spectra: the gas, star and air around the sodium doublet, and made-up profiles.

const list = defaultList();
const run = (spectrum: Spectrum, settings: Partial<AnalysisSettings> = {}) => analyse(spectrum, list, completeSettings(settings));
const SODIUM = demoSlice('tern-1.fits.gz', 586, 597);
const plain = run(SODIUM);
const near = ({ features }: Analysis, nm: number, withinNm = 0.02): Feature | undefined =>
  features.filter((f) => Math.abs(f.wavelengthNm - nm) < withinNm).sort((a, b) => b.significance - a.significance)[0];
const systemsOf = ({ systems }: Analysis, family: string) => systems.filter((s) => s.family === family);

const DIP = { nm: 551, depth: 0.4, fwhmNm: 0.05 };
const recipe = { fromNm: 545, toNm: 557, resolvingPower: 30_000, temperatureK: 6000, signalToNoise: 150, seed: 3 };
const simulated = (lines = [DIP]) => noisySpectrum({ ...recipe, lines }).spectrum;
const one = run(simulated());

describe('a masked region', () => {
  it('has no feature, and leaves those elsewhere as they are', () => {
    const two = simulated([DIP, { nm: 553, depth: 0.3, fwhmNm: 0.05 }]);
    const whole = run(two);
    const masked = run(two, { maskedRegions: [{ fromNm: 550.8, toNm: 551.2 }] });
    expect(near(whole, 551)).toBeDefined();
    expect(masked.features.filter((f) => f.wavelengthNm > 550.75 && f.wavelengthNm < 551.25)).toEqual([]);
    const [before, after] = [near(whole, 553)!, near(masked, 553)!];
    expect(Math.abs(after.wavelengthNm - before.wavelengthNm)).toBeLessThan(0.3 * before.wavelengthSigmaNm);
  });

  it('does not take part in the continuum: nonsense within it changes nothing', () => {
    const spoilt = simulated();
    const region = { fromNm: 548, toNm: 549 };
    const inside = (i: number) => spoilt.wavelength[i]! >= region.fromNm && spoilt.wavelength[i]! <= region.toNm;
    const flux = spoilt.flux.map((f, i) => (inside(i) ? 50 * f : f));
    expect(run({ ...spoilt, flux }, { maskedRegions: [region] })).toEqual(run(spoilt, { maskedRegions: [region] }));
  });
});

describe('a continuum that was moved', () => {
  const move = { fromNm: 550, toNm: 552, factor: 1.05 };

  it('is higher by the factor in the middle, as before outside, and smooth between', () => {
    expect([549.9, 550, 551, 552, 552.1].map((nm) => moveAt(move, nm))).toEqual([1, 1, 1.05, 1, 1]);
    const values = Array.from({ length: 401 }, (_, i) => moveAt(move, 549.8 + i * 0.006));
    values.slice(1).forEach((v, i) => expect(Math.abs(v - values[i]!)).toBeLessThan(0.001));
  });

  it('makes a dip in its middle stronger by what the level gained, and is drawn so', () => {
    const moved = run(simulated(), { continuumMoves: [{ ...move, fromNm: 550.6, toNm: 551.4 }] });
    const at = ({ continuum: c }: Analysis, nm: number) => {
      const i = c.sampleNm.findIndex((x) => x >= nm);
      const t = (nm - c.sampleNm[i - 1]!) / (c.sampleNm[i]! - c.sampleNm[i - 1]!);
      return c.sampleFlux[i - 1]! * (1 - t) + c.sampleFlux[i]! * t;
    };
    expect(at(moved, 551) / at(one, 551)).toBeCloseTo(1.05, 3);
    expect(at(moved, 555) / at(one, 555)).toBeCloseTo(1, 9);
    // light missing below a level that is 5 % too high over 0.6 nm, counted as dips there: 0.6 nm (1 - 1/1.05) = 0.029 nm
    const taken = ({ features }: Analysis) =>
      features.filter((f) => Math.abs(f.wavelengthNm - 551) < 0.45).reduce((sum, f) => sum + f.equivalentWidthNm, 0);
    expect(Math.abs(taken(moved) - taken(one) - 0.029)).toBeLessThan(0.01);
  });
});

describe('features placed by hand', () => {
  const hidden = { nm: 554, depth: 0.012, fwhmNm: 0.05 }; // a two-sigma dip, below the threshold

  it('are fitted where they were placed, however weak, and say who placed them', () => {
    const spectrum = simulated([DIP, hidden]);
    expect(near(run(spectrum), 554)).toBeUndefined();
    const found = near(run(spectrum, { addedFeatures: [{ kind: 'dip', wavelengthNm: 554.01, fwhmNm: 0.05 }] }), 554, 0.05)!;
    expect(found.flags).toContain('by_hand');
    expect(Math.abs(found.wavelengthNm - 554)).toBeLessThan(4 * found.wavelengthSigmaNm);
    expect(Math.abs(found.depth - 0.012)).toBeLessThan(4 * found.depthSigma);
  });

  it('are left out with a word where the data show nothing of the kind, or do not reach', () => {
    const result = run(simulated([DIP, hidden]), {
      addedFeatures: [
        { kind: 'peak', wavelengthNm: 554, fwhmNm: 0.05 },
        { kind: 'dip', wavelengthNm: 700, fwhmNm: null },
      ],
    });
    expect(result.features.filter((f) => f.kind === 'peak')).toEqual([]);
    expect(result.cautions).toEqual(expect.arrayContaining([expect.stringContaining('show no peak'), expect.stringContaining('outside')]));
  });

  it('are two where one was split, with the light of both', () => {
    const blend = simulated([
      { nm: 551 - 0.013, depth: 0.3, fwhmNm: 0.04 },
      { nm: 551 + 0.013, depth: 0.3, fwhmNm: 0.04 },
    ]);
    const joined = run(blend);
    expect(joined.features).toHaveLength(1);
    const parted = run(blend, { splitFeatures: [{ kind: 'dip', wavelengthNm: joined.features[0]!.wavelengthNm }] }).features;
    expect(parted).toHaveLength(2);
    expect(parted.every((f) => f.flags.includes('by_hand'))).toBe(true);
    const total = parted.reduce((sum, f) => sum + f.equivalentWidthNm, 0);
    expect(total / joined.features[0]!.equivalentWidthNm).toBeCloseTo(1, 1);
  });

  it('are gone when taken out, and a place with none is named', () => {
    const result = run(simulated(), {
      removedFeatures: [
        { kind: 'dip', wavelengthNm: 551 },
        { kind: 'dip', wavelengthNm: 549 },
      ],
    });
    expect(near(result, 551, 0.1)).toBeUndefined();
    expect(result.cautions).toContain('There is no dip at 549.000 nm to take out.');
  });
});

describe('velocity systems', () => {
  const [cloud] = systemsOf(plain, 'interstellar');

  it('that are set stand where they were put, even with no line there', () => {
    const set = { family: 'interstellar', velocityKmPerS: 155, toleranceKmPerS: 0.5 } as const;
    const forced = systemsOf(run(SODIUM, { setSystems: [set] }), 'interstellar').find((s) => s.set)!;
    expect(forced).toMatchObject({ velocityKmPerS: 155, members: 0 });
    expect(forced.velocitySigmaKmPerS).toBeGreaterThanOrEqual(0.5);
  });

  it('that are set where the lines are find their lines, and nothing else takes the place', () => {
    const set = { family: 'interstellar', velocityKmPerS: Math.round(cloud!.velocityKmPerS), toleranceKmPerS: 3 } as const;
    const result = run(SODIUM, { setSystems: [set] });
    const mine = systemsOf(result, 'interstellar').find((s) => s.set)!;
    expect(Math.abs(mine.velocityKmPerS - cloud!.velocityKmPerS)).toBeLessThan(0.5);
    expect(mine.members).toBeGreaterThanOrEqual(2);
    const rivals = systemsOf(result, 'interstellar').filter((s) => !s.set && Math.abs(s.velocityKmPerS - mine.velocityKmPerS) < 2);
    expect(rivals).toEqual([]);
  });

  it('that are forbidden are not found, while other families are', () => {
    const all = run(SODIUM, { forbiddenSystems: [{ family: 'interstellar', fromKmPerS: -3000, toKmPerS: 3000 }] });
    expect(systemsOf(plain, 'interstellar').length).toBeGreaterThan(0);
    expect(systemsOf(all, 'interstellar')).toEqual([]);
    expect(systemsOf(all, 'telluric')).toHaveLength(1);
    const v = cloud!.velocityKmPerS;
    const some = run(SODIUM, { forbiddenSystems: [{ family: 'interstellar', fromKmPerS: v - 2, toKmPerS: v + 2 }] });
    expect(systemsOf(some, 'interstellar').filter((s) => Math.abs(s.velocityKmPerS - v) < 2)).toEqual([]);
  });

  it.each(['stellar', 'nebular', 'telluric'] as const)('of the family %s can be set without any line', (family) => {
    const result = run(SODIUM, { setSystems: [{ family, velocityKmPerS: -210, toleranceKmPerS: 1 }] });
    expect(systemsOf(result, family).find((s) => s.set)).toMatchObject({ velocityKmPerS: -210 });
  });
});

describe('species', () => {
  const species = ({ features }: Analysis) => new Set(features.flatMap((f) => f.candidates.map((c) => c.species)));

  it('that are left out name no feature; those alone wanted name all', () => {
    expect([...species(plain)]).toEqual(expect.arrayContaining(['Na I', 'H2O']));
    expect(species(run(SODIUM, { withoutSpecies: ['H2O'] })).has('H2O')).toBe(false);
    expect([...species(run(SODIUM, { onlySpecies: ['Na I'] }))]).toEqual(['Na I']);
  });

  it('that the list does not have are told', () => {
    expect(run(SODIUM, { onlySpecies: ['Na I', 'Xy II'] }).cautions.join()).toContain('no line of Xy II');
  });
});

describe('temperature and dust', () => {
  it('set for the continuum too give a Planck curve of that temperature, and say who set it', () => {
    const { continuum } = run(simulated(), { temperatureK: 9000, temperatureUse: 'strengths_and_continuum' });
    expect(continuum).toMatchObject({ model: 'planck', temperatureK: 9000, temperatureSigmaK: null, constrained: false });
    expect(continuum.statement).toContain('set to 9000 K by a person');
  });

  it('set for strengths only leave the continuum alone', () => {
    expect(run(SODIUM, { temperatureK: 9000 }).continuum).toEqual(plain.continuum);
  });

  it('follow the law and the R_V that were chosen', () => {
    const dusty = noisySpectrum({ ...recipe, fromNm: 400, toNm: 800, resolvingPower: 2000, av: 1, lines: [] }).spectrum;
    const temperature = (settings: Partial<AnalysisSettings>) => run(dusty, { extinctionAv: 1, ...settings }).continuum.temperatureK!;
    const usual = temperature({});
    expect(usual / recipe.temperatureK).toBeCloseTo(1, 1);
    expect(Math.abs(temperature({ extinctionRv: 5 }) - usual)).toBeGreaterThan(20);
    expect(Math.abs(temperature({ extinctionLaw: 'fitzpatrick99' }) - usual)).toBeGreaterThan(2);
  });
});

test('the same settings give the same result, to the last digit', () => {
  const settings: Partial<AnalysisSettings> = {
    maskedRegions: [{ fromNm: 590, toNm: 591 }],
    setSystems: [{ family: 'interstellar', velocityKmPerS: 12, toleranceKmPerS: 1 }],
    addedFeatures: [{ kind: 'dip', wavelengthNm: 594, fwhmNm: null }],
    splitFeatures: [{ kind: 'dip', wavelengthNm: plain.features[0]!.wavelengthNm }],
  };
  expect(JSON.stringify(run(SODIUM, settings))).toBe(JSON.stringify(run(SODIUM, settings)));
});
