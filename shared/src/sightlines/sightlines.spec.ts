import { analyse } from '../analyse.js';
import { compareSightlines } from '../compare-sightlines.js';
import { centralDepth } from '../atoms/index.js';
import { DEFAULT_SETTINGS, type Analysis } from '../identify/index.js';
import type { Spectrum } from '../spectrum/index.js';
import { C_KM_PER_S, dopplerFactor, type KmPerS } from '../units/index.js';
import { lineOf } from '../../../test/support/lines.js';
import { DEFAULT_COMPARISON_SETTINGS } from './comparison.js';
import { imprintAt, imprintOf } from './imprint.js';
import { judge, velocityLogOdds } from './judge.js';

/** Gas lines of the tests: two doublets, atomic data as in the default list (NIST). */
const GAS = [
  { species: 'Na I', wavelengthNm: 589.158325, oscillatorStrength: 0.641, einsteinA: 6.16e7 },
  { species: 'Na I', wavelengthNm: 589.755815, oscillatorStrength: 0.32, einsteinA: 6.14e7 },
  { species: 'K I', wavelengthNm: 583.0, oscillatorStrength: 0.333, einsteinA: 3.75e7 },
].map((l) => lineOf({ ...l, settings: ['interstellar'], lowerEnergyPerCm: 0 }));
/** Lines of the stars. */
const STAR = [580.5, 581.7, 584.2, 585.9, 587.1].map((nm, i) =>
  lineOf({ species: 'Fe I', wavelengthNm: nm, logGf: -0.5 - 0.1 * i, lowerEnergyPerCm: 8000, settings: ['stellar'] }),
);
const LIST = { name: 'test', version: '1', lines: [...GAS, ...STAR].sort((a, b) => a.wavelengthNm - b.wavelengthNm) };

interface Made {
  readonly resolvingPower: number;
  readonly noise: number;
  readonly starKmPerS: number;
  /** log10 columns of Na I, K I by velocity; b = 2 km/s */
  readonly clouds: readonly { v: number; sodium: number; potassium: number }[];
  readonly seed: number;
}

/** A star behind clouds: the clouds' optical depth and the star's lines, blurred by the instrument, with noise of a fixed seed. */
function spectrumOf({ resolvingPower, noise, starKmPerS, clouds, seed }: Made): Spectrum {
  const n = 14_000;
  const wavelength = Float64Array.from({ length: n }, (_, i) => 579 * (592 / 579) ** (i / (n - 1)));
  const element = C_KM_PER_S / resolvingPower;
  const flux = new Float64Array(n).fill(1);
  const dip = (nm: number, v: number, shape: (u: number) => number, reach: number) => {
    const centre = nm * dopplerFactor(v as KmPerS);
    for (let i = 0; i < n; i++) {
      const u = (wavelength[i]! / centre - 1) * C_KM_PER_S;
      if (Math.abs(u) < reach) flux[i]! *= 1 - shape(u);
    }
  };
  for (const { v, sodium, potassium } of clouds)
    for (const l of GAS) {
      const tau = centralDepth(10 ** (l.species === 'Na I' ? sodium : potassium), l.oscillatorStrength!, l.wavelengthNm, 2);
      const imprint = imprintOf(tau, 2, element);
      let area = 0; // equivalent width in km/s of the unblurred line
      for (let u = -20; u <= 20; u += 0.02) area += 0.02 * -Math.expm1(-tau * Math.exp(-((u / 2) ** 2)));
      dip(l.wavelengthNm, v, (u) => area * imprintAt(imprint, u), 60);
    }
  for (const l of STAR) dip(l.wavelengthNm, starKmPerS, (u) => 0.35 * Math.exp(-4 * Math.LN2 * (u / 24) ** 2), 90);
  let state = seed;
  const chance = () => (state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0) / 2 ** 32;
  for (let i = 0; i < n; i++) flux[i]! += noise * Math.sqrt(12 / 4) * (chance() + chance() + chance() + chance() - 2);
  return {
    wavelength,
    flux,
    sigma: new Float64Array(n).fill(noise),
    bad: new Uint8Array(n),
    fluxKind: 'normalised',
    resolvingPower,
    frame: 'barycentric',
  };
}

const sightline = (made: Made) => {
  const spectrum = spectrumOf(made);
  const analysis: Analysis = analyse(spectrum, LIST, DEFAULT_SETTINGS);
  return { spectrum, analysis };
};
const SHARED = { v: -12, sodium: 11.6, potassium: 11.2 };
const A = sightline({
  resolvingPower: 60_000,
  noise: 0.005,
  starKmPerS: 40,
  seed: 1,
  clouds: [SHARED, { v: 15, sodium: 11.5, potassium: 11 }],
});
const B = sightline({
  resolvingPower: 40_000,
  noise: 0.008,
  starKmPerS: -35,
  seed: 2,
  clouds: [SHARED, { v: -45, sodium: 11.7, potassium: 11.2 }],
});
const compared = compareSightlines(A, B, LIST, DEFAULT_COMPARISON_SETTINGS);
const gasNear = (v: number) => compared.lines.filter((l) => l.family === 'interstellar' && Math.abs(l.velocityKmPerS - v) < 2);

