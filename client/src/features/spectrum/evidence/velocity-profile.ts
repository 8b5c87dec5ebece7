import { dopplerVelocity, shifted, type KmPerS, type VacuumNm } from '@foreveil/shared';
import type { CurveData } from '../../../plot/curve-data.js';
import type { Pen } from '../../../plot/curve-paths.js';
import { lowerBound } from '../../../plot/pyramid.js';

/** Normalised flux around a line, on the velocity axis of that line. */
export interface VelocityProfile {
  /** km/s, ascending */
  readonly velocity: Float64Array;
  readonly flux: Float32Array;
  readonly bad: Uint8Array;
}

/** More samples than this in one small panel are thinned by taking the lowest of each group (the highest, of a peak). */
const MOST_SAMPLES = 240;

/** @returns null where the spectrum has no good sample within the range */
export function velocityProfile(
  data: CurveData,
  restNm: number,
  from: number,
  to: number,
  kind: 'dip' | 'peak' = 'dip',
): VelocityProfile | null {
  if (!data.fitted) return null;
  const first = lowerBound(data.wavelength, shifted(restNm as VacuumNm, from as KmPerS));
  const end = lowerBound(data.wavelength, shifted(restNm as VacuumNm, to as KmPerS));
  const group = Math.max(1, Math.ceil((end - first) / MOST_SAMPLES));
  const n = Math.floor((end - first) / group);
  const profile = { velocity: new Float64Array(n), flux: new Float32Array(n), bad: new Uint8Array(n).fill(1) };
  for (let k = 0; k < n; k++) {
    const start = first + k * group;
    profile.velocity[k] = dopplerVelocity(data.wavelength[start + (group >> 1)]! as VacuumNm, restNm as VacuumNm);
    profile.flux[k] = NaN;
    for (let i = start; i < start + group; i++) {
      const value = data.fitted.normalised.values[i]!;
      const kept = profile.flux[k]!;
      if (data.bad[i] || Number.isNaN(value) || (kind === 'dip' ? value > kept : value < kept)) continue;
      profile.flux[k] = value;
      profile.bad[k] = 0;
    }
  }
  return profile.bad.includes(0) ? profile : null;
}

/** Collects a path as SVG path data. */
export class SvgPen implements Pen {
  private readonly data: string[] = [];
  moveTo(x: number, y: number) {
    this.data.push(`M${x.toFixed(1)},${y.toFixed(1)}`);
  }
  lineTo(x: number, y: number) {
    this.data.push(`L${x.toFixed(1)},${y.toFixed(1)}`);
  }
  closePath() {
    this.data.push('z');
  }
  toString() {
    return this.data.join('');
  }
}
