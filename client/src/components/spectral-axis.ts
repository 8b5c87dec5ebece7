export interface Range {
  readonly fromNm: number;
  readonly toNm: number;
}
/** A stretch of wavelengths and where it lies on the axis, as fractions of its width. */
export interface AxisPiece extends Range {
  readonly start: number;
  readonly end: number;
}

/** Stretches are compared by the logarithm of the wavelength ratio they span, so that infrared nanometres do not outweigh all others. */
const span = ({ fromNm, toNm }: Range): number => Math.min(MOST_SPAN, Math.log(toNm / fromNm));
/** A piece counts no more than this, a factor of e. */
const MOST_SPAN = 1;
/** Uncovered stretches longer than this share of what is covered are folded away. */
const FOLD_ABOVE = 0.25;
/** Width of a fold, and room at the ends of each piece so that tick labels do not touch. */
const FOLD_WIDTH = 0.04;
const PAD = 0.015;
const LEAST_WIDTH = 0.1;

/** Ranges joined where they overlap or nearly meet, ascending. */
function joined(ranges: readonly Range[]): Range[] {
  const sorted = [...ranges].filter(({ fromNm, toNm }) => fromNm > 0 && toNm > fromNm).sort((a, b) => a.fromNm - b.fromNm);
  const unions = merge(sorted, 0);
  const covered = unions.reduce((sum, range) => sum + span(range), 0);
  return merge(unions, covered * FOLD_ABOVE);
}

function merge(sorted: readonly Range[], reach: number): Range[] {
  const out: Range[] = [];
  for (const range of sorted) {
    const last = out.at(-1);
    if (last && Math.log(range.fromNm / last.toNm) <= reach)
      out[out.length - 1] = { fromNm: last.fromNm, toNm: Math.max(last.toNm, range.toNm) };
    else out.push(range);
  }
  return out;
}

/**
 * One axis for all `ranges`: linear within a piece, long uncovered stretches folded. Pieces share the width by what they span,
 * up to a factor of e, so that an infrared spectrum does not crush the others.
 */
export function foldAxis(ranges: readonly Range[]): AxisPiece[] {
  const parts = joined(ranges).map(({ fromNm, toNm }) => {
    const pad = (toNm / fromNm) ** PAD;
    return { fromNm: fromNm / pad, toNm: toNm * pad };
  });
  const weights = parts.map(span);
  const total = weights.reduce((sum, w) => sum + w, 0);
  const floored = weights.map((w) => Math.max(LEAST_WIDTH, w / total));
  const scale = (1 - FOLD_WIDTH * (parts.length - 1)) / floored.reduce((sum, w) => sum + w, 0);
  let start = 0;
  return parts.map((part, i) => {
    const end = start + floored[i]! * scale;
    const piece = { ...part, start, end };
    start = end + FOLD_WIDTH;
    return piece;
  });
}

/** Where a wavelength lies on the axis, 0 to 1; null when it is folded away. */
export function placeOf(nm: number, axis: readonly AxisPiece[]): number | null {
  const piece = axis.find(({ fromNm, toNm }) => nm >= fromNm && nm <= toNm);
  return piece ? piece.start + ((nm - piece.fromNm) / (piece.toNm - piece.fromNm)) * (piece.end - piece.start) : null;
}

/** Spectra side by side in as few lanes as their overlaps allow, widest first. */
export function lanes<R extends Range>(ranges: readonly R[], most: number): R[][] {
  const out: R[][] = [];
  for (const range of [...ranges].sort((a, b) => b.toNm - b.fromNm - (a.toNm - a.fromNm))) {
    const free = out.find((lane) => lane.every(({ fromNm, toNm }) => range.fromNm >= toNm || range.toNm <= fromNm));
    if (free) free.push(range);
    else if (out.length < most) out.push([range]);
  }
  return out;
}
