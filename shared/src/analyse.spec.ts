import { defaultList, demoSlice } from '../../test/support/demo-slices.js';
import { numbersOf } from '../../test/support/numbers.js';
import { analyse } from './analyse.js';
import { ANALYSIS_STEPS, DEFAULT_SETTINGS, type Analysis, type AnalysisSettings, type AnalysisStep } from './identify/index.js';
import type { Spectrum } from './spectrum/index.js';
import { C_KM_PER_S } from './units/index.js';

// Stretches of the simulated spectra of the demonstration: a crowded cool star; gas and air around the sodium doublet; emission of a
// nebula; saturated lines in the ultraviolet.

const list = defaultList();
const run = (spectrum: Spectrum, settings: Partial<AnalysisSettings> = {}) => analyse(spectrum, list, { ...DEFAULT_SETTINGS, ...settings });

const STAR = demoSlice('avocet-3.fits.gz', 505, 518);
const SODIUM = demoSlice('tern-1.fits.gz', 586, 597);
const NEBULA = demoSlice('curlew-nebula.fits.gz', 482, 504);
const ULTRAVIOLET = demoSlice('plover-7-ultraviolet.fits.gz', 125, 131);
const star = run(STAR);
const sodium = run(SODIUM);
const nebula = run(NEBULA);
const ultraviolet = run(ULTRAVIOLET);
const all: readonly [string, Analysis][] = [
  ['a cool star', star],
  ['sodium', sodium],
  ['a nebula', nebula],
  ['the ultraviolet', ultraviolet],
];
const first = ({ features }: Analysis) => features.map(({ candidates: [c] }) => (c && c.probability > 0.8 ? c.lineId : null));

describe.each(all)('the analysis of %s', (_, analysis) => {
  const candidates = analysis.features.flatMap((feature) => feature.candidates.map((candidate) => ({ feature, candidate })));

  it('finds features and reads some of them', () => {
    expect(analysis.features.length).toBeGreaterThan(3);
    expect(first(analysis).filter(Boolean).length).toBeGreaterThan(3);
    expect(analysis.systems.length).toBeGreaterThan(0);
  });

  it('gives every candidate five parts of evidence whose log odds add to ln(p / (1 - p))', () => {
    for (const { candidate } of candidates) {
      expect(candidate.evidence.map(({ part }) => part)).toEqual(['position', 'strength', 'companions', 'width', 'chance']);
      const p = Math.min(Math.max(candidate.probability, 1e-6), 1 - 1e-6); // certainty is kept finite
      const sum = candidate.evidence.reduce((total, { logOdds }) => total + logOdds, 0);
      expect(sum).toBeCloseTo(Math.log(p / (1 - p)), 9);
      expect(candidate.evidence.every(({ sentence }) => sentence.length > 10)).toBe(true);
    }
  });

  it('gives probabilities between 0 and 1, best first; what one line has, "not in the list" has not', () => {
    for (const { candidates: readings, unidentifiedProbability } of analysis.features) {
      expect(unidentifiedProbability).toBeGreaterThanOrEqual(0);
      expect(unidentifiedProbability).toBeLessThanOrEqual(1);
      readings.forEach((c, i) => {
        expect(c.probability).toBeGreaterThanOrEqual(0);
        expect(c.probability + unidentifiedProbability).toBeLessThanOrEqual(1 + 1e-12);
        expect(c.share).toBeGreaterThanOrEqual(0);
        expect(c.share).toBeLessThanOrEqual(1 + 1e-12);
        if (i > 0) expect(c.probability).toBeLessThanOrEqual(readings[i - 1]!.probability);
      });
      // a line takes 30 % of a feature: three at most can
      expect(readings.reduce((sum, { probability }) => sum + probability, 0)).toBeLessThanOrEqual(3 + 1e-9);
    }
  });

  it('reads dips as absorption and peaks as emission', () => {
    for (const { kind, equivalentWidthNm, depth, candidates: readings } of analysis.features) {
      expect(Math.sign(equivalentWidthNm)).toBe(kind === 'dip' ? 1 : -1);
      expect(Math.sign(depth)).toBe(kind === 'dip' ? 1 : -1);
      const families = kind === 'dip' ? ['stellar', 'interstellar', 'telluric'] : ['nebular', 'telluric'];
      expect(readings.filter(({ family }) => !families.includes(family))).toEqual([]);
    }
  });

  it('names lines of the list and systems of the result, at the velocity between the two', () => {
    const ids = new Map(list.lines.map((line) => [line.id, line]));
    for (const { feature, candidate } of candidates) {
      const line = ids.get(candidate.lineId)!;
      expect([line.species, line.wavelengthNm]).toEqual([candidate.species, candidate.restNm]);
      const q = (feature.wavelengthNm / candidate.restNm) ** 2;
      expect(candidate.velocityKmPerS).toBeCloseTo((C_KM_PER_S * (q - 1)) / (q + 1), 6);
    }
    const named = new Set(
      analysis.features.flatMap(({ candidates: [c], unidentifiedProbability }) =>
        c && c.probability > unidentifiedProbability ? [c.systemId] : [],
      ),
    );
    const known = new Set(analysis.systems.map(({ id }) => id));
    expect([...named].filter((id) => !known.has(id))).toEqual([]);
  });

  it('counts its members, and puts features in order', () => {
    for (const { id, members } of analysis.systems) {
      const mine = analysis.features.filter(
        ({ candidates: [c], unidentifiedProbability: u }) => c && c.systemId === id && c.probability > u,
      );
      expect(members).toBe(mine.length);
    }
    analysis.features.forEach(({ index, wavelengthNm }, i) => {
      expect(index).toBe(i);
      if (i > 0) expect(wavelengthNm).toBeGreaterThanOrEqual(analysis.features[i - 1]!.wavelengthNm);
    });
  });

  it('holds no number that JSON cannot, and errors that are positive', () => {
    expect(numbersOf(analysis).filter(([, value]) => !Number.isFinite(value))).toEqual([]);
    for (const f of analysis.features)
      expect(Math.min(f.wavelengthSigmaNm, f.equivalentWidthSigmaNm, f.fwhmSigmaNm, f.depthSigma)).toBeGreaterThan(0);
  });
});

