import { fitBlend, GAUSSIAN, newComponent, rangeOf, rotationShape, type Component, type Shape } from '../profiles/index.js';
import type { LineModel } from './model.js';

/** Takes out components that the joint fit no longer supports. */
export function pruneWeak(model: LineModel, threshold: number): void {
  const gone = new Set<Component>();
  for (const c of model.components) {
    const significance = c.amplitude / c.sigmaAmplitude;
    const { narrowest } = model.limitsAt(c.centre);
    const impossible = c.amplitude <= 0 || !(significance > threshold) || c.fwhm <= narrowest * 1.001;
    if (impossible) gone.add(c);
  }
  if (gone.size === 0) return;
  const touched = new Set(model.components.filter((c) => !gone.has(c) && [...gone].some((g) => Math.abs(g.centre - c.centre) < 1.5 * (g.fwhm + c.fwhm))));
  model.remove(gone);
  model.refit(1, touched);
}

const SPECIAL_SIGNIFICANCE = 25; // a shape can be told from a Gaussian only in strong lines
const BROAD = 1.6; // in resolution elements
const SAME_WIDTH = 1.35; // lines of one rotating star agree in velocity width within this factor

/** What the broad lines of a rotating star have in common. */
export interface Rotation {
  /** FWHM over wavelength */
  readonly relativeWidth: number;
  readonly shape: Shape;
}

/**
 * Looks for a common velocity width among broad dips and asks whether rotation fits them better than Gaussians, all together.
 * @returns null when no width is shared or Gaussians serve as well
 */
export function findRotation(model: LineModel, resolvingPower: number): Rotation | null {
  const broad = model.components.filter((c) => c.kind === 'dip' && c.fwhm * resolvingPower > BROAD * c.centre && c.amplitude / c.sigmaAmplitude > 12);
  const width = commonWidth(broad);
  if (width === null) return null;
  const members = broad.filter((c) => near(c.fwhm / c.centre, width, SAME_WIDTH)).sort((a, b) => b.amplitude / b.sigmaAmplitude - a.amplitude / a.sigmaAmplitude);
  const shape = rotationOfWidth(width * resolvingPower);
  let gain = 0;
  for (const c of members.slice(0, 40)) {
    const others = model.overlapping([c]);
    const range = rangeOf([{ ...c, core: GAUSSIAN }]);
    const [g, r] = [GAUSSIAN, shape].map((core) => fitBlend(model.data, [{ ...c, core }], others, model.limitsAt(c.centre), range).chi2);
    gain += g! - r!;
  }
  return gain > 0 ? { relativeWidth: width, shape } : null;
}

const near = (a: number, b: number, factor: number): boolean => a < b * factor && a > b / factor;

/** The relative width that most components share, weighed by their strength; null when fewer than three agree. */
function commonWidth(broad: readonly Component[]): number | null {
  let best = 0;
  let at: number | null = null;
  for (const c of broad) {
    const alike = broad.filter((d) => near(d.fwhm / d.centre, c.fwhm / c.centre, 1.15));
    const weight = alike.reduce((sum, d) => sum + Math.sqrt(d.amplitude / d.sigmaAmplitude), 0);
    if (alike.length >= 3 && weight > best) {
      best = weight;
      at = alike.map((d) => d.fwhm / d.centre).sort((x, y) => x - y)[alike.length >> 1]!;
    }
  }
  return at;
}

const shapes = new Map<number, Shape>();

/** Rotation profile for a FWHM given in resolution elements; made once per blur. */
function rotationOfWidth(elements: number): Shape {
  const blur = 1 / 2.3548 / (0.62 * Math.max(elements, 1));
  const key = Math.max(1, Math.min(20, Math.round(blur * 20)));
  let shape = shapes.get(key);
  if (!shape) shapes.set(key, (shape = rotationShape(key / 20)));
  return shape;
}

/** Dips of the star's width take its rotation profile. */
export function applyRotation(components: readonly Component[], rotation: Rotation): void {
  for (const c of components) if (c.kind === 'dip' && near(c.fwhm / c.centre, rotation.relativeWidth, 1.6)) c.core = rotation.shape;
}

