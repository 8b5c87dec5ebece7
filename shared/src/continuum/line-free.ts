import type { Binned } from './binned.js';

/** Scratch arrays of one run, as long as the spectrum. */
export interface Workspace {
  readonly level: Float64Array;
  /** 1 / sigma; 0 where bad */
  readonly inverseSigma: Float64Array;
  /** (flux - level) / sigma; 0 where bad */
  readonly residual: Float64Array;
  /** 1 where a sample is bad or belongs to a line, a band or an outlier */
  readonly rejected: Uint8Array;
  /** sums of residuals and of counts over cells of 1, 2, 4, ... samples; only one size at a time is held */
  readonly cellSum: Float64Array;
  readonly cellCount: Int32Array;
  readonly cellHit: Uint8Array;
}

export function makeWorkspace({ inverseSigma }: Binned): Workspace {
  const n = inverseSigma.length;
  return {
    level: new Float64Array(n),
    inverseSigma,
    residual: new Float64Array(n),
    rejected: new Uint8Array(n),
    cellSum: new Float64Array(n),
    cellCount: new Int32Array(n),
    cellHit: new Uint8Array(n),
  };
}

/** Level per sample, straight between the block edges (a smooth curve bends by less than 1e-4 in a block), and residuals from it. */
export function measureAgainst(
  edgeLevel: Float64Array,
  { wavelength, flux, inverseSigma, blocks }: Binned,
  { level, residual }: Workspace,
) {
  for (let b = 0; b < blocks.count; b++) {
    const left = blocks.edgeNm[b]!;
    const base = edgeLevel[b]!;
    const width = blocks.edgeNm[b + 1]! - left;
    const slope = width > 0 ? (edgeLevel[b + 1]! - base) / width : 0;
    for (let i = blocks.first[b]!, end = blocks.first[b + 1]!; i < end; i++) {
      const l = base + slope * (wavelength[i]! - left);
      const inverse = inverseSigma[i]!;
      level[i] = l;
      residual[i] = inverse === 0 ? 0 : (flux[i]! - l) * inverse;
    }
  }
}

/** Thresholds of one round of rejection. */
export interface Rejection {
  /** significance beyond which a box that lies low (high) is rejected, sigma */
  readonly sigmasDown: number;
  readonly sigmasUp: number;
  /** mean relative departure below which a box of several samples is kept whatever its significance */
  readonly floorDown: number;
  readonly floorUp: number;
  /** variance of a mean of many correlated samples over that of independent ones */
  readonly inflation: number;
}

/**
 * Marks every sample that lies in a box whose mean residual is significant, for boxes of 1, 2, 4, 8, ... samples overlapping by half:
 * narrow lines are found by narrow boxes and then no longer disturb the wide ones, which find wings and bands. With equal thresholds up
 * and down pure noise is cut evenly and its mean is not moved. Each size costs half of the one before.
 */
export function rejectBoxes(space: Workspace, rule: Rejection) {
  const { residual, inverseSigma, rejected, cellSum, cellCount } = space;
  const n = residual.length;
  const low = -rule.sigmasDown;
  const high = rule.sigmasUp;
  for (let i = 0; i < n; i++) {
    const z = residual[i]!;
    const kept = inverseSigma[i] !== 0 && z >= low && z <= high;
    rejected[i] = kept ? 0 : 1;
    cellSum[i] = kept ? z : 0;
    cellCount[i] = kept ? 1 : 0;
  }
  for (let size = 1, cells = n; cells >= 4; size *= 2) {
    rejectPairs(space, cells, size, rule);
    cells = mergePairs(cellSum, cellCount, cells);
  }
}

function mergePairs(cellSum: Float64Array, cellCount: Int32Array, cells: number): number {
  const whole = cells >> 1;
  for (let c = 0; c < whole; c++) {
    cellSum[c] = cellSum[2 * c]! + cellSum[2 * c + 1]!;
    cellCount[c] = cellCount[2 * c]! + cellCount[2 * c + 1]!;
  }
  if (cells & 1) {
    cellSum[whole] = cellSum[cells - 1]!;
    cellCount[whole] = cellCount[cells - 1]!;
  }
  return (cells + 1) >> 1;
}

/** Rejects neighbouring cells whose common mean is significant; a box of which less than a third is left is not judged. */
function rejectPairs(space: Workspace, cells: number, size: number, rule: Rejection) {
  const { level, inverseSigma, rejected, cellSum, cellCount, cellHit } = space;
  const n = level.length;
  const down = rule.sigmasDown * rule.sigmasDown * rule.inflation;
  const up = rule.sigmasUp * rule.sigmasUp * rule.inflation;
  const either = Math.min(down, up);
  const fewest = (2 * size) / 3;
  let first = cells;
  let last = 0;
  let sum = cellSum[0]!;
  let count = cellCount[0]!;
  for (let c = 0; c + 1 < cells; c++) {
    const nextSum = cellSum[c + 1]!;
    const nextCount = cellCount[c + 1]!;
    const m = count + nextCount;
    const s = sum + nextSum;
    sum = nextSum;
    count = nextCount;
    if (s * s < either * m || s * s < (s < 0 ? down : up) * m || m < fewest) continue;
    const middle = Math.min(n - 1, (c + 1) * size);
    if (Math.abs(s) < (s < 0 ? rule.floorDown : rule.floorUp) * m * Math.abs(level[middle]!) * inverseSigma[middle]!) continue;
    cellHit[c] = cellHit[c + 1] = 1;
    if (c < first) first = c;
    last = c + 1;
  }
  for (let c = first; c <= last; c++) {
    if (cellHit[c] === 0) continue;
    cellHit[c] = 0;
    cellSum[c] = 0;
    cellCount[c] = 0;
    for (let i = c * size, end = Math.min(n, i + size); i < end; i++) rejected[i] = 1;
  }
}
