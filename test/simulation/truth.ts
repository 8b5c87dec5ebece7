import type { TrueLine } from '../support/scoring.js';

/** What a simulated spectrum was made of, as it is written beside the file. */
export interface Truth {
  readonly file: string;
  readonly kind: string;
  readonly seed: number;
  /** whether the wavelengths are bent or the instrument profile leans, so that centres are off by more than their errors */
  readonly distorted: boolean;
  readonly medium: 'air' | 'vacuum';
  readonly resolving_power: number;
  readonly temperature_K: number;
  readonly a_v: number;
  readonly snr: number;
  readonly systems: readonly TrueSystem[];
  readonly lines: readonly TrueLine[];
}

export interface TrueSystem {
  readonly id: string;
  readonly family: string;
  readonly velocity_km_s: number;
  /** rotation, km/s */
  readonly vsini?: number;
}

/** A profile on steps of equal velocity. */
export interface Profile {
  readonly stepKmPerS: number;
  readonly values: Float64Array;
}

/** Values through a kernel, with all that spills over their ends. */
export function blurred(values: Float64Array, by: Float64Array): Float64Array {
  const out = new Float64Array(values.length + by.length - 1);
  for (let i = 0; i < values.length; i++) {
    for (let k = 0; k < by.length; k++) out[i + k] = out[i + k]! + values[i]! * by[k]!;
  }
  return out;
}

/** A kernel on steps `times` (odd) as long, its middle staying in the middle. */
export function thinned(kernel: Float64Array, times: number): Float64Array {
  if (times === 1) return kernel;
  const middle = (kernel.length - 1) / 2;
  const half = Math.ceil((middle - (times - 1) / 2) / times);
  const out = new Float64Array(2 * Math.max(0, half) + 1);
  kernel.forEach((value, i) => {
    const bin = Math.round((i - middle) / times) + Math.max(0, half);
    out[bin] = (out[bin] ?? 0) + value;
  });
  return out;
}

export const areaOf = ({ values }: Profile) => values.reduce((a, b) => a + b, 0);

/** Full width at half of the extreme value, in steps, interpolated. */
export function fullWidth({ values }: Profile): number {
  let top = 0;
  for (let i = 1; i < values.length; i++) if (Math.abs(values[i]!) > Math.abs(values[top]!)) top = i;
  const half = Math.abs(values[top]!) / 2;
  const at = (i: number) => Math.abs(values[i] ?? 0);
  let left = top;
  while (left > 0 && at(left) > half) left--;
  let right = top;
  while (right < values.length - 1 && at(right) > half) right++;
  const leftEdge = left + (half - at(left)) / Math.max(1e-300, at(left + 1) - at(left));
  const rightEdge = right - (half - at(right)) / Math.max(1e-300, at(right - 1) - at(right));
  return Math.max(1, rightEdge - leftEdge);
}
