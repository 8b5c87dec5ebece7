import { fitBlend, newComponent, rangeOf, ROUGH, settle, withCore, type Component, type NormalisedSamples } from '../profiles/index.js';
import type { LineModel } from './model.js';
import { near, rotating, type Rotation } from './rotation.js';

const PASSES = 8;

/**
 * Takes out components that the joint fit no longer supports, of those that overlap only the weakest at a time: where three stand for two,
 * none looks significant, and two of them are.
 */
export function pruneWeak(model: LineModel, threshold: number): void {
  for (let pass = 0; pass < PASSES; pass++) {
    const weak = model.components
      .map((c) => ({ c, worth: worthOf(c, model) }))
      .filter(({ worth }) => !(worth > threshold))
      .sort((a, b) => a.worth - b.worth);
    const gone = new Set<Component>();
    for (const { c } of weak) if (pass === PASSES - 1 || ![...gone].some((g) => overlap(g, c))) gone.add(c);
    if (gone.size === 0) return;
    const touched = new Set(model.components.filter((c) => !gone.has(c) && [...gone].some((g) => overlap(g, c))));
    model.remove(gone);
    model.refit(1, touched, ROUGH);
  }
}

/**
 * Significance; nothing for what is no line at all: a dip narrower than the instrument allows, or what takes back what another one gives.
 * A peak that narrow is a cosmic ray, and is kept to be flagged.
 */
function worthOf(c: Component, model: LineModel): number {
  const tooNarrow = c.kind === 'dip' && c.fwhm <= model.limitsAt(c.centre).narrowest * 1.001;
  const impossible = tooNarrow || c.amplitude <= 0 || !(c.sigmaAmplitude > 0);
  return impossible || model.overlapping([c]).some((o) => cancels(o, c)) ? 0 : c.amplitude / c.sigmaAmplitude;
}

/** Whether a dip and a peak of one place and width stand against each other: any amount of both fits as well. */
const cancels = (o: Component, c: Component): boolean =>
  o.kind !== c.kind && o.amplitude >= c.amplitude && Math.abs(o.centre - c.centre) < 0.25 * c.fwhm && near(o.fwhm, c.fwhm, 1.3);

const overlap = (a: Component, b: Component): boolean => Math.abs(a.centre - b.centre) < 1.5 * (a.fwhm + b.fwhm);

const NEEDED_SIGNIFICANCE = 45; // stronger components are beyond doubt
const NEIGHBOURS = 3;

/**
 * Takes out components that a stronger neighbour can stand for: wings and corners of profiles that are not quite right. Both fits are
 * weighed with the profile error allowed for beside strong lines, so that a misfit of a few per cent is no feature.
 */
export function dropNeedless(model: LineModel, threshold: number, tolerant: NormalisedSamples, rotation: Rotation | null): void {
  const weakFirst = [...model.components].sort(
    (a, b) => a.amplitude / a.sigmaAmplitude - b.amplitude / b.sigmaAmplitude || a.centre - b.centre,
  );
  const gone = new Set<Component>();
  for (const c of weakFirst) {
    if (c.amplitude / c.sigmaAmplitude > NEEDED_SIGNIFICANCE) break;
    const strong = model
      .overlapping([c])
      .filter(
        (o) =>
          !gone.has(o) &&
          o.kind === c.kind &&
          o.amplitude * o.area > 1.5 * c.amplitude * c.area &&
          Math.abs(o.centre - c.centre) < 0.7 * (o.fwhm + c.fwhm),
      )
      .sort((a, b) => Math.abs(a.centre - c.centre) / a.fwhm - Math.abs(b.centre - c.centre) / b.fwhm)
      .slice(0, NEIGHBOURS);
    if (strong.length === 0) continue;
    const others = model.overlapping([c, ...strong]).filter((o) => !gone.has(o));
    const limits = model.limitsAt(c.centre);
    const range = rangeOf([c, ...strong.filter((o) => !o.damped)]);
    const wide = [Math.min(range[0], c.centre - 2 * c.fwhm), Math.max(range[1], c.centre + 2 * c.fwhm)] as const;
    const withIt = fitBlend(tolerant, [{ ...c }, ...strong.map((o) => ({ ...o }))], others, limits, wide);
    let alone = strong.map((o) => ({ ...o }));
    let without = fitBlend(tolerant, alone, others, limits, wide).chi2;
    if (rotation && without - withIt.chi2 > threshold * threshold) {
      const turned = strong.map((o) =>
        o.damped || !near(o.fwhm / o.centre, rotation.relativeWidth, 1.8) ? { ...o } : withCore(o, rotating(rotation, o.fwhm / o.centre)),
      );
      const chi2 = fitBlend(tolerant, turned, others, limits, wide).chi2;
      if (chi2 < without) [alone, without] = [turned, chi2];
    }
    if (without - withIt.chi2 > threshold * threshold) continue;
    gone.add(c);
    strong.forEach((o, k) => Object.assign(o, alone[k]));
  }
  model.remove(gone);
}

