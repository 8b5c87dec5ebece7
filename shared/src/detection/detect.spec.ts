import { chance, noisySpectrum, type Recipe, type RecipeLine } from '../../../test/support/noisy-spectrum.js';
import { measure } from '../identify/measure.js';
import { equivalentWidth, type Component, type NormalisedSamples } from '../profiles/index.js';
import { detect } from './detect.js';

// Spectra come from a generator of its own (sums of exponentials, Box-Muller noise), divided by the continuum that it knows.

const RECIPE: Recipe = { fromNm: 500, toNm: 530, resolvingPower: 20_000, temperatureK: 6000, signalToNoise: 150, seed: 17 };

function normalised(recipe: Partial<Recipe>): NormalisedSamples {
  const { spectrum, continuum } = noisySpectrum({ ...RECIPE, ...recipe });
  return {
    wavelength: spectrum.wavelength,
    flux: spectrum.flux.map((f, i) => f / continuum[i]!),
    weight: spectrum.sigma!.map((s, i) => (continuum[i]! / s) ** 2),
  };
}

function found(data: NormalisedSamples, options: Partial<Parameters<typeof detect>[0]> = {}) {
  const input = { data, resolvingPower: RECIPE.resolvingPower, correlation: [1], falseFeatures: 0.5, continuumSigma: 2e-4, ...options };
  const { model, threshold } = detect(input);
  const measured = model.components.map((c) => measure(c, data, model.overlapping([c]), input.resolvingPower, input.continuumSigma));
  return { components: model.components, measured, threshold };
}

const element = (nm: number) => nm / RECIPE.resolvingPower;
/** Significance of a Gaussian line against white noise: depth S/N sqrt(0.753 FWHM / pixel). */
const significance = ({ depth, fwhmNm, nm }: RecipeLine) =>
  Math.abs(depth) * RECIPE.signalToNoise * Math.sqrt((0.753 * fwhmNm) / (element(nm) / 2.5));
const widthOf = ({ depth, fwhmNm }: RecipeLine) => depth * fwhmNm * 1.06447;
const nearest = (components: readonly Component[], nm: number) =>
  components.reduce((best, c) => (Math.abs(c.centre - nm) < Math.abs(best.centre - nm) ? c : best));

/** Dips and peaks at least 0.5 nm apart, faint ones too. */
function apart(seed: number): RecipeLine[] {
  const { uniform } = chance(seed);
  return Array.from({ length: 48 }, (_, i) => {
    const nm = 501 + 0.58 * i + 0.06 * uniform();
    const peak = i % 6 === 5;
    return { nm, depth: (peak ? -1 : 0.8) * (0.03 + 0.97 * uniform() ** 2), fwhmNm: element(nm) * (1.05 + 1.5 * uniform()) };
  });
}

