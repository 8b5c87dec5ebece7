import { photosphericIndex } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { correlate, peaksOf, type VelocityGrid } from './correlate.js';
import type { Expected, SpeciesModel, SystemModel } from './model.js';
import { isPermitted, refinedVelocity, weigh, type Scene } from './search.js';
import { dopplerFactor, scaleSigma, velocityOf, type Coverage, type FeatureView } from './views.js';

/** What the continuum says of the temperature; null when nothing. */
export interface TemperatureHint {
  readonly temperatureK: number;
  readonly sigmaK: number;
}

const TEMPERATURES = [3600, 4200, 4700, 5200, 5700, 6300, 7000, 7800, 8700, 9800, 11000, 12500, 14500, 17000, 20000, 23500, 27500, 32000];
const ELECTRONS = [13, 14]; // log10 n_e, cm^-3, of cool and hot photospheres
const DEPTHS = [0.25, 0.7, 1.6]; // lines in the template as a multiple of the number of dips: how far down the strength scale the data reach
const LINE_SCATTER = 0.22; // dex: log gf errors and abundance patterns
const HYDROGEN_SCATTER = 0.35;
const HYDROGEN_DEPTH = 0.6; // area of a hydrogen line over its FWHM
const HYDROGEN_WIDTH_SPREAD = 0.7; // natural log
const SPECIES_SIGMA = 0.35; // dex: ionisation, non-LTE, abundance
const SIGNIFICANT = 3.5; // of the correlation peak, in robust scatters of the score: broad lines make broad peaks; the evidence decides
const OTHERS = 0.6; // dips that other systems explain so well do not speak for a star
const NOBODY = { id: '' } as SystemModel;
const MEMBERS = 5; // dips that the template must explain
const ENOUGH = 12; // ln evidence: among few dips some template fits by chance

interface Photosphere {
  readonly temperatureK: number;
  readonly logNe: number;
  readonly velocity: number;
  readonly index: Float64Array;
  readonly height: number;
  readonly significance: number;
}

/**
 * The star: temperature, electron density and velocity whose predicted line strengths correlate best with the dips, then the strength
 * scale and saturation from lines that stand alone.
 * @param lines photospheric lines within reach of the spectrum, ascending
 * @returns null when no velocity stands out
 */
export function findStar(scene: Scene, lines: readonly Line[], hint: TemperatureHint | null, rangeV: number): SystemModel | null {
  const { features, coverage } = scene;
  const dips = features.filter(
    (f) => f.kind === 'dip' && !f.flags.includes('cosmic') && scene.background.explained(f.index, NOBODY) < OTHERS,
  );
  if (dips.length < MEMBERS || lines.length === 0) return null;
  const permits = (velocity: number) => isPermitted(scene, velocity);
  const best = bestPhotosphere(dips, lines, coverage, hint, rangeV, permits);
  if (!best || best.significance < SIGNIFICANT) return hydrogenStar(dips, lines, coverage, hint, rangeV, permits);
  const alone = aloneMatches(dips, lines, best.index, best.velocity, coverage);
  if (alone.length < MEMBERS) return hydrogenStar(dips, lines, coverage, hint, rangeV, permits);
  const { velocity, sigma, fwhmV } = refine(alone);
  const scale = fitScale(aloneMatches(dips, lines, best.index, velocity, coverage, fwhmV));
  let star = starModel(lines, best, velocity, sigma, fwhmV, scale, coverage);
  for (let pass = 0; pass < 2; pass++) {
    const moved = refinedVelocity(weigh(star, scene));
    if (moved.members < MEMBERS) break;
    star = starModel(lines, best, moved.velocity, moved.sigma, fwhmV, scale, coverage);
  }
  const stands = permits(star.velocity) && weigh(star, scene).evidence > ENOUGH;
  return stands ? star : hydrogenStar(dips, lines, coverage, hint, rangeV, permits);
}

const COMPANION_DIPS = 15; // unexplained dips worth a second search
const COMPANION_SHARE = 0.12; // of all dips
const COMPANION_ENOUGH = 30; // ln evidence: lines that no list holds must not make a star

