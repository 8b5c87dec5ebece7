import fc from 'fast-check';
import { chance } from '../../../test/support/noisy-spectrum.js';
import type { NormalisedSamples } from '../profiles/index.js';
import { findExcesses, thresholdFor, type FilterOptions } from './scale-space.js';

const N = 600;
const STEP = 0.01;
const SIGMA_PX = 2.5;
const wavelength = Float64Array.from({ length: N }, (_, i) => 500 + i * STEP);

/** A residual of unit weight on which Gaussians of given amplitude (in sigma) and width stand. */
function residual(
  lines: readonly { at: number; amplitude: number; sigmaPx: number }[],
  base: (i: number) => number = () => 0,
): NormalisedSamples {
  const flux = wavelength.map((_, i) =>
    lines.reduce((sum, l) => sum + l.amplitude * Math.exp(-0.5 * ((i - l.at) / l.sigmaPx) ** 2), base(i)),
  );
  return { wavelength, flux, weight: new Float64Array(N).fill(1) };
}
const options = (more: Partial<FilterOptions> = {}): FilterOptions => ({
  instrumentSigmaPx: new Float64Array(N).fill(SIGMA_PX),
  widestNm: 1,
  zeroMean: false,
  threshold: 5,
  correlation: [1],
  ...more,
});

