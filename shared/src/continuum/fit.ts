import type { AnalysisSettings, Continuum } from '../identify/analysis.js';
import type { NoiseModel } from '../noise/index.js';
import { chebyshevSum } from '../numeric/chebyshev.js';
import { quantileInPlace } from '../numeric/select.js';
import type { Spectrum } from '../spectrum/index.js';
import { fitChebyshev } from './block-fit.js';
import { cutBlocks, type Blocks } from './blocks.js';
import { extinctionCurve } from './extinction.js';
import { interpolateLevel, makeWorkspace, rejectBoxes, type Workspace } from './line-free.js';
import { lnPlanck, wienPeakNm } from './planck.js';

/** The continuum under a spectrum: what is told and drawn, and the level per sample. */
export interface ContinuumFit {
  readonly summary: Continuum;
  /** continuum flux per sample, finite everywhere */
  readonly level: Float64Array;
  /** relative 1 sigma error of the placement */
  readonly levelSigma: Float64Array | number;
}

/** Truncated standard normal on [-2, 3]: mean and variance, for the asymmetric clip of single samples. */
const CLIP_LOW = -2;
const CLIP_HIGH = 3;
const CLIP_MEAN = 0.050783;
const CLIP_VARIANCE = 0.873149;

/** Fits the continuum. First version: Planck curve times a Chebyshev series, refined by rounds of box rejection. */
export function fitContinuum(spectrum: Spectrum, noise: NoiseModel, settings: AnalysisSettings): ContinuumFit {
  const { wavelength, flux, bad } = spectrum;
  const blocks = cutBlocks(spectrum);
  const space = makeWorkspace(flux.length);
  const start = startValues(spectrum, noise, blocks);
  const av = settings.extinctionAv ?? 0;
  const lnExtinction = blocks.centreNm.map((nm) => (av ? -0.4 * Math.LN10 * av * extinctionCurve(nm) : 0));
  const temperature = startTemperature(blocks, start, lnExtinction);
  const model = (nm: number) => lnPlanck(nm, temperature) - (av ? 0.4 * Math.LN10 * av * extinctionCurve(nm) : 0);
  const y = start.value.map((v, b) => Math.log(v) - model(blocks.centreNm[b]!));
  const coefficients = robustSeries(blocks, y, start.weight, 4);
  const edgeLevel = new Float64Array(blocks.count + 1);
  const setLevel = () => {
    for (let b = 0; b <= blocks.count; b++) {
      const x = blocks.count > 1 ? (2 * b) / blocks.count - 1 : 0;
      edgeLevel[b] = Math.exp(model(blocks.edgeNm[b]!) + chebyshevSum(coefficients, x));
    }
    interpolateLevel(space.level, wavelength, blocks, edgeLevel);
    for (let i = 0; i < flux.length; i++) space.residual[i] = bad[i] ? 0 : (flux[i]! - space.level[i]!) / noise.sigma[i]!;
  };
  setLevel();
  for (const floor of [0.02, 0.01, 0.005, 0.003, 0.002]) {
    rejectBoxes(space, noise.sigma, bad, { widths: [1, 3, 7, 15, 31, 63, 127, 255], sigmas: 3.2, floor, inflation: 1 });
    const means = blockMeans(space, noise.sigma, blocks);
    const change = robustSeries(blocks, means.value, means.weight, 5);
    for (let k = 0; k < change.length; k++) coefficients[k] = (coefficients[k] ?? 0) + change[k]!;
    setLevel();
  }
  let clipped = 0;
  for (let i = 0; i < flux.length; i++) if (space.rejected[i] && !bad[i]) clipped++;
  const summary: Continuum = {
    model: 'planck',
    temperatureK: temperature,
    temperatureSigmaK: null,
    constrained: false,
    statement: 'The temperature is not judged yet.',
    lowerBoundK: null,
    upperBoundK: null,
    wienPeakNm: wienPeakNm(temperature),
    chi2PerDegree: null,
    clippedFraction: clipped / Math.max(1, flux.length),
    sampleNm: Array.from(blocks.edgeNm),
    sampleFlux: Array.from(edgeLevel),
  };
  return { summary, level: space.level, levelSigma: 0.001 };
}

