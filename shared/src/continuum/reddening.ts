import type { Spectrum } from '../spectrum/index.js';
import { lnLikelihoodOfExtinction, RELATION_SCATTER } from './diffuse-bands.js';
import type { Workspace } from './line-free.js';
import type { ExtinctionBelief } from './colour-problem.js';

const CELLS = 48;
const FINEST = 0.004;
const GROWTH = 0.155;
/** Half of all stars looked at are taken to be near and free of dust, half to be dimmed by some tenths of a magnitude or more. */
const NEAR_SHARE = 0.5;
const NEAR_MAG = 0.01;
const FAR_MAG = 0.7;

/** What the diffuse bands of the spectrum, seen or not, say of the visual extinction before the shape of the continuum is asked. */
export function beliefInExtinction(spectrum: Spectrum, space: Workspace, placement: number): ExtinctionBelief {
  const edge = Float64Array.from({ length: CELLS + 1 }, (_, j) => FINEST * Math.expm1(j * GROWTH));
  const av = new Float64Array(CELLS).map((_, j) => 0.5 * (edge[j]! + edge[j + 1]!));
  const width = av.map((_, j) => edge[j + 1]! - edge[j]!);
  const below = (a: number) => 1 - NEAR_SHARE * Math.exp(-a / NEAR_MAG) - (1 - NEAR_SHARE) * Math.exp(-a / FAR_MAG);
  const lnLikelihood = lnLikelihoodOfExtinction(spectrum, space, placement, av);
  const best = Math.max(...lnLikelihood);
  const likelihood = spreadInLn(
    lnLikelihood.map((l) => Math.exp(l - best)),
    av,
  );
  return { av, width, mass: av.map((_, j) => (below(edge[j + 1]!) - below(edge[j]!)) * likelihood[j]! + 1e-12) };
}

/** Averages a function of the extinction over the scatter that the bands' relation to it has from sightline to sightline. */
function spreadInLn(likelihood: Float64Array, av: Float64Array): Float64Array {
  const shifts = [-2, -1, 0, 1, 2];
  const weights = shifts.map((s) => Math.exp(-0.5 * s * s));
  const total = weights.reduce((a, b) => a + b, 0);
  return likelihood.map((_, j) =>
    shifts.reduce((sum, s, k) => sum + (weights[k]! / total) * interpolate(av, likelihood, av[j]! * Math.exp(s * RELATION_SCATTER)), 0),
  );
}

function interpolate(x: Float64Array, y: Float64Array, at: number): number {
  let i = 0;
  while (i < x.length - 2 && x[i + 1]! < at) i++;
  const t = Math.max(0, Math.min(1, (at - x[i]!) / (x[i + 1]! - x[i]!)));
  return y[i]! + t * (y[i + 1]! - y[i]!);
}
