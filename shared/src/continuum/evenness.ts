import { median, quantile } from '../numeric/select.js';
import { makeBlockValues, type Blocks } from './blocks.js';
import { robustFit, type Freedom } from './robust-fit.js';
import { evaluateRows, precisionOf, type SmoothModel } from './smooth-model.js';
import type { Start } from './start.js';

/** Departures count from this multiple of a block's noise on. */
const SIGNIFICANT = 4;
/** Neighbouring blocks that differ by less than this part of the departures themselves are parts of one ripple, not blocks full of lines. */
const SAME_RIPPLE = 1;
/** Departures to one side are at most this many times those to the other. */
const LOPSIDED = 2;
const FEWEST_BLOCKS = 40;
/** Over a range shorter than this, in ln wavelength, a broad line is as wide as a ripple. */
const SHORTEST_RANGE = 0.1;

/** Whether the first guesses ripple about the smooth model, as a response with fringes, or with joints between orders, makes them. */
export function ripples(blocks: Blocks, model: SmoothModel, start: Start, free: Freedom): boolean {
  if (Math.log(blocks.edgeNm[blocks.count]! / blocks.edgeNm[0]!) < SHORTEST_RANGE) return false;
  const values = makeBlockValues(blocks.count);
  for (let b = 0; b < blocks.count; b++) values.value[b] = start.values.value[b]! - model.baseCentre[b]!;
  values.weight.set(start.values.weight);
  const fit = robustFit(model, values, [precisionOf(model, free.response[0]!, free)], start.pull, 2);
  if (!fit) return false;
  const fitted = evaluateRows(new Float64Array(blocks.count), model.centre, model.columns, fit.coefficients);
  const { weight } = start.values;
  return areRipples(
    values.value.map((v, b) => (weight[b]! > 0 ? v - fitted[b]! : NaN)),
    weight,
  );
}

/** Large against the noise, like their neighbours, and as often above as below: dips and bands only pull to one side. */
function areRipples(departures: Float64Array, weight: Float64Array): boolean {
  const sizes: number[] = [];
  const steps: number[] = [];
  const noise: number[] = [];
  departures.forEach((d, b) => {
    const step = Math.abs(d - departures[b - 1]!);
    if (!(step >= 0)) return;
    sizes.push(Math.abs(d));
    steps.push(step);
    noise.push(1 / Math.sqrt(weight[b]!));
  });
  if (sizes.length < FEWEST_BLOCKS) return false;
  const size = median(sizes);
  const above = quantile(departures, 0.9);
  const below = -quantile(departures, 0.1);
  return size > SIGNIFICANT * median(noise) && median(steps) < SAME_RIPPLE * size && below < LOPSIDED * above && above < LOPSIDED * below;
}
