import { nebularIntensity } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import { correlate, peaksOf, type VelocityGrid } from './correlate.js';
import type { Expected, SystemModel } from './model.js';
import { isPermitted, refinedVelocity, weigh, type Scene, type Weighed } from './search.js';
import { dopplerFactor, scaleSigma, type Coverage, type FeatureView } from './views.js';

const SPECIES_SIGMA = 0.5; // dex: ionisation and abundance from nebula to nebula
const LINE_SCATTER = 0.12; // dex: reddening, temperature and density within one ion
const FAINTEST = -2.5; // log10 intensity (H beta = 100) of lines worth listing
const MOST_SYSTEMS = 4;
const ENOUGH = 8;
const SCALES = [-0.6, 0, 0.6];
const CERTAIN_LINES = 4; // brightest hydrogen lines, whose ratios the theory of recombination fixes

/** log10 of (intensity / equivalent width) up to a constant: the continuum's shape, so that ratios of intensities become ratios of widths. */
export type LogContinuum = (wavelength: number) => number;

/** Emission-line gas, strongest evidence first. */
export function findNebulae(lines: readonly Line[], scene: Scene, rangeV: number, logContinuum: LogContinuum): SystemModel[] {
  const peaksOnly = scene.features.filter((f) => f.kind === 'peak');
  if (peaksOnly.length < 2 || lines.length === 0) return [];
  const intensity = nebularIntensity(lines);
  const keep = lines.map((_, k) => k).filter((k) => intensity[k]! > FAINTEST);
  const chosen = keep.map((k) => lines[k]!);
  const logI = Float64Array.from(keep, (k) => intensity[k]!);
  const step = 0.25 * scene.coverage.elementV;
  const grid: VelocityGrid = { from: -rangeV, step, count: 2 * Math.ceil(rangeV / step) + 1 };
  const template = { wavelength: chosen.map((l) => l.wavelengthNm), weight: Float64Array.from(logI, (i) => 10 ** (0.35 * i)) };
  const found: SystemModel[] = [];
  const used = new Set<FeatureView>();
  for (let n = 0; n < MOST_SYSTEMS; n++) {
    const free = peaksOnly.filter((f) => !used.has(f));
    if (free.length < 2) break;
    const weight = free.map((f) => Math.sqrt(f.significance));
    const spread = free.map((f) => Math.hypot(f.sigmaV, 0.25 * scene.coverage.elementV));
    const places = peaksOf(correlate(free, weight, spread, template, grid), grid, scene.coverage.elementV, scene.permits ? 40 : 10).filter(
      (p) => isPermitted(scene, p.velocity),
    );
    const left: Scene = {
      ...scene,
      background: { ...scene.background, explained: (i, w) => (used.has(scene.features[i]!) ? 0.95 : scene.background.explained(i, w)) },
    };
    let best: { weighed: Weighed; members: number } | null = null;
    for (const p of places) {
      const tried = settle(`nebula${n + 1}`, chosen, logI, p.velocity, left, logContinuum);
      if (!tried || found.some((s) => Math.abs(s.velocity - tried.weighed.system.velocity) < 0.7 * scene.coverage.elementV)) continue;
      if (!isPermitted(scene, tried.weighed.system.velocity)) continue;
      if (!best || tried.weighed.evidence > best.weighed.evidence) best = tried;
    }
    if (!best || best.members < 2 || best.weighed.evidence < ENOUGH + Math.log(places.length)) break;
    found.push({ ...best.weighed.system, significance: Math.sqrt(2 * best.weighed.evidence) });
    for (const s of best.weighed.states)
      for (const t of s.terms) if (t.feature && t.outcome === 'seen' && s.logEvidence > 1) used.add(t.feature);
  }
  return found;
}

const ASSUMED_BRIGHTNESS = 3; // of the brightest line in units of the detection limit, when no peak tells

/** A nebula at a velocity that is known from elsewhere, whether or not its lines stand out. */
export function assumedNebula(
  id: string,
  lines: readonly Line[],
  scene: Scene,
  velocity: number,
  sigma: number,
  logContinuum: LogContinuum,
): SystemModel {
  const { coverage } = scene;
  const intensity = nebularIntensity(lines);
  const keep = lines.map((_, k) => k).filter((k) => intensity[k]! > FAINTEST);
  const chosen = keep.map((k) => lines[k]!);
  const logI = Float64Array.from(keep, (k) => intensity[k]!);
  const limit = (nm: number) => coverage.threshold * coverage.sigmaW(nm, (nm * coverage.elementV) / 299792.458);
  const faint = chosen.map((l, k) => Math.log10(ASSUMED_BRIGHTNESS * limit(l.wavelengthNm)) + logContinuum(l.wavelengthNm) - logI[k]!);
  const zero = brightnessScale(chosen, logI, velocity, scene, logContinuum) ?? Math.min(...faint.filter(Number.isFinite), 0);
  return { ...nebulaModel(id, chosen, logI, velocity, sigma, zero, coverage, logContinuum), significance: 0 };
}