/** Broad strong dips get the shape the data prefer: rotation-broadened or Gaussian, with wings or without. */
export function trySpecialShapes(model: LineModel, resolvingPower: number): void {
  const broad = model.components.filter((c) => c.kind === 'dip' && c.fwhm * resolvingPower > BROAD * c.centre && c.amplitude / c.sigmaAmplitude > SPECIAL_SIGNIFICANCE);
  for (const c of broad.sort((a, b) => b.fwhm - a.fwhm || a.centre - b.centre)) {
    const others = model.overlapping([c]);
    const range = rangeOf([{ ...c, winged: true }]);
    const rotation = rotationOfWidth((c.fwhm * resolvingPower) / c.centre);
    let best: Component | null = null;
    let bestChi2 = Infinity;
    for (const trial of [variant(c, GAUSSIAN, false), variant(c, rotation, false), variant(c, GAUSSIAN, true), variant(c, rotation, true)]) {
      const { chi2 } = fitBlend(model.data, [trial], others, model.limitsAt(c.centre), range);
      const penalised = chi2 + (trial.winged ? 12 : 0);
      if (penalised < bestChi2 - 1e-9) [best, bestChi2] = [trial, penalised];
    }
    if (best) Object.assign(c, best);
  }
}

const variant = (c: Component, core: Shape, winged: boolean): Component => ({ ...c, core, winged, eta: winged ? Math.max(c.eta, 0.15) : 0 });

/** Replaces two overlapping components by one where the data do not need both. */
export function mergeShreds(model: LineModel, threshold: number): void {
  const penalty = threshold * threshold;
  for (let pass = 0; pass < 3; pass++) {
    let merged = 0;
    for (let i = 0; i + 1 < model.components.length; i++) {
      const a = model.components[i]!;
      const b = model.components[i + 1]!;
      if (a.kind !== b.kind || b.centre - a.centre > 0.75 * Math.max(a.fwhm, b.fwhm) || Math.max(a.fwhm, b.fwhm) > 3 * Math.min(a.fwhm, b.fwhm)) continue;
      const others = model.overlapping([a, b]);
      const limits = model.limitsAt(a.centre);
      const pair = [{ ...a }, { ...b }];
      const range = rangeOf(pair);
      const two = fitBlend(model.data, pair, others, limits, range);
      const one = { ...(a.amplitude * a.fwhm > b.amplitude * b.fwhm ? a : b) };
      one.centre = (a.centre * a.amplitude + b.centre * b.amplitude) / (a.amplitude + b.amplitude);
      one.fwhm = Math.max(a.fwhm, b.fwhm) + 0.5 * (b.centre - a.centre);
      one.amplitude = Math.max(a.amplitude, b.amplitude);
      const single = fitBlend(model.data, [one], others, limits, range);
      if (single.chi2 > two.chi2 + penalty) continue;
      model.components.splice(i, 2, one);
      merged++;
    }
    if (!merged) return;
  }
}

/** Splits a component in two where two fit much better and lie far enough apart to be told from each other. */
export function splitBlends(model: LineModel, threshold: number, resolvingPower: number): void {
  const penalty = 1.5 * threshold * threshold;
  const fresh: Component[] = [];
  const gone = new Set<Component>();
  for (const c of model.components) {
    const element = c.centre / resolvingPower;
    if (c.fwhm < 1.25 * element || c.amplitude / c.sigmaAmplitude < 12 || c.winged) continue;
    const others = model.overlapping([c]);
    const limits = model.limitsAt(c.centre);
    const range = rangeOf([c]);
    const one = fitBlend(model.data, [{ ...c }], others, limits, range);
    const pair = [-1, 1].map((side) => ({ ...newComponent(c.kind, c.centre + side * 0.35 * c.fwhm, Math.max(0.6 * c.fwhm, element), 0.7 * c.amplitude), core: c.core }));
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
