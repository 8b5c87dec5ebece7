import type { Feature } from '../identify/index.js';
import type { Line } from '../linelist/index.js';
import type { Side } from './comparison.js';
import { force, type Forced } from './force.js';
import { hiddenBehind, type CloudDraft } from './gather.js';
import type { Imprint } from './imprint.js';
import { featuresWithin, type Light } from './light.js';

/** A line in a cloud as one spectrum shows it, with what else takes light there. */
export interface Measured extends Forced {
  /** nm: pixel noise, foreign light and the base line together */
  readonly error: number;
  readonly feature: number | null;
}

/** @returns the imprint to expect of a line in a cloud on this side */
export type Shape = (line: Line, cloud: number) => Imprint;

const FOREIGN_DOUBT = 0.25; // of foreign light divided out: stellar profiles are not Gaussians
const SHARE_DOUBT = 0.5; // of light within the same feature that another line is thought to make
const BASELINE_DOUBT = 0.0015; // of the continuum, over the width of the imprint
const HIDDEN_SHARE = 0.5; // of a line behind which another cloud's would hide: anything from none to all of it
const NEIGHBOUR_DOUBT = 0.02; // of another cloud's line, at one width's distance: its wings are known no better

/** Measures a line in all clouds on one side; null where not covered. */
export function measureLine(
  light: Light,
  line: Line,
  drafts: readonly CloudDraft[],
  side: Side,
  shape: Shape,
  withOffsets: boolean,
): (Measured | null)[] {
  const hidden = drafts.map((_, k) => hiddenBehind(drafts, k, side, light.elementV));
  const open = drafts.map((_, k) => k).filter((k) => hidden[k] === null);
  const places = open.map((k) => ({ velocity: drafts[k]!.at[side].velocity, imprint: shape(line, k) }));
  const own = ownFeatures(light, line, places);
  const forced = force(light, line.wavelengthNm, places, (i) => own.has(i), withOffsets);
  const out: (Measured | null)[] = drafts.map(() => null);
  open.forEach((k, i) => {
    const f = forced[i];
    if (!f) return;
    const m = withDoubts(light, line, f, places[i]!, own);
    out[k] = { ...m, error: Math.hypot(m.error, ...places.map((p, j) => (j === i ? 0 : wingDoubt(places[i]!, p, forced[j])))) };
  });
  hidden.forEach((h, k) => {
    const front = h === null ? null : out[h];
    if (!front) return;
    const width = HIDDEN_SHARE * Math.max(0, front.width);
    const error = Math.hypot(front.error, width);
    out[k] = { width, sigma: front.sigma, error, offset: NaN, offsetSigma: NaN, foreign: Math.abs(front.width), feature: front.feature };
  });
  return out;
}

/** What the wings of another cloud's line may add here, nm: they fall with the square of the distance. */
function wingDoubt(
  here: { velocity: number; imprint: Imprint },
  other: { velocity: number; imprint: Imprint },
  line: Forced | null | undefined,
) {
  const distance = Math.max(1, Math.abs(here.velocity - other.velocity) / other.imprint.fwhm);
  return ((NEIGHBOUR_DOUBT * Math.max(0, line?.width ?? 0)) / distance ** 2) * 2;
}

function withDoubts(
  light: Light,
  line: Line,
  f: Forced,
  place: { velocity: number; imprint: Imprint },
  own: ReadonlySet<number>,
): Measured {
  const at = light.wavelengthOf(line.wavelengthNm, place.velocity);
  const nmPerV = at / 299_792.458;
  let feature: number | null = null;
  let within = 0;
  for (const i of own) {
    const { wavelengthNm, fwhmNm, candidates } = light.features[i]!;
    if (Math.abs(wavelengthNm - at) > 0.6 * Math.max(fwhmNm, place.imprint.fwhm * nmPerV)) continue;
    if (feature === null || Math.abs(wavelengthNm - at) < Math.abs(light.features[feature]!.wavelengthNm - at)) feature = i;
    for (const c of candidates)
      if (c.family !== 'interstellar' && c.probability > 0.3) within += c.share * light.features[i]!.equivalentWidthNm;
  }
  const width = f.width - Math.max(0, within);
  const error = Math.hypot(f.sigma, FOREIGN_DOUBT * f.foreign, SHARE_DOUBT * within, BASELINE_DOUBT * place.imprint.fwhm * nmPerV);
  return { ...f, width, error, foreign: f.foreign + Math.max(0, within), feature };
}

/** Features that are the line itself in one of the clouds: named so by the analysis, or standing there unclaimed. */
function ownFeatures(light: Light, line: Line, places: readonly { velocity: number; imprint: Imprint }[]): Set<number> {
  const own = new Set<number>();
  for (const { velocity, imprint } of places) {
    const at = light.wavelengthOf(line.wavelengthNm, velocity);
    const reach = (imprint.fwhm * at) / 299_792.458;
    for (const i of featuresWithin(light, at - reach, at + reach)) {
      const f = light.features[i]!;
      if (f.kind === 'dip' && Math.abs(f.wavelengthNm - at) < 0.7 * Math.max(reach, 0.5 * f.fwhmNm) && isOwn(f, line, reach)) own.add(i);
    }
  }
  return own;
}

const NAMED = 0.2;
const CLAIMED = 0.7;
const WIDEST = 2.2;

function isOwn(f: Feature, line: Line, fwhmNm: number): boolean {
  if (f.candidates.some((c) => c.lineId === line.id && c.family === 'interstellar' && c.probability >= NAMED)) return true;
  const [first] = f.candidates;
  const elsewhere = first && first.lineId !== line.id && first.probability >= CLAIMED;
  const asOther = first && first.lineId === line.id && first.family !== 'interstellar' && first.probability >= CLAIMED;
  return !elsewhere && !asOther && f.fwhmNm < WIDEST * fwhmNm;
}