/** A second star in the spectrum, from the dips that everything found so far leaves unexplained; at a velocity of its own. */
export function findCompanion(
  scene: Scene,
  star: SystemModel,
  lines: readonly Line[],
  hint: TemperatureHint | null,
  rangeV: number,
): SystemModel | null {
  const dips = scene.features.filter((f) => f.kind === 'dip');
  const open = dips.filter((f) => scene.background.explained(f.index, NOBODY) < OTHERS).length;
  if (open < COMPANION_DIPS || open < COMPANION_SHARE * dips.length) return null;
  const apart = Math.max(0.8 * star.fwhmV, scene.coverage.elementV);
  const permits = (v: number) => isPermitted(scene, v) && Math.abs(v - star.velocity) > apart;
  const found = findStar({ ...scene, permits }, lines, hint, rangeV);
  if (!found || weigh(found, scene).evidence < COMPANION_ENOUGH) return null;
  return { ...found, id: 'companion' };
}

const HYDROGEN_MEMBERS = 3;
const HYDROGEN_TEMPERATURE = 9500; // K, where hydrogen is strongest: assumed when the continuum does not tell
const HYDROGEN_KNEE = -3.4; // log10 W/lambda at which hydrogen lines stop growing in proportion

/**
 * A star by its hydrogen lines alone, as low resolution shows hot and A-type stars: at least three broad dips at one velocity, and most of
 * the first lines of the series that are covered.
 */
function hydrogenStar(
  dips: readonly FeatureView[],
  lines: readonly Line[],
  coverage: Coverage,
  hint: TemperatureHint | null,
  rangeV: number,
  permits: (velocity: number) => boolean,
): SystemModel | null {
  const series = lines.filter(
    (l) => l.element === 'H' && l.wavelengthNm > coverage.fromNm && l.wavelengthNm < coverage.toNm && (l.oscillatorStrength ?? 0) > 0.01,
  );
  const seen = dips.map((d) => d.logW - Math.log10(d.wavelength)).sort((a, b) => b - a)[HYDROGEN_MEMBERS - 1] ?? 0;
  const first = series.filter((l) => (l.oscillatorStrength ?? 0) > 0.02 && wouldShow(l, seen, coverage));
  if (first.length < HYDROGEN_MEMBERS) return null;
  const step = 0.1 * coverage.elementV;
  let best: { velocity: number; members: FeatureView[]; score: number } | null = null;
  for (let velocity = -rangeV; velocity <= rangeV; velocity += step) {
    if (!permits(velocity)) continue;
    const factor = dopplerFactor(velocity);
    const members: FeatureView[] = [];
    let score = 0;
    for (const line of first) {
      const at = line.wavelengthNm * factor;
      const f = dips.find((d) => Math.abs(d.wavelength - at) < 0.3 * d.fwhmNm && d.fwhmV > 1.2 * coverage.elementV);
      if (!f || members.includes(f)) continue;
      members.push(f);
      score += Math.sqrt(f.significance) * (1 - (velocityOf(f.wavelength, at) / (0.3 * f.fwhmV)) ** 2);
    }
    if (!best || score > best.score) best = { velocity, members, score };
  }
  if (!best || best.members.length < HYDROGEN_MEMBERS || best.members.length < 0.6 * first.length) return null;
  const temperatureK = hint?.temperatureK ?? HYDROGEN_TEMPERATURE;
  const index = photosphericIndex(lines, temperatureK, 14);
  const strongest = lines.reduce((top, l, k) => (l.element === 'H' && index[k]! > top ? index[k]! : top), -Infinity);
  const measured = best.members.map((f) => f.logW - Math.log10(f.wavelength)).sort((a, b) => a - b);
  const top = measured[measured.length - 1]!;
  // lines of white dwarfs grow far beyond those of common stars before they saturate
  const knee = Math.max(HYDROGEN_KNEE, top - 0.6);
  const shift = knee + beyondKnee(top - knee) - strongest;
  const fwhmV = Math.min(...best.members.map((f) => f.fwhmV));
  const sigma = coverage.elementV * 0.2;
  const photosphere: Photosphere = { temperatureK, logNe: 14, velocity: best.velocity, index, height: 0, significance: best.score };
  return starModel(lines, photosphere, best.velocity, sigma, fwhmV, { shift, knee }, coverage);
}

