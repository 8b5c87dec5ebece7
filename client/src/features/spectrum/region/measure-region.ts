import { C_KM_PER_S } from '@foreveil/shared';
import type { CurveData } from '../../../plot/curve-data.js';
import { lowerBound } from '../../../plot/pyramid.js';
import type { Range } from '../../../plot/view.js';

/** What the data say within a region, by plain sums over the normalised flux: no profile is assumed. */
export interface RegionNumbers {
  readonly samples: number;
  readonly masked: number;
  /** nm, positive in absorption; 1 sigma from the samples' errors, null without them */
  readonly equivalentWidthNm: number;
  readonly equivalentWidthSigmaNm: number | null;
  /** vacuum nm of the light missing (or given) there, weighed by how much; null when none is, or dips and peaks cancel */
  readonly centreNm: number | null;
  /** full width at half of the greatest depth, between the outermost crossings, nm; null when it does not fall below half on both sides */
  readonly fwhmNm: number | null;
  /** median of flux over error per sample; null without errors */
  readonly snr: number | null;
  readonly lengthNm: number;
  /** from end to end about the middle, km/s, relativistic */
  readonly lengthKmPerS: number;
}

/**
 * Equivalent width after the sum of (1 - F/Fc) times the width of each sample, with its error from those of the samples alone
 * (Vollmann & Eversberg 2006, AN 327, 862, without the continuum's share).
 * @returns null before a continuum was fitted, or without two good samples
 */
export function measureRegion(data: CurveData, { fromNm, toNm }: Range): RegionNumbers | null {
  if (!data.fitted) return null;
  const { wavelength, bad, sigma } = data;
  const { values } = data.fitted.normalised;
  const first = lowerBound(wavelength, fromNm);
  const end = lowerBound(wavelength, toNm);
  let [sum, moment, variance, samples, deepest] = [0, 0, 0, 0, 0];
  const snr: number[] = [];
  for (let i = first; i < end; i++) {
    if (bad[i] || !Number.isFinite(values[i]!)) continue;
    const step = 0.5 * (wavelength[Math.min(i + 1, wavelength.length - 1)]! - wavelength[Math.max(i - 1, 0)]!);
    const depth = 1 - values[i]!;
    samples++;
    sum += step * depth;
    moment += step * depth * wavelength[i]!;
    if (Math.abs(depth) > Math.abs(deepest)) deepest = depth;
    if (!sigma) continue;
    variance += ((step * sigma[i]!) / data.fitted.continuum[i]!) ** 2;
    snr.push(data.flux.values[i]! / sigma[i]!);
  }
  if (samples < 2) return null;
  const error = sigma ? Math.sqrt(variance) : null;
  const centre = moment / sum;
  const q = (toNm / fromNm) ** 2;
  return {
    samples,
    masked: end - first - samples,
    equivalentWidthNm: sum,
    equivalentWidthSigmaNm: error,
    centreNm: centre > fromNm && centre < toNm && Math.abs(sum) > 2 * (error ?? 0) ? centre : null,
    fwhmNm: halfWidth(data, first, end, deepest),
    snr: snr.length ? snr.sort((a, b) => a - b)[snr.length >> 1]! : null,
    lengthNm: toNm - fromNm,
    lengthKmPerS: (C_KM_PER_S * (q - 1)) / (q + 1),
  };
}

/** Between the first and the last place where the depth passes half of the deepest; linear between samples. */
function halfWidth({ wavelength, bad, fitted }: CurveData, first: number, end: number, deepest: number): number | null {
  const { values } = fitted!.normalised;
  const over = (i: number) => (1 - values[i]!) / deepest - 0.5;
  const good = [...Array(end - first).keys()].map((k) => first + k).filter((i) => !bad[i] && Number.isFinite(values[i]!));
  const inside = good.map((i) => over(i) > 0);
  const [a, z] = [inside.indexOf(true), inside.lastIndexOf(true)];
  if (a < 1 || z < 0 || z >= good.length - 1) return null;
  const crossing = (i: number, j: number) => wavelength[i]! + ((wavelength[j]! - wavelength[i]!) * over(i)) / (over(i) - over(j));
  return crossing(good[z]!, good[z + 1]!) - crossing(good[a - 1]!, good[a]!);
}
