import {
  asDamped,
  chi2Of,
  fitBlend,
  indexAt,
  GAUSSIAN,
  newComponent,
  rangeOf,
  rotationOfBlur,
  rotationOfWidth,
  ROUGH,
  settle,
  withCore,
  type Component,
  type NormalisedSamples,
  type Shape,
} from '../profiles/index.js';
import { median } from '../numeric/select.js';
import type { LineModel } from './model.js';

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

const SPECIAL_SIGNIFICANCE = 25; // a shape can be told from a Gaussian only in strong lines
const BROAD = 1.6; // in resolution elements
const SAME_WIDTH = 1.35; // lines of one rotating star agree in velocity width within this factor

/** What the broad lines of a rotating star have in common. */
export interface Rotation {
  /** median FWHM over wavelength */
  readonly relativeWidth: number;
  /** v sin i over the speed of light */
  readonly vsini: number;
}

/** The star's profile for a line of given FWHM over wavelength. */
export const rotating = (rotation: Rotation, relativeWidth: number): Shape => rotationOfWidth(relativeWidth / rotation.vsini);

/**
 * Looks for a common velocity width among broad dips and asks whether rotation fits them better than Gaussians, all together.
 * @returns null when no width is shared or Gaussians serve as well
 */
export function findRotation(model: LineModel, resolvingPower: number): Rotation | null {
  const broad = model.components.filter(
    (c) => c.kind === 'dip' && c.fwhm * resolvingPower > RESOLVED * c.centre && c.amplitude / c.sigmaAmplitude > 12,
  );
  const candidates: { rotation: Rotation; gain: number }[] = [];
  for (const width of commonWidths(broad)) {
    const members = broad
      .filter((c) => near(c.fwhm / c.centre, width, SAME_WIDTH))
      .sort((a, b) => b.amplitude / b.sigmaAmplitude - a.amplitude / a.sigmaAmplitude);
    const gain = gainsOf(model, members.slice(0, MEMBERS));
    candidates.push(...VSINI.map((share) => gain(share * width)));
  }
  return slowestConvincing(candidates);
}

/** What rotation profiles of a v sin i gain over Gaussians in these lines, each as wide as suits it. */
function gainsOf(model: LineModel, members: readonly Component[]): (vsini: number) => { rotation: Rotation; gain: number } {
  const cases = members.map((c) => {
    const others = model.overlapping([c]).filter((o) => !isShredOf(o, c));
    const range = [c.centre - WHOLE * c.fwhm, c.centre + WHOLE * c.fwhm] as const;
    const limits = model.limitsAt(c.centre);
    const fit = (trial: Component): number => fitBlend(model.data, [trial], others, limits, range, ROUGH).chi2;
    return { c, fit, gaussian: fit(withCore(c, GAUSSIAN)) };
  });
  return (vsini) => {
    let gain = 0;
    const widths: number[] = [];
    for (const { c, fit, gaussian } of cases) {
      const first = withCore(c, rotationOfWidth(c.fwhm / c.centre / vsini));
      let chi2 = fit(first);
      const suited = rotationOfWidth(first.fwhm / first.centre / vsini);
      if (suited !== first.core) chi2 = fit(Object.assign(first, withCore(first, suited)));
      gain += Math.max(-ONE_VOTE, Math.min(ONE_VOTE, gaussian - chi2));
      widths.push(first.fwhm / first.centre);
    }
    return { rotation: { relativeWidth: median(widths), vsini }, gain };
  };
}

/** No line of a star is narrower than its rotation: hydrogen, which is wider, does not decide where others do. */
function slowestConvincing(candidates: readonly { rotation: Rotation; gain: number }[]): Rotation | null {
  const most = Math.max(...candidates.map((c) => c.gain));
  if (!(most > ROTATION_GAIN)) return null;
  const convincing = candidates.filter((c) => c.gain > CONVINCING * most);
  const slowest = Math.min(...convincing.map((c) => c.rotation.relativeWidth));
  const alike = (c: { rotation: Rotation }): boolean => c.rotation.relativeWidth < 1.3 * slowest;
  const narrower = candidates.filter((c) => c.rotation.relativeWidth < slowest / 1.3);
  // narrower lines that agree in width and are no rotation profiles: the star turns slower, and the broad ones are blends
  if (narrower.length && Math.max(...narrower.map((c) => c.gain)) < -AGAINST) return null;
  return convincing.filter(alike).reduce((a, b) => (b.gain > a.gain ? b : a)).rotation;
}

