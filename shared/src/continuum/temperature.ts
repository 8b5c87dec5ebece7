import type { Blocks } from './blocks.js';
import {
  lnProbabilityOf,
  makeProblem,
  NO_EXTINCTION,
  withoutRows,
  type ColourProblem,
  type ExtinctionBelief,
  type FittedBlocks,
  type Nuisance,
} from './colour-problem.js';
import { wienPeakNm } from './planck.js';
import { gridAround, highestPoint, meanOf, quantileOf, widthAt, type Grid } from './search.js';
import type { SmoothModel } from './smooth-model.js';

/** What the shape of the continuum says of the colour temperature, all else averaged out. */
export interface TemperatureBelief {
  /** mean of ln T */
  readonly lnT: number;
  /** standard deviation of ln T: noise, response and dust together */
  readonly lnSigma: number;
  /** scatter of ln T when parts of the spectrum are left out: what no Planck curve describes */
  readonly lnSystematic: number;
  /** ln T below which lie 2.5 % and 97.5 % of the probability */
  readonly lnLow: number;
  readonly lnHigh: number;
  /** most probable temperature without any extinction beyond the given one, K */
  readonly unreddenedK: number;
  /** mean of the visual extinction, mag */
  readonly av: number;
}

const LN_HOTTEST = Math.log(200_000);
/** The coolest temperature tried has its peak at this many times the longest wavelength. */
const COOLEST = 8;
/** Dust is taken to hide a body at most this much hotter, in ln T. */
const DUST_REACH = 3;
/** Points of the final grid stand this part of a standard deviation apart, as it is for a known extinction, and between these in ln T. */
const STEP_SIGMAS = 0.8;
const FINEST_STEP = 0.003;
const COARSEST_STEP = 0.05;
/** Parts of the range that are left out in turn. */
const PARTS = 6;

/**
 * Probability of the colour temperature from the block values of the continuum. The scale, smooth calibration errors of a size that the
 * data themselves tell, and the extinction are averaged out, so that the width of the result holds all of them.
 * @param known ln of all that is known beside the Planck curve: given extinction, flux per frequency instead of wavelength
 */
export function judgeTemperature(
  blocks: Blocks,
  model: SmoothModel,
  fitted: FittedBlocks,
  extinction: ExtinctionBelief,
  known: (nm: number) => number,
): TemperatureBelief {
  const problem = makeProblem(blocks, model, fitted, known);
  const lnCoolest = Math.log(wienPeakNm(blocks.edgeNm[blocks.count]!) / COOLEST);
  const dustless = lnProbabilityOf(problem, problem.middling, NO_EXTINCTION);
  const unreddened = highestPoint(dustless, lnCoolest, LN_HOTTEST);
  const peak = dustyPeak(problem, extinction, unreddened);
  const step = Math.max(FINEST_STEP, Math.min(COARSEST_STEP, STEP_SIGMAS * widthAt(dustless, unreddened)));
  const likely = likelyNuisances(problem, extinction, peak);
  const grid = gridAround(lnProbabilityOf(problem, likely, extinction), peak, step, lnCoolest, LN_HOTTEST);
  const { mean, sigma } = meanOf(grid);
  return {
    lnT: mean,
    lnSigma: sigma,
    lnSystematic: scatterOfParts(problem, unreddened),
    lnLow: quantileOf(grid, 0.025),
    lnHigh: quantileOf(grid, 0.975),
    unreddenedK: Math.exp(unreddened),
    av: meanExtinction(problem, extinction, grid),
  };
}

/** Beliefs about the response that the peak itself makes less probable than the best by this much, in ln, only cost time. */
const UNLIKELY = 7;
function likelyNuisances(problem: ColourProblem, extinction: ExtinctionBelief, peak: number): readonly Nuisance[] {
  const lnP = problem.nuisances.map((nuisance) => lnProbabilityOf(problem, [nuisance], extinction)(peak));
  const best = lnP.reduce((a, b) => Math.max(a, b), -Infinity);
  return problem.nuisances.filter((_, h) => lnP[h]! > best - UNLIKELY);
}

/** Dust only ever hides a hotter body: the search starts from the temperature without dust. */
function dustyPeak(problem: ColourProblem, extinction: ExtinctionBelief, unreddened: number): number {
  if (extinction.av.length === 1) return unreddened;
  return highestPoint(
    lnProbabilityOf(problem, problem.middling, extinction),
    unreddened - 0.1,
    Math.min(LN_HOTTEST, unreddened + DUST_REACH),
  );
}

/** Jackknife over contiguous parts (Tukey 1958): lines that blanket one end, bands or jumps make it larger than chance does. */
function scatterOfParts(problem: ColourProblem, peak: number): number {
  const rows = problem.weight.length;
  if (rows < 2 * PARTS) return 0;
  const found = Array.from({ length: PARTS }, (_, part) => {
    const rest = withoutRows(problem, Math.floor((part * rows) / PARTS), Math.floor(((part + 1) * rows) / PARTS));
    return highestPoint(lnProbabilityOf(rest, rest.middling, NO_EXTINCTION), peak - 0.3, Math.min(LN_HOTTEST, peak + 0.3), 0.1);
  });
  const mean = found.reduce((a, b) => a + b, 0) / PARTS;
  return Math.sqrt(((PARTS - 1) / PARTS) * found.reduce((sum, u) => sum + (u - mean) ** 2, 0));
}

/** Mean visual extinction at the most probable temperature. */
function meanExtinction(problem: ColourProblem, { av, width, mass }: ExtinctionBelief, { u, probability }: Grid): number {
  const peak = u[probability.reduce((best, p, i, all) => (p > all[best]! ? i : best), 0)]!;
  const cell = (a: Float64Array, j: number) => a.subarray(j, j + 1);
  const lnP = av.map((_, j) =>
    lnProbabilityOf(problem, problem.middling, { av: cell(av, j), width: cell(width, j), mass: cell(mass, j) })(peak),
  );
  const best = lnP.reduce((a, b) => Math.max(a, b), -Infinity);
  const p = lnP.map((l) => Math.exp(l - best));
  return p.reduce((sum, x, j) => sum + x * av[j]!, 0) / p.reduce((a, b) => a + b, 0);
}