describe('what must not change the reading', () => {
  const shifted = (spectrum: Spectrum, kmPerS: number): Spectrum => {
    const factor = Math.sqrt((1 + kmPerS / C_KM_PER_S) / (1 - kmPerS / C_KM_PER_S));
    return { ...spectrum, wavelength: spectrum.wavelength.map((nm) => nm * factor) };
  };

  it.each<[string, Spectrum, Analysis]>([
    ['star', STAR, star],
    ['nebula', NEBULA, nebula],
    ['clouds', ULTRAVIOLET, ultraviolet],
  ])('a velocity given to the whole spectrum: systems of the %s move with it, readings stay', (_, spectrum, before) => {
    const after = run(shifted(spectrum, 31));
    expect(after.systems.map(({ family }) => family)).toEqual(before.systems.map(({ family }) => family));
    after.systems.forEach(({ velocityKmPerS, velocitySigmaKmPerS }, i) => {
      const moved = velocityKmPerS - before.systems[i]!.velocityKmPerS;
      expect(Math.abs(moved - 31)).toBeLessThan(Math.max(0.3, 0.5 * velocitySigmaKmPerS)); // grids of velocities are not moved along
    });
    expect(after.features).toHaveLength(before.features.length);
    const [a, b] = [first(before), first(after)];
    const differ = a.filter((id, i) => id && b[i] && id !== b[i]);
    expect(differ).toEqual([]);
    expect(a.filter((id, i) => (id === null) !== (b[i] === null)).length).toBeLessThanOrEqual(1 + 0.05 * a.length); // about 0.8 of a probability
  });

  it.each([2 ** -40, 3.7e-15, 2.9e8])('the unit of the flux: a factor of %d changes the last digits at most', (factor) => {
    const scaled = run({ ...STAR, flux: STAR.flux.map((f) => f * factor), sigma: STAR.sigma!.map((s) => s * factor) });
    const readings = ({ features }: Analysis) => features.map(({ candidates }) => candidates.map(({ lineId }) => lineId));
    expect(readings(scaled)).toEqual(readings(star));
    scaled.features.forEach((f, i) => expect(f.equivalentWidthNm / star.features[i]!.equivalentWidthNm).toBeCloseTo(1, 6));
    expect(scaled.continuum.sampleFlux[0]! / star.continuum.sampleFlux[0]! / factor).toBeCloseTo(1, 6);
    expect(scaled.cautions).toEqual(star.cautions);
  });

  it('what was analysed before: the same input gives the same bytes', () => {
    for (const [spectrum, before] of [
      [STAR, star],
      [NEBULA, nebula],
    ] as const)
      expect(JSON.stringify(run(spectrum))).toBe(JSON.stringify(before));
  });

  it('the input, which is left as it was', () => {
    const frozen = {
      wavelength: NEBULA.wavelength.slice(),
      flux: NEBULA.flux.slice(),
      sigma: NEBULA.sigma!.slice(),
      bad: NEBULA.bad.slice(),
    };
    const kept = { ...NEBULA, ...frozen };
    run(kept);
    for (const key of ['wavelength', 'flux', 'sigma', 'bad'] as const) expect(kept[key]).toEqual(NEBULA[key]);
  });

  it('samples that must not be used, whatever they hold', () => {
    const bad = NEBULA.bad.slice();
    const flux = NEBULA.flux.slice();
    const from = NEBULA.wavelength.findIndex((nm) => nm > 490);
    for (let i = from; i < from + 200; i++) [bad[i], flux[i]] = [1, i % 3 ? NaN : 1e20];
    const masked = run({ ...NEBULA, bad, flux });
    expect(masked.features.filter(({ wavelengthNm: nm }) => nm > NEBULA.wavelength[from]! && nm < NEBULA.wavelength[from + 199]!)).toEqual(
      [],
    );
    expect(first(masked)).toEqual(expect.arrayContaining(first(nebula).filter(Boolean)));
  });
});

