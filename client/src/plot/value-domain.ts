import type { CurveData } from './curve-data.js';
import { extremes, lowerBound, type Pyramid } from './pyramid.js';
import type { Range } from './view.js';

export type CurveMode = 'flux' | 'normalised';
/** Whether the value axis starts at zero, or closes in on what is there. */
export type Base = 'zero' | 'close';

/** What a mode draws: the curve and the continuum it is measured against (null before an analysis). */
export interface Layer {
  readonly curve: Pyramid;
  readonly level: Float32Array | null;
}

const flat = new WeakMap<CurveData, Float32Array>();
function flatLevel(data: CurveData): Float32Array {
  let level = flat.get(data);
  if (!level) flat.set(data, (level = new Float32Array(data.wavelength.length).fill(1)));
  return level;
}

/** The layer of a mode; flux stands in for normalised while there is no continuum. */
export function layerOf(data: CurveData, mode: CurveMode): Layer {
  if (!data.fitted) return { curve: data.flux, level: null };
  return mode === 'flux' ? { curve: data.flux, level: data.fitted.continuum } : { curve: data.fitted.normalised, level: flatLevel(data) };
}

/** Value axis, [low, high], that holds what is in view with a little air; never empty. */
export function valueDomain(data: CurveData, mode: CurveMode, base: Base, { fromNm, toNm }: Range): [number, number] {
  const { curve, level } = layerOf(data, mode);
  const first = lowerBound(data.wavelength, fromNm);
  const end = Math.max(first + 1, lowerBound(data.wavelength, toNm));
  const pair = new Float64Array(2);
  extremes(curve, first, Math.min(end, data.wavelength.length), pair);
  let [low, high] = [pair[0]!, pair[1]!];
  const stride = Math.max(1, Math.floor((end - first) / 64));
  for (let i = first; level && i < end && i < level.length; i += stride) {
    low = Math.min(low, level[i]!);
    high = Math.max(high, level[i]!);
  }
  if (!(high >= low)) return [0, 1];
  // a little below zero, so that the axis' own zero can be read
  if (base === 'zero') return high > 0 ? [Math.min(-0.05 * high, low * 1.04), high * 1.05] : [low * 1.05, 0];
  const air = 0.07 * (high - low) || Math.abs(high) * 0.05 || 1;
  return [low - air, high + air];
}
