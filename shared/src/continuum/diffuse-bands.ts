import { quantile } from '../numeric/select.js';
import { C_KM_PER_S } from '../units/index.js';
import type { Spectrum } from '../spectrum/index.js';
import type { Workspace } from './line-free.js';

/** A diffuse interstellar band strong enough to tell of the dust in front of a star. */
interface DiffuseBand {
  readonly vacuumNm: number;
  readonly fwhmNm: number;
  /** equivalent width, nm, per magnitude of visual extinction */
  readonly nmPerMag: number;
}

/**
 * Strengths per E(B-V) as in the line list (Jenniskens & Desert 1994, A&AS 106, 39; Hobbs et al. 2008, ApJ 680, 1256; from memory),
 * over R_V = 3.1. The band at 628.6 nm lies among lines of molecular oxygen of the air and is left out.
 */
const BANDS: readonly DiffuseBand[] = [
  { vacuumNm: 443.004, fwhmNm: 1.75, nmPerMag: 0.223 / 3.1 },
  { vacuumNm: 472.812, fwhmNm: 0.27, nmPerMag: 0.0128 / 3.1 },
  { vacuumNm: 578.21, fwhmNm: 0.21, nmPerMag: 0.0579 / 3.1 },
  { vacuumNm: 579.871, fwhmNm: 0.09, nmPerMag: 0.0132 / 3.1 },
  { vacuumNm: 620.482, fwhmNm: 0.12, nmPerMag: 0.0107 / 3.1 },
  { vacuumNm: 661.543, fwhmNm: 0.1, nmPerMag: 0.0231 / 3.1 },
  { vacuumNm: 862.317, fwhmNm: 0.43, nmPerMag: 0.0368 / 3.1 },
];

/** Clouds are looked for within this range of velocities, km/s, in steps of about half the width of the narrowest band. */
const VELOCITIES = [-100, -80, -60, -40, -20, 0, 20, 40, 60, 80, 100];
/** Scatter of one band's strength about the mean relation, and of the whole relation from sightline to sightline, in ln. */
const BAND_SCATTER = 0.3;
export const RELATION_SCATTER = 0.25;
/** Chance that a line of the star adds to a band, and by how much on average, as a depth over the band's own width. */
const BLEND_CHANCE = 0.4;
const BLEND_DEPTH = 0.1;

interface BandMeasure {
  readonly widthNm: number;
  readonly sigmaNm: number;
  readonly nmPerMag: number;
  /** equivalent width of a band of this shape and depth 1, nm */
  readonly areaNm: number;
}

/**
 * ln likelihood of each trial extinction over that of none, from the diffuse bands that the spectrum covers, seen or not; all 0 when it
 * covers none. The clouds' velocity is not known and is averaged over. A band that is too strong may be blended, one too weak may not.
 */
export function lnLikelihoodOfExtinction(spectrum: Spectrum, space: Workspace, placement: number, trialAv: Float64Array): Float64Array {
  const samples = scratch();
  const perVelocity = VELOCITIES.map((velocity) => {
    const bands = BANDS.map((band) => measureBand(samples, spectrum, space, band, velocity, placement)).filter((m) => m !== null);
    const lnL = (av: number) => bands.reduce((sum, m) => sum + lnLikelihood(m, av), 0);
    const none = lnL(0);
    return trialAv.map((av) => lnL(av) - none);
  });
  return trialAv.map((_, j) => {
    const best = perVelocity.reduce((most, l) => Math.max(most, l[j]!), -Infinity);
    return best + Math.log(perVelocity.reduce((sum, l) => sum + Math.exp(l[j]! - best), 0) / VELOCITIES.length);
  });
}

function lnLikelihood({ widthNm, sigmaNm, nmPerMag, areaNm }: BandMeasure, av: number): number {
  const expected = av * nmPerMag;
  const sigma = Math.hypot(sigmaNm, BAND_SCATTER * expected);
  const d = (widthNm - expected) / sigma;
  const alone = Math.exp(-0.5 * d * d) / (sigma * Math.sqrt(2 * Math.PI));
  // a blending line adds an amount with an exponential distribution; folded with the error as a plain step softened over sigma
  const blend = BLEND_DEPTH * areaNm;
  const blended = Math.exp(-Math.max(0, widthNm - expected) / blend) / blend / (1 + Math.exp(-1.7 * d));
  return Math.log((1 - BLEND_CHANCE) * alone + BLEND_CHANCE * blended + 1e-6 / areaNm);
}