describe('lines that stand apart', () => {
  const lines = apart(4);
  const clear = lines.filter((l) => significance(l) > 8);
  const { components, measured } = found(normalised({ lines }));

  it('are found above 8 sigma, each once, and hardly anything else', () => {
    expect(clear.length).toBeGreaterThan(35);
    for (const line of clear) {
      const here = components.filter(
        (c) => Math.abs(c.centre - line.nm) < 0.5 * line.fwhmNm && c.kind === (line.depth > 0 ? 'dip' : 'peak'),
      );
      expect(here).toHaveLength(1);
    }
    const strange = components.filter((c) => lines.every((l) => Math.abs(c.centre - l.nm) > 0.5 * l.fwhmNm));
    expect(strange.length).toBeLessThanOrEqual(1);
  });

  it('have their places, widths and equivalent widths, within their errors', () => {
    const pulls = { place: [] as number[], width: [] as number[], strength: [] as number[] };
    for (const line of clear) {
      const c = nearest(components, line.nm);
      pulls.place.push((c.centre - line.nm) / c.sigmaCentre);
      pulls.width.push(Math.log(c.fwhm / line.fwhmNm) / c.sigmaLogFwhm);
      pulls.strength.push((equivalentWidth(c).value - widthOf(line)) / equivalentWidth(c).sigma);
    }
    for (const list of Object.values(pulls)) {
      const rms = Math.sqrt(list.reduce((sum, p) => sum + p * p, 0) / list.length);
      expect(rms).toBeGreaterThan(0.7); // some forty values know their spread to 11 %
      expect(rms).toBeLessThan(1.4);
      expect(Math.max(...list.map(Math.abs))).toBeLessThan(4.5);
    }
  });

  it('have direct sums that agree with the fit', () => {
    for (const m of measured) {
      const alone = m.flags.includes('blend') ? 0 : 1;
      if (alone) expect(Math.abs(m.directNm - m.equivalentWidthNm) / m.directSigmaNm).toBeLessThan(4.5);
    }
  });

  it('are the same lines on a grid twice as fine', () => {
    const fine = found(normalised({ lines, samplesPerElement: 5, seed: 99 })).components;
    for (const line of clear) {
      const [a, b] = [nearest(components, line.nm), nearest(fine, line.nm)];
      expect(Math.abs(a.centre - b.centre)).toBeLessThan(4.5 * Math.hypot(a.sigmaCentre, b.sigmaCentre));
      const [wa, wb] = [equivalentWidth(a), equivalentWidth(b)];
      expect(Math.abs(wa.value - wb.value)).toBeLessThan(4.5 * Math.hypot(wa.sigma, wb.sigma));
    }
    expect(Math.abs(fine.length - components.length)).toBeLessThanOrEqual(3); // of those near the threshold, noise decides
  });

  it('are the same lines on a grid of uneven steps, as joined or rounded wavelengths make them', () => {
    const { wavelength, flux, weight } = normalised({ lines, samplesPerElement: 5, seed: 99 });
    const groups: [number, number][] = []; // of five samples two, two and one are joined
    for (let i = 0; i + 5 <= flux.length; i += 5) groups.push([i, i + 2], [i + 2, i + 4], [i + 4, i + 5]);
    const mean = (x: Float64Array, [a, z]: [number, number]) => x.subarray(a, z).reduce((sum, v) => sum + v, 0) / (z - a);
    const uneven = found({
      wavelength: Float64Array.from(groups, (g) => mean(wavelength, g)),
      flux: Float64Array.from(groups, (g) => mean(flux, g)),
      weight: Float64Array.from(groups, (g) => (g[1] - g[0]) * mean(weight, g)),
    }).components;
    for (const line of clear) {
      const [a, b] = [nearest(components, line.nm), nearest(uneven, line.nm)];
      expect(Math.abs(a.centre - b.centre)).toBeLessThan(4.5 * Math.hypot(a.sigmaCentre, b.sigmaCentre));
    }
    expect(Math.abs(uneven.length - components.length)).toBeLessThanOrEqual(4);
  });

  it('are found the same way twice, to the last bit', () => expect(found(normalised({ lines })).components).toEqual(components));
});

describe('featureless spectra', () => {
  it.each([1, 2, 3, 4])('show nothing, noise %d', (seed) => expect(found(normalised({ seed })).components).toEqual([]));

  it('show nothing behind a continuum that is off by its stated error', () => {
    const data = normalised({ seed: 5 });
    const slow = data.flux.map((f, i) => f * (1 + 0.002 * Math.sin((6 * i) / data.flux.length)));
    expect(found({ ...data, flux: slow }, { continuumSigma: 0.002 }).components).toEqual([]);
  });
});

describe('masked samples', () => {
  const lines = apart(4);
  const whole = normalised({ lines });
  const holes = [5.1, 11.3, 17.2, 23.7].map((x) => Math.floor((whole.flux.length * x) / 30));
  const masked = { ...whole, flux: whole.flux.slice(), weight: whole.weight.slice() };
  for (const at of holes) for (let i = at; i < at + 60; i++) [masked.flux[i], masked.weight[i]] = [i % 2 ? -1e9 : 1e9, 0];
  const inHole = (nm: number) => holes.some((at) => nm > whole.wavelength[at - 5]! && nm < whole.wavelength[at + 65]!);

  it('make no features, whatever they hold', () => {
    const { components } = found(masked);
    expect(components.filter((c) => inHole(c.centre) && lines.every((l) => Math.abs(c.centre - l.nm) > l.fwhmNm))).toEqual([]);
    expect(components.every((c) => Number.isFinite(c.centre + c.amplitude + c.fwhm))).toBe(true);
  });

  it('leave the lines elsewhere as they were', () => {
    const [before, after] = [found(whole).components, found(masked).components];
    for (const line of lines.filter((l) => significance(l) > 8 && !inHole(l.nm)))
      expect(Math.abs(nearest(after, line.nm).centre - nearest(before, line.nm).centre)).toBeLessThan(0.1 * line.fwhmNm);
  });

  it('are all there is: nothing is found', () => {
    const none = { ...whole, weight: new Float64Array(whole.weight.length) };
    expect(found(none).components).toEqual([]);
  });
});

