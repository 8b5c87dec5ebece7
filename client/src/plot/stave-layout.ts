import { lowerBound } from './pyramid.js';
import type { PlotFeature, Stave } from './plot-feature.js';
import type { Range } from './view.js';

/** How a line shows on its staff: as a mark with or without its label, or as a tick where a weightier mark covers the place. */
export type Standing = 'labelled' | 'mark' | 'tick';

export interface PlacedMark {
  readonly feature: PlotFeature;
  /** CSS px from the left end of the staff */
  readonly x: number;
  readonly standing: Standing;
}

export interface StaveRow {
  readonly stave: Stave;
  readonly marks: readonly PlacedMark[];
  /** lines in view whose label found no room */
  readonly unlabelled: number;
}

/** CSS px: a label at 12 px runs about this wide a character. */
const CHARACTER_PX = 6.3;
const LABEL_GAP_PX = 9;
/** A label that only repeats one nearer than this says nothing. */
const REPEAT_PX = 150;
/** Marks nearer than this cover each other. */
const COVERED_PX = 7;

export const labelWidth = (label: string) => label.length * CHARACTER_PX;

interface Spot {
  readonly feature: PlotFeature;
  readonly x: number;
}
type Label = { from: number; to: number; text: string };

const clashes = (other: Label, { from, to, text }: Label) => {
  const room = other.text === text ? REPEAT_PX : 6;
  return from < other.to + room && to > other.from - room;
};

/** Which spots keep a whole mark: by weight, none covering another. */
function uncovered(byWeight: readonly Spot[]): Set<number> {
  const kept: Spot[] = [];
  for (const spot of byWeight) if (!kept.some(({ x }) => Math.abs(x - spot.x) < COVERED_PX)) kept.push(spot);
  return new Set(kept.map(({ feature }) => feature.index));
}

/** Which marks get their label: by weight; a label runs over no mark, no other label and not over the end. */
function labelled(byWeight: readonly Spot[], marks: ReadonlySet<number>, width: number, selected: number | null): Set<number> {
  const xs = byWeight
    .filter(({ feature }) => marks.has(feature.index))
    .map(({ x }) => x)
    .sort((a, b) => a - b);
  const taken: Label[] = [];
  const out = new Set<number>();
  for (const { feature, x } of byWeight) {
    if (!marks.has(feature.index)) continue;
    const from = x + LABEL_GAP_PX;
    const label: Label = { from, to: from + labelWidth(feature.label), text: feature.label };
    const next = xs[lowerBound(xs, x + 0.01)] ?? Infinity;
    const hasRoom = label.to <= width && next >= label.to + 9 && !taken.some((other) => clashes(other, label));
    if (!hasRoom && feature.index !== selected) continue;
    out.add(feature.index);
    taken.push(label);
  }
  return out;
}

function layoutStave(stave: Stave, spots: readonly Spot[], width: number, selected: number | null): StaveRow {
  const weight = ({ feature }: Spot) => (feature.index === selected ? Infinity : feature.priority);
  const byWeight = [...spots].sort((a, b) => weight(b) - weight(a));
  const marks = uncovered(byWeight);
  const labels = labelled(byWeight, marks, width, selected);
  const standing = (index: number): Standing => (labels.has(index) ? 'labelled' : marks.has(index) ? 'mark' : 'tick');
  return { stave, marks: spots.map((s) => ({ ...s, standing: standing(s.feature.index) })), unlabelled: spots.length - labels.size };
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
  const spots = inView.map((feature) => ({ feature, x: ((feature.wavelengthNm - fromNm) / (toNm - fromNm)) * width }));
  return staves.map((stave) =>
    layoutStave(
      stave,
      spots.filter(({ feature }) => feature.staveId === stave.id),
      width,
      selected,
    ),
  );
}
