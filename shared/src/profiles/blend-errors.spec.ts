import { copies, damped, dip, grid, light, peak, samples } from '../../../test/support/blends.js';
import { chance } from '../../../test/support/noisy-spectrum.js';
import { fitBlend } from './blend.js';
import { equivalentWidth, settle, withCore, type Component } from './component.js';
import type { NormalisedSamples } from './samples.js';
import { rotationShape } from './shapes.js';

const LIMITS = { narrowest: 0.01, widest: 5 };
const ROTATION = rotationShape(0.3);

/** Parameters of a component as the fit sees them: amplitude, centre, ln scale, and of damped ones ln tau and a. */
const parametersOf = (c: Component) => [
  c.amplitude,
  c.centre,
  Math.log(c.scale),
  ...(c.damped ? [Math.log(c.damped.tau), c.damped.a] : []),
];
function withParameters(c: Component, [amplitude, centre, lnScale, lnTau, a]: readonly number[]): Component {
  const out = { ...c, amplitude: amplitude!, centre: centre!, scale: Math.exp(lnScale!) };
  if (out.damped) out.damped = { tau: Math.exp(lnTau!), a: a! };
  settle(out);
  return out;
}

/** Covariance of all parameters from finite differences of the light, inverse of the normal matrix by elimination. */
function covarianceByDifferences(data: NormalisedSamples, components: readonly Component[]): number[][] {
  const all = components.flatMap((c, k) => parametersOf(c).map((_, q) => ({ k, q })));
  const columns = all.map(({ k, q }) => {
    const c = components[k]!;
    const h = [1e-3, 0.01 * c.fwhm, 0.01, 0.02, 0.02 * (c.damped?.a ?? 1)][q]!;
    const moved = (step: number) =>
      light(
        data.wavelength,
        components.map((o, i) =>
          i === k
            ? withParameters(
                c,
                parametersOf(c).map((p, j) => (j === q ? p + step : p)),
              )
            : o,
        ),
      );
    const [up, down] = [moved(h), moved(-h)];
    return up.map((u, i) => (u - down[i]!) / (2 * h));
  });
  const n = all.length;
  const rows = columns.map((a, i) => [
    ...columns.map((b) => a.reduce((sum, v, s) => sum + data.weight[s]! * v * b[s]!, 0)),
    ...columns.map((_, j) => (i === j ? 1 : 0)),
  ]);
  for (let i = 0; i < n; i++) {
    const pivot = rows[i]![i]!;
    rows[i] = rows[i]!.map((v) => v / pivot);
    for (let r = 0; r < n; r++) {
      const factor = rows[r]![i]!;
      if (r !== i) rows[r] = rows[r]!.map((v, j) => v - rows[i]![j]! * factor);
    }
  }
  return rows.map((row) => row.slice(n));
}

describe('errors', () => {
  it.each<[string, Component[]]>([
    ['a Gaussian dip', [dip(500, 0.3, 0.5)]],
    ['an emission line', [peak(500, 0.3, 4)]],
    ['a rotating line', [withCore(dip(500, 0.8, 0.5), ROTATION)]],
    ['a damped line', [damped(500, 0.1, 0.7, 3, 0.5)]],
    ['a blend of two', [dip(499.9, 0.2, 0.6), dip(500.12, 0.25, 0.4)]],
    ['a dip within a peak', [peak(500, 0.6, 1.2), dip(500.05, 0.12, 0.5)]],
    ['a damped line with a neighbour', [damped(500, 0.1, 0.7, 6, 0.3), dip(500.5, 0.2, 0.3)]],
  ])("of %s are those of the light's finite differences", (_, truth) => {
    const data = samples(truth, 200);
    const fitted = copies(truth);
    fitBlend(data, fitted, [], LIMITS, [498, 502.1]);
    const covariance = covarianceByDifferences(data, truth);
    const variance = (weights: readonly number[]) =>
      weights.reduce((sum, w, i) => sum + w * weights.reduce((s, v, j) => s + v * covariance[i]![j]!, 0), 0);
    let at = 0;
    for (const [k, c] of fitted.entries()) {
      const t = truth[k]!;
      const size = parametersOf(t).length;
      const sigmaOf = (f: (c: Component) => number) => {
        const p = parametersOf(t);
        const gradient = p.map((_, q) => {
          const h = 0.02 * (q === 1 ? t.fwhm : q === 4 ? t.damped!.a : q === 0 ? t.amplitude : 1);
          const moved = (step: number) =>
            f(
              withParameters(
                t,
                p.map((v, j) => (j === q ? v + step : v)),
              ),
            );
          return (moved(h) - moved(-h)) / (2 * h);
        });
        return Math.sqrt(variance([...Array<number>(at).fill(0), ...gradient, ...Array<number>(covariance.length - at - size).fill(0)]));
      };
      // differences of tables that are linear between nodes: a per cent or two
      const near = (ours: number, f: (c: Component) => number) => expect(Math.abs(ours / sigmaOf(f) - 1)).toBeLessThan(0.03);
      near(c.sigmaAmplitude, (o) => o.amplitude);
      near(c.sigmaCentre, (o) => o.centre);
      near(c.sigmaLogFwhm, (o) => Math.log(o.fwhm));
      near(equivalentWidth(c).sigma, (o) => Math.abs(equivalentWidth(o).value));
      at += size;
    }
  });

  it.each<[string, Component[]]>([
    ['one line', [dip(500, 0.25, 0.5)]],
    ['an emission line', [peak(500, 0.25, 2)]],
    ['a blend', [dip(499.9, 0.2, 0.6), dip(500.13, 0.25, 0.4)]],
  ])('of %s are the scatter over 300 realisations of the noise', (_, truth) => {
    const { normal } = chance(7);
    const pulls = truth.map(() => ({ centre: [] as number[], fwhm: [] as number[], width: [] as number[] }));
    const wavelength = grid(499.2, 500.8, 0.02);
    for (let run = 0; run < 300; run++) {
      const fitted = copies(truth);
      fitBlend(samples(truth, 60, normal, wavelength), fitted, [], LIMITS, [499, 501]);
      fitted.forEach((c, k) => {
        const t = truth[k]!;
        pulls[k]!.centre.push((c.centre - t.centre) / c.sigmaCentre);
        pulls[k]!.fwhm.push(Math.log(c.fwhm / t.fwhm) / c.sigmaLogFwhm);
        pulls[k]!.width.push((equivalentWidth(c).value - equivalentWidth(t).value) / equivalentWidth(c).sigma);
      });
    }
    for (const list of pulls.flatMap((p) => Object.values(p))) {
      const mean = list.reduce((a, b) => a + b, 0) / list.length;
      const spread = Math.sqrt(list.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (list.length - 1));
      expect(spread).toBeGreaterThan(0.9); // 300 runs know a spread to 4 %
      expect(spread).toBeLessThan(1.1);
      expect(Math.abs(mean)).toBeLessThan(0.25); // 4 of 1 / sqrt(300)
    }
  });

  it('go with the noise', () => {
    const errors = [50, 200].map((signalToNoise) => {
      const c = dip(500, 0.3, 0.5);
      fitBlend(samples([c], signalToNoise), [c], [], LIMITS, [498, 502]);
      return [c.sigmaAmplitude, c.sigmaCentre, c.sigmaLogFwhm, c.sigmaEquivalentWidth];
    });
    errors[0]!.forEach((e, i) => expect(e / errors[1]![i]!).toBeCloseTo(4, 6));
  });
});