describe('correlated noise', () => {
  /** White noise averaged over three samples, as resampling makes it: autocorrelation 1, 2/3, 1/3. */
  function smooth(seed: number): NormalisedSamples {
    const data = normalised({ seed });
    const flux = data.flux.map((_, i) => {
      const at = (k: number) => data.flux[Math.min(data.flux.length - 1, Math.max(0, i + k))]! - 1;
      return 1 + (at(-1) + at(0) + at(1)) / Math.sqrt(3);
    });
    return { ...data, flux };
  }
  const count = (correlation: number[]) =>
    [1, 2, 3, 4, 5, 6].reduce((sum, seed) => sum + found(smooth(seed), { correlation, falseFeatures: 1 }).components.length, 0);

  it('makes no more false features than asked for when it is known, and many when it is not', () => {
    expect(count([1, 2 / 3, 1 / 3])).toBeLessThanOrEqual(6);
    expect(count([1])).toBeGreaterThan(20);
  });
});

describe('blends', () => {
  /** Features found where two equal lines stand some of their FWHM apart. */
  const pieces = (separation: number, seed = RECIPE.seed) => {
    const fwhmNm = 1.5 * element(515);
    const lines = [-0.5, 0.5].map((side) => ({ nm: 515 + side * separation * fwhmNm, depth: 0.5, fwhmNm }));
    return found(normalised({ lines, seed })).components;
  };

  it.each([0.2, 0.4])('of lines %d FWHM apart are one feature', (separation) => expect(pieces(separation)).toHaveLength(1));

  it.each([
    [0.9, 17],
    [1, 17],
    [1.1, 17],
    [1.4, 17],
    [1.4, 18],
    [2, 17],
    [2.5, 18],
  ])('of lines %d FWHM apart are two, at their places, in noise %d', (separation, seed) => {
    const components = pieces(separation, seed);
    expect(components).toHaveLength(2);
    components.forEach((c, i) =>
      expect(Math.abs(c.centre - (515 + (i - 0.5) * separation * 1.5 * element(515)))).toBeLessThan(5 * c.sigmaCentre),
    );
  });

  it('are flagged where lines overlap, and not where they stand apart', () => {
    const fwhmNm = 1.5 * element(515);
    const lines = [514, 520, 520 + 1.1 * fwhmNm].map((nm) => ({ nm, depth: 0.5, fwhmNm }));
    expect(found(normalised({ lines })).measured.map(({ flags }) => flags.includes('blend'))).toEqual([false, true, true]);
  });

  it('of a narrow line on a broad one keep both', () => {
    const lines = [
      { nm: 515, depth: 0.3, fwhmNm: 0.5 },
      { nm: 515.1, depth: 0.4, fwhmNm: 1.1 * element(515) },
    ];
    const { components } = found(normalised({ lines }));
    expect(components).toHaveLength(2);
    expect(nearest(components, 515.1).fwhm).toBeLessThan(0.06);
    expect(nearest(components, 515).fwhm).toBeGreaterThan(0.4);
  });
});

