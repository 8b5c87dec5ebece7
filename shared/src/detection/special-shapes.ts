import {
  asDamped,
  chi2Of,
  fitBlend,
  indexAt,
  GAUSSIAN,
  rangeOf,
  rotationOfBlur,
  ROUGH,
  withCore,
  type Component,
  type NormalisedSamples,
} from '../profiles/index.js';
import type { LineModel } from './model.js';
import { near, rotating, RESOLVED, blurOf, type Rotation } from './rotation.js';

const SPECIAL_SIGNIFICANCE = 25; // a shape can be told from a Gaussian only in strong lines
const BROAD = 1.6; // in resolution elements
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