interface BlockValues {
  readonly value: Float64Array;
  readonly weight: Float64Array;
}

/** A first guess per block: an upper quantile where dips dominate, a lower one where peaks do, freed of the noise's own share. */
function startValues(spectrum: Spectrum, noise: NoiseModel, blocks: Blocks): BlockValues {
  const { flux, bad } = spectrum;
  const scratch = new Float64Array(flux.length);
  const value = new Float64Array(blocks.count);
  const weight = new Float64Array(blocks.count);
  for (let b = 0; b < blocks.count; b++) {
    let m = 0;
    let s = 0;
    for (let i = blocks.first[b]!; i < blocks.first[b + 1]!; i++) {
      if (bad[i]) continue;
      scratch[m++] = flux[i]!;
      s += noise.sigma[i]!;
    }
    if (m < 4) continue;
    value[b] = quantileInPlace(scratch, m, 0.7) - 0.52 * (s / m);
    if (value[b]! > 0) weight[b] = 1;
    else value[b] = NaN;
  }
  return { value, weight };
}

function startTemperature(blocks: Blocks, start: BlockValues, lnExtinction: Float64Array): number {
  let best = Infinity;
  let at = 6000;
  for (let t = 1500; t < 60000; t *= 1.1) {
    let m = 0;
    let s1 = 0;
    let s2 = 0;
    for (let b = 0; b < blocks.count; b++) {
      if (!start.weight[b]) continue;
      const d = Math.log(start.value[b]!) - lnPlanck(blocks.centreNm[b]!, t) - lnExtinction[b]!;
      m++;
      s1 += d;
      s2 += d * d;
    }
    const spread = s2 - (s1 * s1) / m;
    if (spread < best) {
      best = spread;
      at = t;
    }
  }
  return at;
}

/** Chebyshev series through block values by re-weighting: blocks that lie far off, most of all below, lose their say. */
function robustSeries(blocks: Blocks, value: Float64Array, weight: Float64Array, order: number): Float64Array {
  let used = weight.map((w, b) => (w > 0 && Number.isFinite(value[b]!) ? w : 0));
  const y = value.map((v) => (Number.isFinite(v) ? v : 0));
  let coefficients: Float64Array = new Float64Array(order + 1);
  const scratch = new Float64Array(y.length);
  for (let round = 0; round < 8; round++) {
    const fitted = fitChebyshev(blocks.x, y, used, order);
    if (!fitted) return coefficients;
    coefficients = fitted;
    let m = 0;
    for (let b = 0; b < y.length; b++) if (weight[b]! > 0) scratch[m++] = Math.abs(y[b]! - chebyshevSum(coefficients, blocks.x[b]!));
    const scale = 1.4826 * quantileInPlace(scratch, m, 0.5);
    if (!(scale > 0)) return coefficients;
    used = weight.map((w, b) => {
      const d = (y[b]! - chebyshevSum(coefficients, blocks.x[b]!)) / scale;
      const u = d < 0 ? d / 3 : d / 5;
      return w > 0 && u * u < 1 ? w * (1 - u * u) ** 2 : 0;
    });
  }
  return coefficients;
}

/** Mean relative departure of the kept samples of each block from the level, with the mean of the asymmetric clip removed. */
function blockMeans(space: Workspace, sigma: Float64Array, blocks: Blocks): BlockValues {
  const value = new Float64Array(blocks.count);
  const weight = new Float64Array(blocks.count);
  for (let b = 0; b < blocks.count; b++) {
    let s1 = 0;
    let s2 = 0;
    for (let i = blocks.first[b]!; i < blocks.first[b + 1]!; i++) {
      const z = space.residual[i]!;
      if (space.rejected[i] || z < CLIP_LOW || z > CLIP_HIGH) continue;
      const r = space.level[i]! / sigma[i]!;
      s1 += (z - CLIP_MEAN) * r;
      s2 += r * r;
    }
    weight[b] = CLIP_VARIANCE * s2;
    value[b] = s2 > 0 ? s1 / weight[b]! : NaN;
  }
  return { value, weight };
}