/** High members of a series stand closer than they are wide: they form the series' edge, not lines (Inglis & Teller 1939, ApJ 90, 439). */
const withMergers = (series: readonly Expected[]): Expected[] =>
  series.map((e, k) => {
    const near = [series[k - 1], series[k + 1]].some(
      (n) => n && Math.abs(velocityOf(n.wavelength, e.wavelength)) < 0.8 * Math.max(e.fwhmV, n.fwhmV),
    );
    return near ? { ...e, merges: true } : e;
  });

/** Whether a line a third as strong, for its wavelength, as the strongest dips would be seen there. */
const wouldShow = (l: Line, strongest: number, coverage: Coverage): boolean => {
  const width = (l.wavelengthNm * 10 ** strongest) / 3;
  return width > coverage.threshold * coverage.sigmaW(l.wavelengthNm, width / HYDROGEN_DEPTH);
};

/** How far, in dex, the thin limit lies above the knee when the line itself does by `excess`: the inverse of `grow`. */
function beyondKnee(excess: number): number {
  let [low, high] = [excess - 1, excess * 4 + 4];
  for (let i = 0; i < 40; i++) {
    const mid = 0.5 * (low + high);
    if (mid - 0.75 * Math.log10(1 + 10 ** mid) < excess) low = mid;
    else high = mid;
  }
  return low;
}

function bestPhotosphere(
  dips: readonly FeatureView[],
  lines: readonly Line[],
  coverage: Coverage,
  hint: TemperatureHint | null,
  rangeV: number,
  permits: (velocity: number) => boolean,
): Photosphere | null {
  const weight = Float64Array.from(dips, (f) => Math.sqrt(Math.min((10 ** f.logW / f.wavelength) * C_KM_PER_S, 40)));
  const spread = Float64Array.from(dips, (f) => Math.hypot(f.sigmaV, 0.12 * f.fwhmV));
  const typical = Float64Array.from(spread).sort()[spread.length >> 1]!;
  const step = Math.max(0.25 * coverage.elementV, Math.min(0.4 * typical, 6));
  const grid: VelocityGrid = { from: -rangeV, step, count: 2 * Math.ceil(rangeV / step) + 1 };
  const wavelength = Float64Array.from(lines, (l) => l.wavelengthNm);
  const near = hint ? [hint.temperatureK] : TEMPERATURES;
  let best: Photosphere | null = null;
  for (const temperatureK of near) {
    for (const logNe of ELECTRONS) {
      const index = photosphericIndex(lines, temperatureK, logNe);
      const sorted = Float64Array.from(index.filter((x) => Number.isFinite(x)))
        .sort()
        .reverse();
      for (const depth of DEPTHS) {
        const cut = sorted[Math.min(sorted.length - 1, Math.round(depth * dips.length))]!;
        const template = {
          wavelength,
          weight: Float64Array.from(index, (x) => (x > cut - 0.3 ? 10 ** (0.5 * Math.min(x - cut, 1.2)) : 0)),
        };
        const score = correlate(dips, weight, spread, template, grid);
        const peak = peaksOf(score, grid, 5, 40).find((p) => permits(p.velocity));
        if (peak && (!best || peak.height > best.height))
          best = { temperatureK, logNe, velocity: peak.velocity, index, height: peak.height, significance: peak.significance };
      }
    }
  }
  return best;
}

interface Match {
  readonly feature: FeatureView;
  readonly line: Line;
  readonly index: number;
  readonly dv: number;
}

