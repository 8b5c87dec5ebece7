import { choleskyInPlace, choleskySolve } from '../numeric/index.js';
import { addComponent } from '../profiles/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { imprintAt, type Imprint } from './imprint.js';
import { featuresWithin, sampleAt, type Light } from './light.js';

/** Where a line is to be measured, whether or not anything was found there. */
export interface Place {
  /** km/s on the common scale */
  readonly velocity: number;
  readonly imprint: Imprint;
}

export interface Forced {
  /** nm, positive in absorption */
  readonly width: number;
  readonly sigma: number;
  /** by how much the line is off its place, km/s, and its error; NaN when not asked or too weak */
  readonly offset: number;
  readonly offsetSigma: number;
  /** light of foreign features that an extraction at this place would have taken for the line, nm */
  readonly foreign: number;
}

/** Which features of a spectrum are the line itself, in some cloud; all others are divided out. */
export type IsOwn = (featureIndex: number) => boolean;

const BASELINE_SIGMA = 0.03; // of the continuum: the analysis' placement, which a line and its surroundings share
const LEAST_LIGHT = 0.04; // behind deep foreign lines nothing can be measured
const ENOUGH_SAMPLES = 4;
const OFFSET_NEEDS = 4; // sigma of the width before a velocity is asked
const SPREAD_NEEDS = 15; // and before the width of the imprint is

/**
 * Measures one line at all places at once by optimal extraction (Horne 1986, PASP 98, 609, in one dimension): weighted least squares of the light
 * that foreign features leave against a straight base line and one imprint for each place.
 * @returns one entry a place; null where the spectrum does not cover it
 */
export function force(light: Light, restNm: number, places: readonly Place[], isOwn: IsOwn, withOffsets = false): (Forced | null)[] {
  const covered = places.map((p) => isCovered(light, restNm, p));
  const used = places.filter((_, i) => covered[i]);
  if (used.length === 0) return places.map(() => null);
  const scene = sceneOf(light, restNm, used, isOwn);
  const fitted = scene && solve(scene, used, restNm, withOffsets, light.noiseFactor);
  if (!fitted) return places.map(() => null);
  let k = 0;
  return covered.map((is) => (is ? fitted[k++]! : null));
}

function isCovered(light: Light, restNm: number, { velocity, imprint }: Place): boolean {
  const half = 0.75 * imprint.fwhm;
  const from = sampleAt(light, light.wavelengthOf(restNm, velocity - half));
  const to = sampleAt(light, light.wavelengthOf(restNm, velocity + half));
  const { wavelength, weight } = light.data;
  if (from === 0 || to >= wavelength.length || to - from < 2) return false;
  // a gap between samples is no cover either
  const span = wavelength[to]! - wavelength[from - 1]!;
  if (span > (2 * light.wavelengthOf(restNm, 0) * (half + 2 * imprint.fwhm)) / C_KM_PER_S) return false;
  let good = 0;
  for (let i = from; i < to; i++) if (weight[i]! > 0) good++;
  return good > 0.75 * (to - from);
}

interface Scene {
  readonly velocity: Float64Array;
  readonly light: Float64Array;
  readonly weight: Float64Array;
  /** what foreign dips leave, 1 where there are none */
  readonly foreign: Float64Array;
}

function sceneOf(light: Light, restNm: number, places: readonly Place[], isOwn: IsOwn): Scene | null {
  const margin = Math.max(...places.map((p) => 2.2 * p.imprint.fwhm));
  const low = light.wavelengthOf(restNm, Math.min(...places.map((p) => p.velocity)) - margin);
  const high = light.wavelengthOf(restNm, Math.max(...places.map((p) => p.velocity)) + margin);
  const [from, to] = [sampleAt(light, low), sampleAt(light, high)];
  const { wavelength, flux, weight } = light.data;
  const n = to - from;
  if (n < ENOUGH_SAMPLES) return null;
  const dips = new Float64Array(n).fill(1);
  const peaks = new Float64Array(n);
  for (const i of featuresWithin(light, low, high))
    if (!isOwn(i)) addComponent(light.components[i]!, wavelength, from, to, dips, peaks, from);
  const out = { velocity: new Float64Array(n), light: new Float64Array(n), weight: new Float64Array(n), foreign: dips };
  for (let i = 0; i < n; i++) {
    const left = Math.max(dips[i]!, LEAST_LIGHT);
    out.velocity[i] = light.velocityOf(wavelength[from + i]!, restNm);
    out.light[i] = (flux[from + i]! - peaks[i]!) / left;
    out.weight[i] = dips[i]! < LEAST_LIGHT ? 0 : weight[from + i]! * left * left;
  }
  return out;
}