describe('flags', () => {
  const line = (facts: Partial<RecipeLine>): RecipeLine => ({ nm: 515, depth: 0.5, fwhmNm: 1.3 * element(515), ...facts });
  const flagsOf = (lines: RecipeLine[], spoil?: (data: NormalisedSamples) => void) => {
    const data = normalised({ lines });
    spoil?.(data);
    return found(data).measured.map(({ flags }) => flags);
  };

  it("mark a spike narrower than the instrument allows as cosmic, a line of the instrument's width not", () => {
    const data = normalised({ samplesPerElement: 6 });
    const hit = data.wavelength.findIndex((nm) => nm > 520);
    [0.5, 1.6, 1.5, 0.4].forEach((light, k) => (data.flux[hit + k]! += light));
    expect(found(data).measured.map(({ flags }) => flags)).toEqual([['cosmic']]);
    expect(flagsOf([line({ depth: -1.5, fwhmNm: 1.02 * element(515) })])).toEqual([[]]);
  });

  it('mark a spike of one sample too, faint or bright', () => {
    for (const light of [0.15, 1.5, 50]) {
      const lone = (data: NormalisedSamples) => (data.flux[data.wavelength.findIndex((nm) => nm > 520)]! += light);
      expect(flagsOf([], lone)).toEqual([['cosmic']]);
    }
  });

  it('mark a dip that goes to nothing as saturated', () => {
    expect(flagsOf([line({ depth: 0.98 })])).toEqual([['saturated']]);
    expect(flagsOf([line({ depth: 0.8 })])).toEqual([[]]);
  });

  it('mark a line that the spectrum ends in, or a mask cuts into, as edge', () => {
    expect(flagsOf([line({ nm: 500.01, fwhmNm: 2 * element(500) })])).toEqual([['edge']]);
    const cut = (data: NormalisedSamples) => data.wavelength.forEach((w, i) => w > 515.01 && w < 515.05 && (data.weight[i] = 0));
    expect(flagsOf([line({ fwhmNm: 2 * element(515) })], cut)).toEqual([['edge']]);
  });

  it('mark what is broader than 450 km/s as a band', () => expect(flagsOf([line({ depth: 0.2, fwhmNm: 1 })])).toEqual([['band']]));
});

describe('shapes', () => {
  // Gray, The Observation and Analysis of Stellar Photospheres, eq. 18.14 with linear limb darkening 0.6 (from memory), summed over strips
  const disc = Array.from({ length: 41 }, (_, i) => (i - 20) / 20.5).map((x) => ({
    x,
    weight: 0.8 * Math.sqrt(1 - x * x) + 0.3 * Math.PI * (1 - x * x),
  }));
  const total = disc.reduce((sum, { weight }) => sum + weight, 0);
  const rotating = (nm: number, depth: number, vsini: number): RecipeLine[] =>
    disc.map(({ x, weight }) => ({
      nm: nm * (1 + (x * vsini) / 299_792.458),
      depth: ((depth * weight) / total) * 8,
      fwhmNm: 1.3 * element(nm),
    }));

  it('of a rotating star are one feature a line, not shreds', () => {
    const places = [503, 507, 511.5, 516, 520.5, 525, 528];
    const lines = places.flatMap((nm, i) => rotating(nm, 0.06 + 0.02 * i, 80));
    const { components } = found(normalised({ lines, signalToNoise: 300 }));
    expect(components).toHaveLength(places.length);
    components.forEach((c, i) => {
      expect(Math.abs(c.centre - places[i]!)).toBeLessThan(0.02);
      expect(c.core.name).toBe('rotation');
    });
  });

  it('of a strong line with wings are one feature, and a line within them another', () => {
    // a saturated core with wings falling as the inverse square, drawn by hand
    const data = normalised({ lines: [{ nm: 515.6, depth: 0.3, fwhmNm: 1.2 * element(515) }], signalToNoise: 200 });
    const wings = data.flux.map((f, i) => f * Math.exp(-0.02 / (0.006 + (data.wavelength[i]! - 515) ** 2)));
    const { components } = found({ ...data, flux: wings });
    expect(components.length).toBeGreaterThanOrEqual(2);
    expect(components.length).toBeLessThanOrEqual(3);
    expect(nearest(components, 515).fwhm).toBeGreaterThan(0.2);
    expect(nearest(components, 515.6).fwhm).toBeLessThan(0.06);
  });
});

describe('what is asked for', () => {
  it('sets the threshold: fewer false features allowed, fewer features found', () => {
    const data = normalised({ lines: apart(8).map((l) => ({ ...l, depth: l.depth * 0.1 })) });
    const [strict, usual, generous] = [0.01, 0.5, 20].map((falseFeatures) => found(data, { falseFeatures }));
    expect(strict!.threshold).toBeGreaterThan(usual!.threshold);
    expect(usual!.threshold).toBeGreaterThan(generous!.threshold);
    expect(strict!.components.length).toBeLessThan(generous!.components.length);
    for (const { measured, threshold } of [strict!, usual!, generous!])
      for (const m of measured) expect(m.significance).toBeGreaterThan(0.9 * threshold);
  });
});
