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
const BROAD = 2.2; // in resolution elements

/** Broad strong lines get the shape the data prefer: rotation-broadened, winged, or Gaussian. */
export function trySpecialShapes(model: LineModel, resolvingPower: number): void {
  const broad = model.components.filter((c) => c.kind === 'dip' && c.fwhm > (BROAD * c.centre) / resolvingPower && c.amplitude / c.sigmaAmplitude > SPECIAL_SIGNIFICANCE);
  if (broad.length === 0) return;
  const rotation = rotationShapes(resolvingPower);
  for (const c of broad.sort((a, b) => b.fwhm - a.fwhm || a.centre - b.centre)) {
    const others = model.overlapping([c]);
    const limits = model.limitsAt(c.centre);
    const range = rangeOf([{ ...c, winged: true }]);
    let best: Component | null = null;
    let bestChi2 = Infinity;
    for (const trial of [variant(c, GAUSSIAN, false), variant(c, rotation(c), false), variant(c, GAUSSIAN, true), variant(c, rotation(c), true)]) {
      const { chi2 } = fitBlend(model.data, [trial], others, limits, range);
      const penalised = chi2 + (trial.winged ? 12 : 0);
      if (penalised < bestChi2 - 1e-9) [best, bestChi2] = [trial, penalised];
    }
    if (best) Object.assign(c, best);
  }
}

const variant = (c: Component, core: Shape, winged: boolean): Component => ({ ...c, core, winged, eta: winged ? Math.max(c.eta, 0.15) : 0 });

/** Rotation profiles by how much the instrument blurs them, made once per blur. */
function rotationShapes(resolvingPower: number): (c: Component) => Shape {
  const made = new Map<number, Shape>();
  return (c) => {
    const ratio = c.centre / resolvingPower / 2.3548 / (0.62 * c.fwhm);
    const key = Math.max(1, Math.round(ratio * 20));
    let shape = made.get(key);
    if (!shape) made.set(key, (shape = rotationShape(key / 20)));
    return shape;
  };
}

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
