import type { Feature } from '@foreveil/shared';

export interface Decided {
  readonly id: string;
  readonly kind: Feature['kind'];
  readonly wavelengthNm: number;
  readonly fwhmNm: number;
}
type Found = Pick<Feature, 'index' | 'kind' | 'wavelengthNm'>;

/**
 * Which feature of a new analysis each decision belongs to: the nearest of its kind within half the width that the feature had when it was
 * decided on. Each feature takes one decision, the nearest; decisions that find none are not in the answer.
 */
export function reattach(decisions: readonly Decided[], features: readonly Found[]): Map<string, number> {
  const pairs = decisions.flatMap((decision) =>
    features
      .filter(({ kind, wavelengthNm }) => kind === decision.kind && Math.abs(wavelengthNm - decision.wavelengthNm) <= decision.fwhmNm / 2)
      .map(({ index, wavelengthNm }) => ({ id: decision.id, index, distance: Math.abs(wavelengthNm - decision.wavelengthNm) })),
  );
  pairs.sort((a, b) => a.distance - b.distance);
  const taken = new Set<number>();
  const places = new Map<string, number>();
  for (const { id, index } of pairs) {
    if (places.has(id) || taken.has(index)) continue;
    places.set(id, index);
    taken.add(index);
  }
  return places;
}
