import type { Segment } from '../spectrum/index.js';

/** Stretches of neighbouring samples of one piece, in ascending order of wavelength; one segment when there is one piece. */
export function segmentsOf(piece: Uint16Array | null, names: readonly string[], points: number): Segment[] {
  if (piece === null) return [{ from: 0, to: points, name: 'all' }];
  const segments: Segment[] = [];
  let from = 0;
  for (let i = 1; i <= points; i++) {
    if (i < points && piece[i] === piece[from]) continue;
    segments.push({ from, to: i, name: names[piece[from]!] ?? '' });
    from = i;
  }
  return segments;
}