/** Dips where one photospheric line outweighs all others within the profile. */
function aloneMatches(
  dips: readonly FeatureView[],
  lines: readonly Line[],
  index: Float64Array,
  velocity: number,
  coverage: Coverage,
  fwhmV = 0,
): Match[] {
  const factor = dopplerFactor(velocity);
  const out: Match[] = [];
  for (const f of dips) {
    if (fwhmV && (f.fwhmV < 0.6 * fwhmV || f.fwhmV > 1.7 * fwhmV)) continue;
    const half = (0.5 * Math.max(f.fwhmV, coverage.elementV) * f.wavelength) / C_KM_PER_S;
    let total = 0;
    let top = -1;
    let topValue = 0;
    for (
      let k = lineAt(lines, (f.wavelength - half) / factor);
      k < lines.length && lines[k]!.wavelengthNm * factor < f.wavelength + half;
      k++
    ) {
      const value = 10 ** index[k]!;
      if (!(value > 0)) continue;
      total += value;
      if (value > topValue) [top, topValue] = [k, value];
    }
    if (top < 0 || topValue < 0.75 * total || lines[top]!.element === 'H') continue;
    out.push({ feature: f, line: lines[top]!, index: index[top]!, dv: velocityOf(f.wavelength, lines[top]!.wavelengthNm) });
  }
  // the weakest predicted ones are chance more often than not: keep the strongest as many as make sense
  return out.sort((a, b) => b.index - a.index).slice(0, Math.max(12, Math.ceil(out.length * 0.6)));
}

export function lineAt(lines: readonly Line[], wavelength: number): number {
  let low = 0;
  let high = lines.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (lines[mid]!.wavelengthNm < wavelength) low = mid + 1;
    else high = mid;
  }
  return low;
}

/** Median velocity and width of the matches, clipped, with the error of the weighted mean. */
function refine(matches: readonly Match[]): { velocity: number; sigma: number; fwhmV: number } {
  const median = (x: number[]): number => x.sort((a, b) => a - b)[x.length >> 1]!;
  let kept = [...matches];
  let velocity = median(kept.map((m) => m.dv));
  for (let pass = 0; pass < 3; pass++) {
    const scatter = 1.4826 * median(kept.map((m) => Math.abs(m.dv - velocity)));
    const near = matches.filter((m) => Math.abs(m.dv - velocity) < 2.5 * Math.max(scatter, 0.3));
    if (near.length < 3) break;
    kept = near;
    const weights = kept.map((m) => 1 / (m.feature.sigmaV ** 2 + (0.02 * m.feature.fwhmV) ** 2 + 0.04));
    velocity = kept.reduce((s, m, i) => s + weights[i]! * m.dv, 0) / weights.reduce((a, b) => a + b, 0);
  }
  const scatter = 1.4826 * median(kept.map((m) => Math.abs(m.dv - velocity)));
  return { velocity, sigma: Math.max(scatter / Math.sqrt(kept.length), 0.02), fwhmV: median(kept.map((m) => m.feature.fwhmV)) };
}

interface Scale {
  readonly shift: number;
  readonly knee: number;
}

/** log10(W/lambda) from the strength index: thin below the knee, a quarter of the slope far above it. */
const grow = (index: number, s: Scale): number => index + s.shift - 0.75 * Math.log10(1 + 10 ** (index + s.shift - s.knee));

/** Shift and knee that fit the lone lines best in the sense of least absolute deviations. */
function fitScale(matches: readonly Match[]): Scale {
  const x = matches.map((m) => m.index);
  const y = matches.map((m) => m.feature.logW - Math.log10(m.feature.wavelength));
  let best: Scale = { shift: 0, knee: -4.5 };
  let bestCost = Infinity;
  for (let knee = -6; knee <= -3; knee += 0.25) {
    for (let shift = -2; shift <= 9; shift += 0.05) {
      let cost = 0;
      for (let i = 0; i < x.length; i++) cost += Math.min(Math.abs(y[i]! - grow(x[i]!, { shift, knee })), 0.8);
      if (cost < bestCost) [best, bestCost] = [{ shift, knee }, cost];
    }
  }
  return best;
}