const AGAINST = 30; // chi-square
const CONVINCING = 0.5; // of the best gain
const WHOLE = 1.8; // FWHM to either side: the corners of a rotation profile lie beyond those of a Gaussian cut too narrow
const RESOLVED = 2.5; // resolution elements: below, a rotation profile looks like a Gaussian
const ONE_VOTE = 30; // chi-square: no line decides alone
const ROTATION_GAIN = 250; // chi-square over Gaussians, all members together
const MEMBERS = 30;
/** v sin i over the common FWHM: 0.62 where nothing else broadens; more where that was cut short by corners fitted apart, less where it is blurred. */
const VSINI = [0.44, 0.5, 0.55, 0.6, 0.65, 0.7, 0.76];

/** Whether a weak component may be the corner of a profile whose shape was not right yet. */
const isShredOf = (o: Component, c: Component): boolean =>
  o.kind === c.kind && Math.abs(o.centre - c.centre) < 1.3 * c.fwhm && o.amplitude * o.area < 0.35 * c.amplitude * c.area;

const near = (a: number, b: number, factor: number): boolean => a < b * factor && a > b / factor;

/** Relative widths that several components share, most supported first, at most three. */
function commonWidths(broad: readonly Component[]): number[] {
  const ranked = broad
    .map((c) => {
      const alike = broad.filter((d) => near(d.fwhm / d.centre, c.fwhm / c.centre, 1.15));
      const weight = alike.reduce((sum, d) => sum + Math.sqrt(d.amplitude / d.sigmaAmplitude), 0);
      return { width: alike.map((d) => d.fwhm / d.centre).sort((x, y) => x - y)[alike.length >> 1]!, count: alike.length, weight };
    })
    .filter((r) => r.count >= 3)
    .sort((a, b) => b.weight - a.weight || a.width - b.width);
  const out: number[] = [];
  for (const r of ranked) if (out.length < 3 && out.every((w) => !near(w, r.width, 1.4))) out.push(r.width);
  return out;
}

/** Instrumental sigma in units of v sin i for a FWHM given in resolution elements; a rotation profile's FWHM is 1.6 v sin i. */
const blurOf = (elements: number): number => 1.6 / 2.3548 / Math.max(elements, 1);

const NARROWER = 0.75; // of the star's width

/** What turns out narrower than rotation allows is no line of the star, and does not look like one. */
export function withdrawRotation(components: readonly Component[], rotation: Rotation): void {
  for (const c of components)
    if (!c.damped && c.core.name === 'rotation' && c.fwhm < NARROWER * rotation.relativeWidth * c.centre)
      Object.assign(c, withCore(c, GAUSSIAN));
}

const DAMPED_SIGNIFICANCE = 40;
const DEEP = 0.45; // depth at which saturation begins to shape a profile
const WIDE = 5; // resolution elements
const DAMPED_GAIN = 40; // chi-square asked of two more parameters, with room for imperfect profiles

/** Broad strong dips get the shape the data prefer: Gaussian, rotation-broadened, or saturated with damping wings. */
export function trySpecialShapes(model: LineModel, resolvingPower: number, rotation: Rotation | null): void {
  const broad = model.components.filter(
    (c) => c.kind === 'dip' && c.fwhm * resolvingPower > BROAD * c.centre && c.amplitude / c.sigmaAmplitude > SPECIAL_SIGNIFICANCE,
  );
  for (const c of broad.sort((a, b) => b.amplitude * b.fwhm - a.amplitude * a.fwhm || a.centre - b.centre)) {
    const others = model.overlapping([c]);
    const mayBeDamped =
      c.amplitude / c.sigmaAmplitude > DAMPED_SIGNIFICANCE && (c.amplitude > DEEP || c.fwhm * resolvingPower > WIDE * c.centre);
    if (!mayBeDamped && c.fwhm * resolvingPower < RESOLVED * c.centre) continue;
    const trials = [
      withCore(c, GAUSSIAN),
      withCore(
        c,
        rotation && near(c.fwhm / c.centre, rotation.relativeWidth, 1.8)
          ? rotating(rotation, c.fwhm / c.centre)
          : rotationOfBlur(blurOf((c.fwhm * resolvingPower) / c.centre)),
      ),
    ];
    if (mayBeDamped) trials.push(...dampedTrials(c, resolvingPower, rotation));
    const range = [c.centre - 4 * c.fwhm, c.centre + 4 * c.fwhm] as const;
    let best: Component | null = null;
    let bestChi2 = Infinity;
    for (const trial of trials) {
      const chi2 = fitBlend(model.data, [trial], others, model.limitsAt(c.centre), range, ROUGH).chi2 + (trial.damped ? DAMPED_GAIN : 0);
      if (chi2 < bestChi2) [best, bestChi2] = [trial, chi2];
    }
    if (best) Object.assign(c, best);
    if (c.damped) model.reshaped();
  }
}

