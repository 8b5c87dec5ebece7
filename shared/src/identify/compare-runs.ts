import type { Analysis, Feature } from './analysis.js';

/** A feature of both runs whose first reading is another one now; null: unidentified. */
export interface Renamed {
  readonly before: Feature;
  readonly after: Feature;
  readonly was: string | null;
  readonly is: string | null;
}

/** What one run of a spectrum found that the other did not. Features are the same when of one kind and nearest within half a width. */
export interface RunChanges {
  readonly gained: readonly Feature[];
  readonly lost: readonly Feature[];
  readonly renamed: readonly Renamed[];
  readonly same: number;
}

/** The first reading when it is better than "unidentified": 'Na I 589.158 nm, interstellar'; null otherwise. */
function readingOf({ candidates: [best], unidentifiedProbability }: Feature): { lineId: string; family: string; words: string } | null {
  if (!best || best.probability <= unidentifiedProbability) return null;
  return { lineId: best.lineId, family: best.family, words: `${best.species} ${best.restNm.toFixed(3)} nm, ${best.family}` };
}

export function compareRuns(before: Pick<Analysis, 'features'>, after: Pick<Analysis, 'features'>): RunChanges {
  const pairs = pairsOf(before.features, after.features);
  const [old, fresh] = [new Set(pairs.map(([a]) => a)), new Set(pairs.map(([, b]) => b))];
  const renamed = pairs.flatMap(([a, b]): Renamed[] => {
    const [was, is] = [readingOf(a), readingOf(b)];
    const isSame = was?.lineId === is?.lineId && was?.family === is?.family;
    return isSame ? [] : [{ before: a, after: b, was: was?.words ?? null, is: is?.words ?? null }];
  });
  return {
    gained: after.features.filter((f) => !fresh.has(f)),
    lost: before.features.filter((f) => !old.has(f)),
    renamed,
    same: pairs.length - renamed.length,
  };
}

/** Features of both, each once, the nearest two together; in and out, all ascend in wavelength. */
function pairsOf(before: readonly Feature[], after: readonly Feature[]): [Feature, Feature][] {
  const near: { a: Feature; b: Feature; distance: number }[] = [];
  let start = 0;
  const widest = before.reduce((most, f) => Math.max(most, f.fwhmNm), 0);
  for (const a of before) {
    while (start < after.length && after[start]!.wavelengthNm < a.wavelengthNm - widest) start++;
    for (let i = start; i < after.length && after[i]!.wavelengthNm <= a.wavelengthNm + a.fwhmNm / 2; i++) {
      const distance = Math.abs(after[i]!.wavelengthNm - a.wavelengthNm);
      if (after[i]!.kind === a.kind && distance <= a.fwhmNm / 2) near.push({ a, b: after[i]!, distance });
    }
  }
  const taken = new Set<Feature>();
  const pairs: [Feature, Feature][] = [];
  for (const { a, b } of near.sort((p, q) => p.distance - q.distance)) {
    if (taken.has(a) || taken.has(b)) continue;
    taken.add(a).add(b);
    pairs.push([a, b]);
  }
  return pairs.sort(([p], [q]) => p.wavelengthNm - q.wavelengthNm);
}