describe('progress', () => {
  it('tells every step once, in order, with a part done that grows', () => {
    const told: [AnalysisStep, number][] = [];
    analyse(NEBULA, list, DEFAULT_SETTINGS, (step, done) => told.push([step, done]));
    expect(told.map(([step]) => step)).toEqual([...ANALYSIS_STEPS]);
    told.forEach(([, done], i) => expect(done).toBeGreaterThanOrEqual(i ? told[i - 1]![1] : 0));
    expect(told.at(-1)![1]).toBeLessThan(1);
  });

  it.each([...ANALYSIS_STEPS])('stops at once when it is told to at %s, and the next run is none the worse', (last) => {
    const told: AnalysisStep[] = [];
    const stop = new Error('cancelled');
    const cancelled = () =>
      analyse(NEBULA, list, DEFAULT_SETTINGS, (step) => {
        told.push(step);
        if (step === last) throw stop;
      });
    expect(cancelled).toThrow(stop);
    expect(told.at(-1)).toBe(last);
    expect(told).toHaveLength(ANALYSIS_STEPS.indexOf(last) + 1);
  });

  it('after all that, gives the same bytes', () => expect(JSON.stringify(run(NEBULA))).toBe(JSON.stringify(nebula)));
});

describe('cautions', () => {
  it('name what the file does not say', () => {
    const { cautions } = run({ ...NEBULA, frame: 'unknown', resolvingPower: null, sigma: null });
    expect(cautions).toEqual(
      expect.arrayContaining([
        expect.stringContaining('velocity frame is unknown'),
        expect.stringContaining('resolving power is not stated'),
        expect.stringContaining('gives no errors'),
      ]),
    );
    expect(nebula.cautions.join()).not.toMatch(/frame is unknown|not stated|no errors/);
  });

  it('name errors that do not agree with the scatter', () => {
    const { cautions, noiseHow } = run({ ...NEBULA, sigma: NEBULA.sigma!.map((s) => s / 4) });
    expect(noiseHow).toBe('stated_rescaled');
    expect(cautions).toContainEqual(expect.stringContaining('do not agree with the scatter'));
  });

  it('name air that takes part in the sodium doublet', () => expect(sodium.cautions).toContainEqual(expect.stringMatching(/air.*Na I D/)));
  it('name saturated lines', () => expect(ultraviolet.cautions).toContainEqual(expect.stringMatching(/saturated/)));
  it('say when the temperature is not constrained, and no temperature is taken from it', () => {
    expect(star.continuum.constrained).toBe(false);
    expect(star.cautions).toContain(star.continuum.statement);
  });
  it('are complete sentences', () => {
    for (const [, { cautions }] of all) for (const c of cautions) expect(c).toMatch(/^[A-Z0-9].*[.]$/s);
  });
});

describe('settings', () => {
  it('are stored with the result, as is what made it', () => {
    const settings = { ...DEFAULT_SETTINGS, falseFeatures: 3 };
    const analysis = run(NEBULA, settings);
    expect(analysis.settings).toEqual(settings);
    expect([analysis.lineListName, analysis.lineListVersion]).toEqual([list.name, list.version]);
    expect(analysis.features.length).toBeGreaterThanOrEqual(nebula.features.length);
  });

  it('bound the velocities that are looked for', () => {
    expect(nebula.systems[0]!.velocityKmPerS).toBeCloseTo(108.4, 0);
    expect(run(NEBULA, { velocityRangeKmPerS: 50 }).systems.filter(({ family }) => family === 'nebular')).toEqual([]);
  });
});

describe('an empty line list', () => {
  it('leaves every feature without a name', () => {
    const { features, systems } = analyse(NEBULA, { ...list, lines: [] }, DEFAULT_SETTINGS);
    expect(features).toHaveLength(nebula.features.length);
    expect(features.every(({ candidates }) => candidates.length === 0)).toBe(true);
    expect(systems).toEqual([]);
  });
});