const SMEARED = 8; // resolution elements: the instrument hardly changes wider profiles
const SATURATED = 0.7; // depth
const SATURATED_START = { tau: 8, a: 1e-3 };

/** Damped profiles to try for a component: as it stands where it is one, else smeared by the star's rotation or by the instrument. */
function dampedTrials(c: Component, resolvingPower: number, rotation: Rotation | null): Component[] {
  if (c.damped) return [{ ...c }, asDamped(c)];
  if (c.damped) return [{ ...c }, asDamped(c)];
  if (rotation && c.fwhm / c.centre > 1.3 * rotation.vsini)
    return [asDamped(c, undefined, { kind: 'rotation', nm: rotation.vsini * c.centre })];
  const trials = [asDamped(c)];
  if (c.amplitude > SATURATED && (c.fwhm * resolvingPower) / c.centre < SMEARED)
    trials.push(asDamped(c, SATURATED_START, { kind: 'instrument', nm: c.centre / resolvingPower / FWHM_PER_SIGMA }));
  return trials;
}

const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2);

const SHALLOW = 0.15; // what is gathered is as deep as hydrogen lines are
const CROWD_WIDTH = 0.18; // of the strong line's FWHM: narrower components are lines of their own
const CROWD_REACH = 1.8; // FWHM
const LARGEST_CROWD = 6; // refitted together before the comparison

/**
 * One damped profile in place of a crowd of broad components around a strong line, where the data are content with it: where it costs less
 * chi-square than three parameters a component are worth (Schwarz 1978, Ann. Stat. 6, 461: ln n each). Real lines that
 * go with the crowd stand out again in the next round.
 */
export function gatherDamped(
  model: LineModel,
  threshold: number,
  tolerant: NormalisedSamples,
  resolvingPower: number,
  rotation: Rotation | null,
): void {
  const strong = model.components
    .filter(
      (c) =>
        c.kind === 'dip' &&
        c.fwhm * resolvingPower > 2 * BROAD * c.centre &&
        (!rotation || c.amplitude > SHALLOW) &&
        c.amplitude / c.sigmaAmplitude > DAMPED_SIGNIFICANCE,
    )
    .sort((a, b) => b.amplitude * b.area - a.amplitude * a.area || a.centre - b.centre);
  for (const c of strong) {
    if (!model.components.includes(c)) continue;
    const crowd = model.components.filter(
      (o) =>
        o !== c &&
        o.kind === 'dip' &&
        o.fwhm > CROWD_WIDTH * c.fwhm &&
        Math.abs(o.centre - c.centre) < CROWD_REACH * Math.max(c.fwhm, 0.5 * o.fwhm) &&
        o.amplitude * o.area < c.amplitude * c.area,
    );
    if (crowd.length === 0) continue;
    const others = model.overlapping([c, ...crowd]);
    const limits = model.limitsAt(c.centre);
    const range = rangeOf([c, ...crowd]);
    const now = Math.min(
      chi2Of(tolerant, [c, ...crowd, ...others], range),
      fitBlend(
        tolerant,
        [{ ...c }, ...crowd.slice(0, LARGEST_CROWD).map((o) => ({ ...o }))],
        [...others, ...crowd.slice(LARGEST_CROWD)],
        limits,
        range,
        ROUGH,
      ).chi2,
    );
    let one = c;
    let alone = Infinity;
    for (const trial of dampedTrials(c, resolvingPower, rotation)) {
      const { chi2 } = fitBlend(tolerant, [trial], others, limits, range);
      if (chi2 < alone) [one, alone] = [trial, chi2];
    }
    const samples = indexAt(tolerant.wavelength, range[1]) - indexAt(tolerant.wavelength, range[0]);
    if (alone > now + Math.max(threshold * threshold, 3 * Math.log(Math.max(samples, 1))) * crowd.length) continue;
    model.remove(new Set(crowd));
    Object.assign(c, one);
    model.reshaped();
  }
}

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
