import { newComponent, type Component } from '../profiles/index.js';
import type { LineModel } from './model.js';

/** A place where a person wants a feature gone, split, or fitted. */
export interface Place {
  readonly kind: 'dip' | 'peak';
  readonly wavelengthNm: number;
}

export interface HandEdits {
  readonly removed: readonly Place[];
  readonly split: readonly Place[];
  readonly added: readonly (Place & { readonly fwhmNm: number | null })[];
}

export interface EditedByHand {
  /** components that a person placed or split */
  readonly placed: ReadonlySet<Component>;
  /** what could not be done, in complete sentences */
  readonly notes: readonly string[];
}

/** Half the distance of the two starting places of a split, and their width, in widths of the one. */
const APART = 0.3;
const NARROWER = 0.65;
const START_DEPTH = 0.1;
const SWEEPS = 3;

/**
 * Takes features out of a finished detection, splits them, or fits new ones, then refits everything they overlap. What a person placed is
 * kept however weak, since the person said it is there; only a fit that finds nothing of its kind, or no error, is taken back with a note.
 */
export function editByHand(model: LineModel, { removed, split, added }: HandEdits, resolvingPower: number): EditedByHand {
  const notes: string[] = [];
  const placed = new Set<Component>();
  const gone = new Set<Component>();
  const fresh: Component[] = [];
  for (const place of removed) {
    const c = componentAt(model, place, gone);
    if (c) gone.add(c);
    else notes.push(`There is no ${place.kind} at ${nm(place)} to take out.`);
  }
  for (const place of split) {
    const c = componentAt(model, place, gone);
    if (!c) {
      notes.push(`There is no ${place.kind} at ${nm(place)} to split.`);
      continue;
    }
    gone.add(c);
    for (const side of [-1, 1])
      fresh.push(
        newComponent(c.kind, c.centre + side * APART * c.fwhm, Math.max(NARROWER * c.fwhm, c.centre / resolvingPower), 0.6 * c.amplitude),
      );
  }
  const { wavelength } = model.data;
  for (const place of added) {
    const at = place.wavelengthNm;
    if (at <= wavelength[0]! || at >= wavelength[wavelength.length - 1]!)
      notes.push(`${nm(place)} lies outside the spectrum: nothing was placed.`);
    else fresh.push(newComponent(place.kind, at, place.fwhmNm ?? at / resolvingPower, START_DEPTH));
  }
  if (gone.size + fresh.length === 0) return { placed, notes };
  const touched = new Set(fresh);
  for (const c of model.components)
    if (!gone.has(c) && [...gone, ...fresh].some((g) => Math.abs(g.centre - c.centre) < 1.2 * (g.fwhm + c.fwhm))) touched.add(c);
  model.remove(gone);
  model.add(fresh);
  model.refit(SWEEPS, touched);
  const empty = new Set(fresh.filter((c) => !holds(c)));
  for (const c of empty) notes.push(`The data show no ${c.kind} at ${nm({ wavelengthNm: c.centre })}: the one placed there was left out.`);
  if (empty.size) {
    model.remove(empty);
    model.refit(1, touched);
  }
  model.refresh();
  for (const c of fresh) if (!empty.has(c)) placed.add(c);
  return { placed, notes };
}

const nm = ({ wavelengthNm }: { readonly wavelengthNm: number }): string => `${wavelengthNm.toFixed(3)} nm`;

/** A fit with an amplitude of its kind and an error of everything. */
const holds = (c: Component): boolean =>
  c.amplitude > 0.2 * c.sigmaAmplitude &&
  [c.centre, c.fwhm, c.sigmaAmplitude, c.sigmaCentre, c.sigmaLogFwhm, c.sigmaEquivalentWidth].every(Number.isFinite);

/** The component of a kind nearest to a place, when the place lies within it. */
function componentAt(model: LineModel, { kind, wavelengthNm }: Place, gone: ReadonlySet<Component>): Component | null {
  let best: Component | null = null;
  for (const c of model.components) {
    if (c.kind !== kind || gone.has(c)) continue;
    const distance = Math.abs(c.centre - wavelengthNm);
    if (distance <= 0.6 * c.fwhm && (!best || distance < Math.abs(best.centre - wavelengthNm))) best = c;
  }
  return best;
}