describe('matched filters', () => {
  it('find a line where it is, how high it is and how wide', () => {
    const lines = fc.record({
      at: fc.double({ min: 150, max: 450, noNaN: true }),
      amplitude: fc.double({ min: 5, max: 100, noNaN: true }),
      sigmaPx: fc.double({ min: SIGMA_PX, max: 12, noNaN: true }),
    });
    fc.assert(
      fc.property(lines, fc.boolean(), ({ at, amplitude, sigmaPx }, dip) => {
        const [best] = findExcesses(residual([{ at, amplitude: dip ? -amplitude : amplitude, sigmaPx }]), options());
        expect(best!.kind).toBe(dip ? 'dip' : 'peak');
        // bins are half a kernel wide: a parabola through three of them finds the place to a tenth of one
        expect(Math.abs(best!.centre - (500 + at * STEP))).toBeLessThan(0.3 * sigmaPx * STEP);
        expect(Math.abs(best!.amplitude / amplitude - 1)).toBeLessThan(0.25); // the ladder's rungs are 45 % apart
        expect(Math.abs(Math.log(best!.fwhm / (2.3548 * sigmaPx * STEP)))).toBeLessThan(0.3);
      }),
    );
  });

  it('give the significance of a matched filter, amplitude times the root of the sum of squares of the profile', () => {
    for (const sigmaPx of [SIGMA_PX, SIGMA_PX * 1.45, SIGMA_PX * 1.45 ** 3]) {
      const [best] = findExcesses(residual([{ at: 300, amplitude: -10, sigmaPx }]), options());
      const matched = 10 * Math.sqrt(sigmaPx * Math.sqrt(Math.PI));
      expect(best!.significance / matched).toBeGreaterThan(0.97); // bins and, between rungs, width
      expect(best!.significance / matched).toBeLessThan(1.005);
    }
  });

  it('of zero mean do not see a level, nor a slope away from the ends, where a kernel is cut', () => {
    const sloping = residual([], (i) => 0.01 * (i - N / 2));
    expect(
      findExcesses(
        residual([], () => -3),
        options({ zeroMean: true }),
      ),
    ).toEqual([]);
    const inside = findExcesses(sloping, options({ zeroMean: true })).filter((e) => Math.abs(e.centre - 503) < 3 - e.fwhm);
    expect(inside).toEqual([]);
    expect(
      findExcesses(
        residual([], () => -3),
        options(),
      ).length,
    ).toBeGreaterThan(0);
  });

  it('weigh samples: twice the sigma, half the significance', () => {
    const data = residual([{ at: 300, amplitude: -20, sigmaPx: 3 }]);
    const [one, half] = [1, 0.25].map((w) => findExcesses({ ...data, weight: data.weight.map(() => w) }, options())[0]!.significance);
    expect(half! / one!).toBeCloseTo(0.5, 9);
  });

  it('take no notice of samples of no weight', () => {
    const data = residual([{ at: 300, amplitude: -20, sigmaPx: 3 }]);
    for (let i = 100; i < 130; i++) [data.flux[i], data.weight[i]] = [i % 2 ? 1e12 : NaN, 0];
    const list = findExcesses(data, options());
    expect(list[0]!.kind).toBe('dip');
    expect(list.filter(({ centre }) => centre < 501.6)).toEqual([]);
    expect(findExcesses({ ...data, weight: new Float64Array(N) }, options())).toEqual([]);
  });

  it('come strongest first, beyond the threshold only', () => {
    const { normal } = chance(2);
    const data = residual([
      { at: 150, amplitude: 8, sigmaPx: 3 },
      { at: 400, amplitude: -12, sigmaPx: 5 },
    ]);
    data.flux.forEach((_, i) => (data.flux[i]! += normal()));
    const list = findExcesses(data, options({ threshold: 6 }));
    expect(list.length).toBeGreaterThanOrEqual(2);
    expect(list.slice(0, 2).map(({ kind }) => kind)).toEqual(['dip', 'peak']);
    expect(list.every((e, i) => e.significance >= 6 && (i === 0 || e.significance <= list[i - 1]!.significance))).toBe(true);
  });

  it('ask more of correlated noise, as much as it widens the scatter of their output', () => {
    const data = residual([{ at: 300, amplitude: -20, sigmaPx: SIGMA_PX }]);
    const [white, red] = [[1], [1, 2 / 3, 1 / 3]].map((correlation) => findExcesses(data, options({ correlation }))[0]!.significance);
    // noise averaged over three samples has the variance of wide kernels times 1 + 2 (2/3 + 1/3) = 3, a little less for this narrow one
    expect(white! / red!).toBeGreaterThan(Math.sqrt(2.4));
    expect(white! / red!).toBeLessThan(Math.sqrt(3));
  });

  it('follow an instrument profile that widens along the spectrum', () => {
    const sigma = Float64Array.from({ length: N }, (_, i) => 2 + (6 * i) / N);
    const data = residual([
      { at: 80, amplitude: -20, sigmaPx: 2.8 },
      { at: 520, amplitude: -20, sigmaPx: 7.2 },
    ]);
    const list = findExcesses(data, options({ instrumentSigmaPx: sigma }));
    for (const at of [80, 520]) {
      const [best] = list.filter(({ centre }) => Math.abs(centre - (500 + at * STEP)) < 0.05);
      expect(Math.abs(Math.log(best!.fwhm / (2.3548 * sigma[at]! * STEP)))).toBeLessThan(0.4);
    }
  });

  it('of less than a kernel of samples find nothing', () => {
    const few = { wavelength: wavelength.slice(0, 5), flux: new Float64Array(5).fill(-9), weight: new Float64Array(5).fill(1) };
    expect(findExcesses(few, options({ instrumentSigmaPx: new Float64Array(5).fill(3) }))).toEqual([]);
  });
});

describe('threshold of a spectrum', () => {
  it('grows with the samples that count, and with the range of widths looked for', () => {
    const sigma = new Float64Array(100).fill(1.1);
    expect(thresholdFor(0.5, sigma, 50_000, 50)).toBeGreaterThan(thresholdFor(0.5, sigma, 5000, 50));
    expect(thresholdFor(0.5, sigma, 5000, 500)).toBeGreaterThan(thresholdFor(0.5, sigma, 5000, 5));
    expect(thresholdFor(0.5, sigma, 20_000, 300)).toBeGreaterThan(4); // some four and a half sigma, as everywhere in the trade
    expect(thresholdFor(0.5, sigma, 20_000, 300)).toBeLessThan(5);
  });
});