/** The samples of one band, thinned out where there are many: depth below the continuum, profile of depth 1, and weight. */
interface BandSamples {
  count: number;
  readonly depth: Float64Array;
  readonly shape: Float64Array;
  /** 1 / sigma of the depth */
  readonly inverse: Float64Array;
}
const MOST_SAMPLES = 120;
const scratch = (): BandSamples => ({
  count: 0,
  depth: new Float64Array(2 * MOST_SAMPLES),
  shape: new Float64Array(2 * MOST_SAMPLES),
  inverse: new Float64Array(2 * MOST_SAMPLES),
});

/** Gathers every k-th sample within 1.8 sigma of a band's middle and returns k; 0 where the band is not covered. */
function gatherBand(out: BandSamples, spectrum: Spectrum, space: Workspace, centreNm: number, sigmaNm: number): number {
  const { wavelength, flux } = spectrum;
  const first = lowerBound(wavelength, centreNm - 1.8 * sigmaNm);
  const last = lowerBound(wavelength, centreNm + 1.8 * sigmaNm);
  if (last - first < 5 || first === 0 || last === wavelength.length) return 0;
  const thinned = Math.max(1, Math.floor((last - first) / MOST_SAMPLES));
  let m = 0;
  for (let i = first; i < last; i += thinned) {
    const level = space.level[i]!;
    const inverse = space.inverseSigma[i]! * level;
    if (inverse === 0) continue;
    const u = (wavelength[i]! - centreNm) / sigmaNm;
    out.depth[m] = 1 - flux[i]! / level;
    out.shape[m] = Math.exp(-0.5 * u * u);
    out.inverse[m++] = inverse;
  }
  out.count = m;
  return m > 0 ? thinned : 0;
}

const ROUNDS = 5;

/**
 * Equivalent width of a band at one velocity by a matched Gaussian, from the samples that are not far below it: narrow lines on top of
 * the band are left out. `placement` is the relative error of the continuum there. Null when the band is not covered.
 */
function measureBand(
  samples: BandSamples,
  spectrum: Spectrum,
  space: Workspace,
  band: DiffuseBand,
  velocity: number,
  placement: number,
): BandMeasure | null {
  const centre = band.vacuumNm * (1 + velocity / C_KM_PER_S);
  const instrument = spectrum.resolvingPower ? centre / spectrum.resolvingPower : 0;
  const sigmaNm = Math.hypot(band.fwhmNm, instrument) / 2.354820045;
  const thinned = gatherBand(samples, spectrum, space, centre, sigmaNm);
  if (thinned === 0) return null;
  const { count, depth, shape, inverse } = samples;
  let amplitude = Math.max(0, startDepth(samples));
  let weights = 0;
  for (let round = 0; round < ROUNDS; round++) {
    let top = 0;
    weights = 0;
    for (let i = 0; i < count; i++) {
      const off = (depth[i]! - amplitude * shape[i]!) * inverse[i]!;
      if (off > 2.5 || off < -4) continue;
      const w = inverse[i]! * inverse[i]! * shape[i]!;
      top += w * depth[i]!;
      weights += w * shape[i]!;
    }
    if (!(weights > 0)) return null;
    amplitude = top / weights;
    if (round < ROUNDS - 1) amplitude = Math.max(0, amplitude);
  }
  const areaNm = sigmaNm * Math.sqrt(2 * Math.PI);
  const variance = 1 / (weights * thinned) + placement * placement;
  return { widthNm: amplitude * areaNm, sigmaNm: Math.sqrt(variance) * areaNm, nmPerMag: band.nmPerMag, areaNm };
}

/** Lower third of the depths that single samples of the band's core would give it. */
function startDepth({ count, depth, shape }: BandSamples): number {
  const depths: number[] = [];
  for (let i = 0; i < count; i++) if (shape[i]! > 0.6) depths.push(depth[i]! / shape[i]!);
  return quantile(depths, 0.3);
}

function lowerBound(sorted: Float64Array, value: number): number {
  let from = 0;
  let to = sorted.length;
  while (from < to) {
    const middle = (from + to) >> 1;
    if (sorted[middle]! < value) from = middle + 1;
    else to = middle;
  }
  return from;
}
