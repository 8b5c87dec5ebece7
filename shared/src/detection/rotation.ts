import { fitBlend, GAUSSIAN, rotationOfWidth, ROUGH, withCore, type Component, type Shape } from '../profiles/index.js';
import { median } from '../numeric/select.js';
import type { LineModel } from './model.js';

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
export const RESOLVED = 2.5; // resolution elements: below, a rotation profile looks like a Gaussian
const ONE_VOTE = 30; // chi-square: no line decides alone
const ROTATION_GAIN = 250; // chi-square over Gaussians, all members together
const MEMBERS = 30;
/** v sin i over the common FWHM: 0.62 where nothing else broadens; more where that was cut short by corners fitted apart, less where it is blurred. */
const VSINI = [0.44, 0.5, 0.55, 0.6, 0.65, 0.7, 0.76];

/** Whether a weak component may be the corner of a profile whose shape was not right yet. */
export const isShredOf = (o: Component, c: Component): boolean =>
  o.kind === c.kind && Math.abs(o.centre - c.centre) < 1.3 * c.fwhm && o.amplitude * o.area < 0.35 * c.amplitude * c.area;

/** Whether two positive numbers agree within a factor. */
export const near = (a: number, b: number, factor: number): boolean => a < b * factor && a > b / factor;

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
export const blurOf = (elements: number): number => 1.6 / 2.3548 / Math.max(elements, 1);

const NARROWER = 0.75; // of the star's width

/** What turns out narrower than rotation allows is no line of the star, and does not look like one. */
export function withdrawRotation(components: readonly Component[], rotation: Rotation): void {
  for (const c of components)
    if (!c.damped && c.core.name === 'rotation' && c.fwhm < NARROWER * rotation.relativeWidth * c.centre)
      Object.assign(c, withCore(c, GAUSSIAN));
}