/**
 * Takes out a component that bridges two narrower ones where these, free to widen, do without it: what the first rounds make of two lines
 * hardly apart is one broad dip with two cores on it.
 */
export function dropBridges(model: LineModel, threshold: number, tolerant: NormalisedSamples): void {
  const gone = new Set<Component>();
  for (const c of model.components) {
    const inner = model
      .overlapping([c])
      .filter((o) => !gone.has(o) && o.kind === c.kind && 1.3 * o.fwhm < c.fwhm && Math.abs(o.centre - c.centre) < 0.6 * c.fwhm);
    if (inner.length !== 2 || !inner.some((o) => o.centre < c.centre) || !inner.some((o) => o.centre > c.centre)) continue;
    const others = model.overlapping([c, ...inner]).filter((o) => !gone.has(o));
    const limits = model.limitsAt(c.centre);
    const range = rangeOf([c, ...inner]);
    const three = fitBlend(tolerant, [{ ...c }, ...inner.map((o) => ({ ...o }))], others, limits, range);
    const pair = inner.map((o) => newComponent(o.kind, o.centre, 1.4 * o.fwhm, Math.min(o.amplitude + 0.5 * c.amplitude, 0.95), o.core));
    const two = fitBlend(tolerant, pair, others, limits, range);
    if (two.chi2 > three.chi2 + threshold * threshold) continue;
    gone.add(c);
    inner.forEach((o, k) => Object.assign(o, pair[k]));
  }
  model.remove(gone);
}

/** Replaces two overlapping components by one where the data do not need both. */
export function mergeShreds(model: LineModel, threshold: number, tolerant: NormalisedSamples): void {
  const penalty = threshold * threshold;
  for (let pass = 0; pass < 3; pass++) {
    let merged = 0;
    for (let i = 0; i + 1 < model.components.length; i++) {
      const a = model.components[i]!;
      const b = model.components[i + 1]!;
      const [narrow, wide] = a.fwhm < b.fwhm ? [a.fwhm, b.fwhm] : [b.fwhm, a.fwhm];
      if (a.kind !== b.kind || b.centre - a.centre > 0.75 * wide || wide > 3 * narrow) continue;
      const others = model.overlapping([a, b]);
      const limits = model.limitsAt(a.centre);
      const pair = [{ ...a }, { ...b }];
      const range = rangeOf(pair);
      const two = fitBlend(tolerant, pair, others, limits, range);
      const one = together(a, b);
      const single = fitBlend(tolerant, [one], others, limits, range);
      if (single.chi2 > two.chi2 + penalty) continue;
      model.components.splice(i, 2, one);
      merged++;
    }
    if (!merged) return;
  }
}

/** A starting point for one component in place of two. */
function together(a: Component, b: Component): Component {
  const one = { ...(a.amplitude * a.area > b.amplitude * b.area ? a : b) };
  if (one.damped) return one;
  one.centre = (a.centre * a.amplitude + b.centre * b.amplitude) / (a.amplitude + b.amplitude);
  one.scale = Math.max(a.fwhm, b.fwhm) + 0.5 * (b.centre - a.centre);
  one.amplitude = Math.max(a.amplitude, b.amplitude);
  settle(one);
  return one;
}

const NARROW = 5; // resolution elements: two lines side by side may pass for one with a flat bottom

/** Splits a component in two where two fit much better and lie far enough apart to be told from each other. */
export function splitBlends(model: LineModel, threshold: number, resolvingPower: number): void {
  const penalty = 1.5 * threshold * threshold;
  const fresh: Component[] = [];
  const gone = new Set<Component>();
  for (const c of model.components) {
    const element = c.centre / resolvingPower;
    if (c.fwhm < 1.25 * element || c.amplitude / c.sigmaAmplitude < 12 || (c.damped && c.fwhm > NARROW * element)) continue;
    const others = model.overlapping([c]);
    const limits = model.limitsAt(c.centre);
    const range = rangeOf([c]);
    const one = fitBlend(model.data, [{ ...c }], others, limits, range);
    const pair = [-1, 1].map((side) =>
      newComponent(c.kind, c.centre + side * 0.35 * c.fwhm, Math.max(0.6 * c.fwhm, element), 0.7 * c.amplitude, c.core),
    );
    const two = fitBlend(model.data, pair, others, limits, range);
    const [a, b] = pair as [Component, Component];
    const apart = Math.abs(b.centre - a.centre) > 0.8 * Math.min(a.fwhm, b.fwhm);
    const strong = pair.every((p) => p.amplitude / p.sigmaAmplitude > threshold);
    if (!apart || !strong || two.chi2 > one.chi2 - penalty) continue;
    gone.add(c);
    fresh.push(a, b);
  }
  model.remove(gone);
  model.add(fresh);
}