describe('two stars behind one cloud, each with a cloud of its own', () => {
  it('share the one and nothing else', () => {
    expect(gasNear(-12).map(({ verdict }) => verdict)).toEqual(['shared', 'shared', 'shared']);
    expect(gasNear(15).map(({ verdict }) => verdict)).toEqual(['only-a', 'only-a', 'only-a']);
    expect(gasNear(-45).map(({ verdict }) => verdict)).toEqual(['only-b', 'only-b', 'only-b']);
    expect(compared.lines.filter((l) => l.verdict === 'shared')).toHaveLength(3);
  });

  it('have the cloud where it is, to its error, and the columns that were put in', () => {
    const cloud = compared.clouds.find((c) => c.verdict === 'shared')!;
    expect(Math.abs(cloud.velocityKmPerS + 12)).toBeLessThan(4 * cloud.velocitySigmaKmPerS);
    const sodium = cloud.columns.find((c) => c.species === 'Na I')!;
    for (const side of [sodium.a!, sodium.b!]) {
      expect(side.method).not.toBe('limit');
      expect(Math.abs(side.logN - 11.6)).toBeLessThan(0.1);
    }
    expect(Math.abs(sodium.difference!)).toBeLessThan(3 * sodium.differenceSigma!);
  });

  it('get a 2 sigma limit where a cloud is not seen, below what the other side shows', () => {
    const own = compared.clouds.find((c) => c.verdict === 'only-a')!.columns.find((c) => c.species === 'Na I')!;
    expect(own.b!.method).toBe('limit');
    expect(own.b!.logN).toBeLessThan(own.a!.logN - 0.5);
  });

  it('swap their verdicts when they change places', () => {
    const turned = compareSightlines(B, A, LIST, DEFAULT_COMPARISON_SETTINGS);
    const word = { shared: 'shared', 'only-a': 'only-b', 'only-b': 'only-a', telluric: 'telluric', 'cannot-tell': 'cannot-tell' } as const;
    const gas = (c: typeof compared) =>
      c.lines.filter((l) => l.family === 'interstellar').map((l) => [l.lineId, Math.round(l.velocityKmPerS), l.verdict]);
    expect(gas(turned)).toEqual(gas(compared).map(([id, v, verdict]) => [id, v, word[verdict as keyof typeof word]]));
  });

  it('give the same bytes again', () => {
    expect(JSON.stringify(compareSightlines(A, B, LIST, DEFAULT_COMPARISON_SETTINGS))).toBe(JSON.stringify(compared));
  });

  it('are told of an offset that a person sets: the clouds no longer meet', () => {
    const off = compareSightlines(A, B, LIST, { ...DEFAULT_COMPARISON_SETTINGS, offsetBKmPerS: 20 });
    expect(off.lines.some((l) => l.verdict === 'shared')).toBe(false);
  });
});

describe('a verdict', () => {
  it('is shared when both show the line, one-sided when the other would have shown it, open when it could not', () => {
    expect(judge({ width: 10, error: 0.5 }, { width: 9, error: 0.5 }, 0.5).verdict).toBe('shared');
    expect(judge({ width: 10, error: 0.5 }, { width: 0.1, error: 0.5 }, 0.5).verdict).toBe('only-a');
    expect(judge({ width: 0.1, error: 0.5 }, { width: 10, error: 0.5 }, 0.5).verdict).toBe('only-b');
    expect(judge({ width: 10, error: 0.5 }, { width: 2, error: 8 }, 0.5).verdict).toBe('cannot-tell');
    expect(judge({ width: 0.2, error: 0.5 }, { width: 0.1, error: 0.5 }, 0.5).verdict).toBe('cannot-tell');
  });

  it('has chances that add to one', () => {
    const { shared, a, b, neither } = judge({ width: 3, error: 1 }, { width: 1, error: 1 }, 0.4).posterior;
    expect(shared + a + b + neither).toBeCloseTo(1, 12);
  });

  it('takes velocities for one the nearer they are, and against it when they are many errors apart', () => {
    expect(velocityLogOdds(0.05, 0.1)).toBeGreaterThan(3);
    expect(velocityLogOdds(1.5, 0.1)).toBeLessThan(-3);
  });
});

it('gives an imprint of unit area whatever the saturation, and no narrower than the instrument', () => {
  for (const tau of [0.01, 1, 30, 1000]) {
    const imprint = imprintOf(tau, 2, 5);
    let area = 0;
    for (let v = -80; v <= 80; v += 0.01) area += 0.01 * imprintAt(imprint, v);
    expect(area).toBeCloseTo(1, 3);
    expect(imprint.fwhm).toBeGreaterThan(4.9);
  }
});