/** What a strong line may be besides an imprint in its place: moved, and wider or narrower. */
type Freedom = 'moved' | 'spread';

function solve(scene: Scene, places: readonly Place[], restNm: number, withOffsets: boolean, noiseFactor: number): Forced[] | null {
  const first = leastSquares(scene, places, [], []);
  if (!first) return null;
  const above = (sigmas: number) => places.map((_, k) => k).filter((k) => first.value[2 + k]! > sigmas * first.sigma[2 + k]!);
  const moved = withOffsets ? above(OFFSET_NEEDS) : [];
  const spread = withOffsets ? above(SPREAD_NEEDS) : [];
  const fit = moved.length ? (leastSquares(scene, places, moved, spread) ?? first) : first;
  const foreign = leastSquares({ ...scene, light: scene.foreign }, places, [], []);
  const nm = restNm / C_KM_PER_S;
  return places.map((_, k): Forced => {
    // neither a slope nor a curvature of an imprint has an area: where they are free, a wrong place or width does not cost equivalent width
    const from = spread.includes(k) ? fit : first;
    const at = moved.indexOf(k);
    const column = 2 + places.length + at;
    return {
      width: from.value[2 + k]! * nm,
      sigma: from.sigma[2 + k]! * nm * noiseFactor,
      offset: at < 0 ? NaN : fit.value[column]! / fit.value[2 + k]!,
      offsetSigma: at < 0 ? NaN : (fit.sigma[column]! / fit.value[2 + k]!) * noiseFactor,
      foreign: (foreign?.value[2 + k] ?? 0) * nm,
    };
  });
}

/** Value of an imprint's slope or curvature at a distance from its centre, by differences over a tenth of its width. */
function changed(imprint: Imprint, v: number, how: Freedom): number {
  const h = 0.1 * imprint.fwhm;
  const [up, down] = [imprintAt(imprint, v + h), imprintAt(imprint, v - h)];
  return how === 'moved' ? (up - down) / (2 * h) : (up + down - 2 * imprintAt(imprint, v)) / (h * h);
}

/** Columns: base line 1 and slope, then minus one imprint a place (km/s of width), then slopes of the `moved` and curvatures of the `spread`. */
function leastSquares(
  scene: Scene,
  places: readonly Place[],
  moved: readonly number[],
  spread: readonly number[],
): { value: Float64Array; sigma: Float64Array } | null {
  const columns = 2 + places.length + moved.length + spread.length;
  const normal = new Float64Array(columns * columns);
  const right = new Float64Array(columns);
  const row = new Float64Array(columns);
  const n = scene.velocity.length;
  const middle = 0.5 * (scene.velocity[0]! + scene.velocity[n - 1]!);
  const span = Math.max(1e-9, 0.5 * (scene.velocity[n - 1]! - scene.velocity[0]!));
  for (let i = 0; i < n; i++) {
    const w = scene.weight[i]!;
    if (w === 0) continue;
    const v = scene.velocity[i]!;
    let c = 0;
    row[c++] = 1;
    row[c++] = (v - middle) / span;
    for (const { imprint, velocity } of places) row[c++] = -imprintAt(imprint, v - velocity);
    for (const k of moved) row[c++] = changed(places[k]!.imprint, v - places[k]!.velocity, 'moved');
    for (const k of spread) row[c++] = -changed(places[k]!.imprint, v - places[k]!.velocity, 'spread');
    const y = scene.light[i]! - 1;
    for (let a = 0; a < columns; a++) {
      right[a]! += w * row[a]! * y;
      for (let b = 0; b <= a; b++) normal[a * columns + b]! += w * row[a]! * row[b]!;
    }
  }
  normal[0]! += 1 / BASELINE_SIGMA ** 2;
  normal[columns + 1]! += 1 / BASELINE_SIGMA ** 2;
  for (let a = 2; a < columns; a++) normal[a * columns + a]! += 1e-12 * normal[a * columns + a]! + 1e-12;
  if (!choleskyInPlace(normal, columns)) return null;
  choleskySolve(normal, columns, right);
  return { value: right, sigma: sigmas(normal, columns) };
}

/** Square roots of the diagonal of the inverse, from the Cholesky factor. */
function sigmas(factor: Float64Array, n: number): Float64Array {
  const unit = new Float64Array(n);
  return Float64Array.from({ length: n }, (_, k) => {
    unit.fill(0);
    unit[k] = 1;
    choleskySolve(factor, n, unit);
    return Math.sqrt(unit[k]!);
  });
}
