import type { Blocks } from './blocks.js';

/** Scratch arrays of one run, as long as the spectrum. */
export interface Workspace {
  readonly level: Float64Array;
  /** (flux - level) / sigma; 0 where bad */
  readonly residual: Float64Array;
  /** running sums over the samples still kept, one longer than the spectrum */
  readonly sum: Float64Array;
  readonly count: Int32Array;
  /** 1 where a sample is bad or belongs to a line, a band or an outlier */
  readonly rejected: Uint8Array;
}

export const makeWorkspace = (n: number): Workspace => ({
  level: new Float64Array(n),
  residual: new Float64Array(n),
  sum: new Float64Array(n + 1),
  count: new Int32Array(n + 1),
  rejected: new Uint8Array(n),
});

/** Level between block edges, straight in wavelength: blocks are so narrow that a smooth curve bends by less than 1e-5 in them. */
export function interpolateLevel(out: Float64Array, wavelength: Float64Array, blocks: Blocks, edgeLevel: Float64Array) {
  for (let b = 0; b < blocks.count; b++) {
    const left = blocks.edgeNm[b]!;
    const base = edgeLevel[b]!;
    const slope = (edgeLevel[b + 1]! - base) / (blocks.edgeNm[b + 1]! - left);
    for (let i = blocks.first[b]!, end = blocks.first[b + 1]!; i < end; i++) out[i] = base + slope * (wavelength[i]! - left);
  }
}

/** Thresholds of one round of rejection. */
export interface Rejection {
  /** box widths in samples, ascending */
  readonly widths: readonly number[];
  /** significance beyond which a box is rejected, sigma */
  readonly sigmas: number;
  /** mean relative departure below which a box is kept whatever its significance */
  readonly floor: number;
  /** variance of a mean of many correlated samples over that of independent ones */
  readonly inflation: number;
}

/**
 * Marks every sample that lies in a box whose mean residual is significant, for a ladder of box widths from narrow to wide: narrow
 * lines are found by narrow boxes and then no longer disturb the wide ones, which find wings and bands. Both signs alike, so that
 * pure noise is cut evenly and its mean is not moved.
 */
export function rejectBoxes(space: Workspace, sigma: Float64Array, bad: Uint8Array, rule: Rejection) {
  const { level, sum, count, rejected } = space;
  const n = level.length;
  rejected.set(bad);
  for (const width of rule.widths) {
    if (width > n / 4) break;
    runningSums(space);
    const before = width >> 1;
    const after = width - before;
    const floor = width > 2 ? rule.floor : 0;
    const variance = rule.sigmas * rule.sigmas * (width > 2 ? rule.inflation : 1);
    let marked = 0;
    for (let i = 0; i < n; i++) {
      const a = i < before ? 0 : i - before;
      const b = i + after > n ? n : i + after;
      const m = count[b]! - count[a]!;
      const s = sum[b]! - sum[a]!;
      if (s * s < variance * m || 3 * m < width) continue;
      if (Math.abs(s) * sigma[i]! < floor * m * Math.abs(level[i]!)) continue;
      rejected.fill(1, a > marked ? a : marked, b);
      marked = b;
    }
  }
}

function runningSums({ residual, rejected, sum, count }: Workspace) {
  let s = 0;
  let m = 0;
  for (let i = 0; i < residual.length; i++) {
    if (!rejected[i]) {
      s += residual[i]!;
      m++;
    }
    sum[i + 1] = s;
    count[i + 1] = m;
  }
}