function starModel(
  lines: readonly Line[],
  p: Photosphere,
  velocity: number,
  sigma: number,
  fwhmV: number,
  scale: Scale,
  coverage: Coverage,
): SystemModel {
  const factor = dopplerFactor(velocity);
  const bySpecies = new Map<string, Expected[]>();
  lines.forEach((line, k) => {
    if (!Number.isFinite(p.index[k]!)) return;
    const wavelength = line.wavelengthNm * factor;
    const hydrogen = line.element === 'H';
    const logW =
      grow(p.index[k]!, hydrogen ? { ...scale, knee: Math.max(scale.knee, HYDROGEN_KNEE) } : scale) + Math.log10(line.wavelengthNm);
    const limit = coverage.sigmaW(wavelength, (wavelength * fwhmV) / C_KM_PER_S);
    if (!(logW > Math.log10(limit) - 0.7)) return; // far below the noise even with a generous offset
    const e: Expected = {
      line,
      wavelength,
      logW,
      scatter: hydrogen ? HYDROGEN_SCATTER : LINE_SCATTER,
      sigmaV: Math.hypot(sigma, Math.max(0.3, scaleSigma(coverage))),
      // pressure makes hydrogen lines as wide as they are strong
      fwhmV: hydrogen ? Math.hypot(fwhmV, ((10 ** logW / wavelength) * C_KM_PER_S) / HYDROGEN_DEPTH) : fwhmV,
      ...(hydrogen && { widthSpread: HYDROGEN_WIDTH_SPREAD }),
    };
    const list = bySpecies.get(line.species);
    if (list) list.push(e);
    else bySpecies.set(line.species, [e]);
  });
  const hydrogen = bySpecies.get('H I');
  if (hydrogen) bySpecies.set('H I', withMergers(hydrogen));
  const species: SpeciesModel[] = [...bySpecies].map(([name, list]) => ({
    species: name,
    lines: list,
    priorMean: 0,
    priorSigma: name === 'H I' ? 0.8 : SPECIES_SIGMA,
    presence: 0.95,
  }));
  const strengthOf = (wanted: readonly Line[]): Float64Array =>
    photosphericIndex(wanted, p.temperatureK, p.logNe).map((x, k) => grow(x, scale) + Math.log10(wanted[k]!.wavelengthNm));
  return {
    id: 'star',
    family: 'stellar',
    kind: 'dip',
    velocity,
    velocitySigma: sigma,
    significance: p.significance,
    fwhmV,
    species,
    strengthOf,
  };
}

const ASSUMED_TEMPERATURE = 5800; // K, where neither continuum nor person tells
const ASSUMED_SCALE = { strongest: -4, knee: -4.5 } as const; // log10 W/lambda of common lines, when no line stands alone to measure it by

/** A star at a velocity that is known from elsewhere, whether or not its lines stand out. */
export function assumedStar(
  scene: Scene,
  lines: readonly Line[],
  hint: TemperatureHint | null,
  velocity: number,
  sigma: number,
): SystemModel {
  const { coverage } = scene;
  const dips = scene.features.filter((f) => f.kind === 'dip' && !f.flags.includes('cosmic'));
  const temperatureK = hint?.temperatureK ?? ASSUMED_TEMPERATURE;
  const index = photosphericIndex(lines, temperatureK, 14);
  const alone = aloneMatches(dips, lines, index, velocity, coverage).filter((m) => Math.abs(m.dv - velocity) < m.feature.fwhmV + 3 * sigma);
  const strongest = index.reduce((top, x) => (Number.isFinite(x) && x > top ? x : top), -Infinity);
  const scale = alone.length < 3 ? { shift: ASSUMED_SCALE.strongest - strongest, knee: ASSUMED_SCALE.knee } : fitScale(alone);
  const widths = alone.map((m) => m.feature.fwhmV).sort((a, b) => a - b);
  const fwhmV = widths[widths.length >> 1] ?? 1.5 * coverage.elementV;
  const photosphere: Photosphere = { temperatureK, logNe: 14, velocity, index, height: 0, significance: 0 };
  return starModel(lines, photosphere, velocity, sigma, fwhmV, scale, coverage);
}
