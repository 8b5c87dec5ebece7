import { lowerBound } from './pyramid.js';
import type { PlotFeature, Stave } from './plot-feature.js';
import type { Range } from './view.js';

export interface PlacedMark {
  readonly feature: PlotFeature;
  /** CSS px from the left end of the staff */
  readonly x: number;
  readonly labelled: boolean;
}

export interface StaveRow {
  readonly stave: Stave;
  readonly marks: readonly PlacedMark[];
  /** marks in view whose label found no room */
  readonly unlabelled: number;
  /** so many marks that they are drawn as ticks */
  readonly crowded: boolean;
}

/** CSS px: a label at 12 px runs about this wide a character. */
const CHARACTER_PX = 6.3;
const LABEL_GAP_PX = 9;
/** Room at the right end for the count of unlabelled marks. */
const COUNT_PX = 62;
/** Fewer CSS px a mark than this and a staff is crowded. */
const CROWDED_PX = 9;

const labelWidth = (label: string) => label.length * CHARACTER_PX;

/** Gives labels room by priority, the selected feature first; a label runs over no mark and no other label. */
function placeLabels(marks: { feature: PlotFeature; x: number }[], width: number, selected: number | null): Set<number> {
  const taken: [number, number][] = [];
  const labelled = new Set<number>();
  const rank = (f: PlotFeature) => (f.index === selected ? Infinity : f.priority);
  const xs = marks.map((m) => m.x);
  const right = marks.length > 1 ? width - COUNT_PX : width;
  for (const { feature, x } of [...marks].sort((a, b) => rank(b.feature) - rank(a.feature))) {
    const [from, to] = [x + LABEL_GAP_PX, x + LABEL_GAP_PX + labelWidth(feature.label)];
    const isSelected = feature.index === selected;
    const next = xs[lowerBound(xs, x + 0.01)] ?? Infinity;
    if (!isSelected && (to > right || next < to + 6 || taken.some(([a, b]) => from < b + 6 && to > a - 6))) continue;
    labelled.add(feature.index);
    taken.push([from, to]);
  }
  return labelled;
}

/**
 * What each staff shows of a stretch.
 * @param features ascending in wavelength
 * @param width of the staves, CSS px
 */
export function layoutStaves(
  staves: readonly Stave[],
  features: readonly PlotFeature[],
  { fromNm, toNm }: Range,
  width: number,
  selected: number | null,
): StaveRow[] {
  const centres = features.map((f) => f.wavelengthNm);
  const inView = features.slice(lowerBound(centres, fromNm), lowerBound(centres, toNm));
  return staves.map((stave) => {
    const marks = inView
      .filter((f) => f.staveId === stave.id)
      .map((feature) => ({ feature, x: ((feature.wavelengthNm - fromNm) / (toNm - fromNm)) * width }));
    const crowded = marks.length * CROWDED_PX > width;
    const labelled = crowded
      ? new Set(marks.filter((m) => m.feature.index === selected).map((m) => m.feature.index))
      : placeLabels(marks, width, selected);
    return {
      stave,
      marks: marks.map((m) => ({ ...m, labelled: labelled.has(m.feature.index) })),
      unlabelled: marks.length - labelled.size,
      crowded,
    };
  });
}