/** Brightness scale by the strongest lines, velocity by the members. */
function settle(
  id: string,
  lines: readonly Line[],
  logI: Float64Array,
  velocity: number,
  scene: Scene,
  logContinuum: LogContinuum,
): { weighed: Weighed; members: number } | null {
  const zero = brightnessScale(lines, logI, velocity, scene, logContinuum);
  if (zero === null) return null;
  const byHydrogen = brightnessScale(lines, logI, velocity, scene, logContinuum, CERTAIN_LINES);
  const scales = [...SCALES.map((s) => zero + s), ...(byHydrogen === null ? [] : [byHydrogen])];
  const model = (v: number, sigma: number, scale: number) => nebulaModel(id, lines, logI, v, sigma, scale, scene.coverage, logContinuum);
  let best: Weighed | null = null;
  for (const scale of scales) {
    const w = weigh(model(velocity, 0.1 * scene.coverage.elementV, scale), scene);
    if (!best || w.evidence > best.evidence) best = w;
  }
  const { velocity: v, sigma, members } = refinedVelocity(best!);
  if (members === 0) return null;
  return { weighed: weigh(model(v, sigma, best!.system.significance), scene), members };
}

/**
 * Median of log W - log I over the brightest listed lines that coincide with a peak; null when none does.
 * @param hydrogen when given, only so many of the brightest hydrogen lines are asked
 */
function brightnessScale(
  lines: readonly Line[],
  logI: Float64Array,
  velocity: number,
  scene: Scene,
  logContinuum: LogContinuum,
  hydrogen = 0,
): number | null {
  const factor = dopplerFactor(velocity);
  const { fromNm, toNm } = scene.coverage;
  const covered = (l: Line) => l.wavelengthNm * factor > fromNm && l.wavelengthNm * factor < toNm;
  const asked = [...logI.keys()].filter((k) => !hydrogen || (lines[k]!.species === 'H I' && covered(lines[k]!)));
  const order = asked.sort((a, b) => logI[b]! - logI[a]!).slice(0, hydrogen || 60);
  const found: number[] = [];
  for (const k of order) {
    const at = lines[k]!.wavelengthNm * factor;
    const f = scene.features.find((x) => x.kind === 'peak' && Math.abs(x.wavelength - at) < 0.5 * x.fwhmNm);
    if (f) found.push(f.logW + logContinuum(at) - logI[k]!);
    if (found.length >= 7) break;
  }
  return found.length ? found.sort((a, b) => a - b)[found.length >> 1]! : null;
}

function nebulaModel(
  id: string,
  lines: readonly Line[],
  logI: Float64Array,
  velocity: number,
  sigma: number,
  zero: number,
  coverage: Coverage,
  logContinuum: LogContinuum,
): SystemModel {
  const factor = dopplerFactor(velocity);
  const bySpecies = new Map<string, Expected[]>();
  lines.forEach((line, k) => {
    const wavelength = line.wavelengthNm * factor;
    if (wavelength < coverage.fromNm || wavelength > coverage.toNm) return;
    const logW = logI[k]! + zero - logContinuum(wavelength);
    const limit = coverage.sigmaW(wavelength, (wavelength / 299792.458) * coverage.elementV);
    if (!(logW > Math.log10(limit) - 1.2)) return;
    const certain = line.relativeIntensity !== null;
    const e: Expected = {
      line,
      wavelength,
      logW,
      scatter: certain ? LINE_SCATTER : line.type === 'forbidden' ? 0.25 : 0.5,
      sigmaV: Math.hypot(sigma, Math.max(0.3, scaleSigma(coverage))),
      fwhmV: Math.hypot(coverage.elementV, 18),
    };
    const list = bySpecies.get(line.species);
    if (list) list.push(e);
    else bySpecies.set(line.species, [e]);
  });
  const species = [...bySpecies].map(([name, list]) => ({
    species: name,
    lines: list,
    priorMean: 0,
    priorSigma: SPECIES_SIGMA,
    presence: list.some((e) => e.line.relativeIntensity !== null) ? 0.97 : 0.7,
  }));
  return {
    id,
    family: 'nebular',
    kind: 'peak',
    velocity,
    velocitySigma: sigma,
    significance: zero,
    fwhmV: coverage.elementV,
    species,
    // beyond the data the continuum is taken as at their edge
    strengthOf: (wanted) => nebularIntensity(wanted).map((i, k) => i + zero - logContinuum(wanted[k]!.wavelengthNm * factor)),
  };
}
