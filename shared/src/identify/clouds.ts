import { centralDepth, growthWidth, isCommonInClouds, typicalColumn } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { peaksOf, type VelocityGrid } from './correlate.js';
import type { Expected, SpeciesModel, SystemModel } from './model.js';
import { bestVariant, isPermitted, refinedVelocity, weigh, type Scene, type Weighed } from './search.js';
import { dopplerFactor, featureAt, velocityOf, type Coverage, type FeatureView } from './views.js';

const DOPPLER_B = [1, 2.2, 4.5]; // km/s, common range of single interstellar components
const COLUMN_SHIFTS = [-0.8, -0.4, 0, 0.4]; // dex about the typical cloud
const SPECIES_SIGMA = 0.4; // dex: depletion and ionisation differ from cloud to cloud
const LINE_SCATTER = 0.1; // dex: f-values and the curve of growth
const MOLECULE_PRESENCE = 0.6;
const ATOM_PRESENCE = 0.9;
const CANDIDATES = 30;
const MOST_CLOUDS = 6;
/** ln evidence asked of a cloud, beyond the ln of the number of velocities tried: a wrong one in a few hundred spectra. */
const ENOUGH = 6;
const BAND_REST_SIGMA_NM = 0.012; // centres of diffuse bands are known to a few hundredths of a nanometre at best
const BAND_PER_MAG_WEAK = 8e-4; // nm per mag of E(B-V) of a band without a listed strength
const REDDENING = 0.3; // mag at the typical column

/** Interstellar clouds, strongest evidence first: velocities where narrow dips agree with what cold gas absorbs from its ground levels. */
export function findClouds(lines: readonly Line[], scene: Scene, rangeV: number): SystemModel[] {
  const atoms = interstellarLines(lines);
  const found: SystemModel[] = [];
  const grid: VelocityGrid = {
    from: -rangeV,
    step: 0.2 * scene.coverage.elementV,
    count: 2 * Math.ceil(rangeV / (0.2 * scene.coverage.elementV)) + 1,
  };
  const used = new Set<FeatureView>();
  for (let n = 0; n < MOST_CLOUDS; n++) {
    const peaks = peaksOf(votes(atoms, scene, grid, used), grid, 0.6 * scene.coverage.elementV, CANDIDATES);
    const spaced = peaks.filter(
      (p) => isPermitted(scene, p.velocity) && found.every((c) => Math.abs(c.velocity - p.velocity) > 0.7 * scene.coverage.elementV),
    );
    let best: Weighed | null = null;
    for (const p of spaced) {
      const w = bestVariant(
        p.velocity,
        (v, sigma) => [cloudModel(`cloud${n + 1}`, atoms, v, sigma, 2.2, 0, scene.coverage)],
        withoutUsed(scene, used),
      );
      if (w && (!best || w.evidence > best.evidence)) best = w;
    }
    if (!best) break;
    const apart = (v: number): boolean => found.every((c) => Math.abs(c.velocity - v) > 0.7 * scene.coverage.elementV);
    const settled = settle(best, `cloud${n + 1}`, atoms, withoutUsed(scene, used));
    if (
      settled.weighed.evidence < ENOUGH + Math.log(spaced.length + 1) ||
      settled.members < 2 ||
      !apart(settled.weighed.system.velocity) ||
      !isPermitted(scene, settled.weighed.system.velocity)
    )
      break;
    found.push({ ...settled.weighed.system, significance: Math.sqrt(2 * settled.weighed.evidence) });
    for (const s of settled.weighed.states)
      for (const t of s.terms) if (t.feature && t.outcome === 'seen' && s.logEvidence > 1) used.add(t.feature);
  }
  return found;
}

/** A cloud at a velocity that is known from elsewhere, of the width and columns that suit the data best, whether or not its lines stand out. */
export function assumedCloud(id: string, lines: readonly Line[], scene: Scene, velocity: number, sigma: number): SystemModel {
  const atoms = interstellarLines(lines);
  const variants = DOPPLER_B.flatMap((b) =>
    COLUMN_SHIFTS.map((shift) => weigh(cloudModel(id, atoms, velocity, sigma, b, shift, scene.coverage), scene)),
  );
  return variants.reduce((best, w) => (w.evidence > best.evidence ? w : best)).system;
}

const interstellarLines = (lines: readonly Line[]) =>
  lines.filter((l) => l.type !== 'band' && (l.asked || isCommonInClouds(l.species)) && (l.oscillatorStrength ?? 0) > 0);

/** Features that a cloud found before has claimed count as explained for the next. */
function withoutUsed(scene: Scene, used: ReadonlySet<FeatureView>): Scene {
  const { background } = scene;
  return {
    ...scene,
    background: { ...background, explained: (i, without) => (used.has(scene.features[i]!) ? 0.95 : background.explained(i, without)) },
  };
}

/** Improves velocity, Doppler parameter and column scale in turn. */
function settle(start: Weighed, id: string, atoms: readonly Line[], scene: Scene): { weighed: Weighed; members: number } {
  let { velocity, sigma } = refinedVelocity(start);
  if (Number.isNaN(sigma)) sigma = scene.coverage.elementV * 0.1;
  let best = start;
  for (const b of DOPPLER_B) {
    for (const shift of COLUMN_SHIFTS) {
      const w = weigh(cloudModel(id, atoms, velocity, sigma, b, shift, scene.coverage), scene);
      if (w.evidence > best.evidence) best = w;
    }
  }
  const last = refinedVelocity(best);
  if (last.members > 0) {
    ({ velocity, sigma } = last);
    const moved = weigh({ ...best.system, velocity, velocitySigma: sigma, species: shifted(best.system, velocity, sigma) }, scene);
    if (moved.evidence > best.evidence - 1) best = moved;
  }
  return { weighed: best, members: last.members };
}

function shifted(system: SystemModel, velocity: number, sigma: number): SpeciesModel[] {
  const factor = dopplerFactor(velocity);
  return system.species.map((s) => ({
    ...s,
    lines: s.lines.map((e) => ({ ...e, wavelength: e.line.wavelengthNm * factor, sigmaV: Math.hypot(sigma, 0.1) })),
  }));
}

/** Votes of narrow dips for velocities: pairs of dip and line, weighed by how well the strength suits a typical cloud. */
function votes(atoms: readonly Line[], scene: Scene, grid: VelocityGrid, used: ReadonlySet<FeatureView>): Float64Array {
  const out = new Float64Array(grid.count);
  const { features, coverage, background } = scene;
  const widest = 3.2 * coverage.elementV + 25;
  const rangeV = -grid.from;
  for (const line of atoms) {
    const logW = Math.log10(
      growthWidth(10 ** typicalColumn(line), line.oscillatorStrength!, line.wavelengthNm, 2.2, line.einsteinA ?? 1e8),
    );
    const limit = coverage.sigmaW(line.wavelengthNm, (line.wavelengthNm * coverage.elementV) / C_KM_PER_S);
    if (!(logW > Math.log10(limit) - 0.3)) continue;
    const nm = (line.wavelengthNm * rangeV) / C_KM_PER_S;
    for (
      let i = featureAt(features, line.wavelengthNm - nm);
      i < features.length && features[i]!.wavelength < line.wavelengthNm + nm;
      i++
    ) {
      const f = features[i]!;
      if (f.kind !== 'dip' || f.fwhmV > widest || used.has(f) || f.flags.includes('cosmic')) continue;
      const free = 1 - background.explained(f.index, NOBODY);
      const weight = free * Math.exp(-0.5 * ((f.logW - logW) / 0.7) ** 2);
      const v = velocityOf(f.wavelength, line.wavelengthNm);
      const centre = (v - grid.from) / grid.step;
      const s = Math.max(f.sigmaV, 0.25 * coverage.elementV) / grid.step;
      for (let k = Math.max(0, Math.ceil(centre - 3 * s)); k <= Math.min(grid.count - 1, centre + 3 * s); k++)
        out[k]! += weight * Math.exp(-0.5 * ((k - centre) / s) ** 2);
    }
  }
  return out;
}

const NOBODY = { id: '' } as SystemModel;

/** A cloud at a velocity: all species at typical columns times a common factor, through a curve of growth. */
export function cloudModel(
  id: string,
  atoms: readonly Line[],
  velocity: number,
  sigma: number,
  b: number,
  shift: number,
  coverage: Coverage,
): SystemModel {
  const factor = dopplerFactor(velocity);
  const bySpecies = new Map<string, Expected[]>();
  for (const line of atoms) {
    const wavelength = line.wavelengthNm * factor;
    const column = 10 ** (typicalColumn(line) + shift);
    const tau = centralDepth(column, line.oscillatorStrength!, line.wavelengthNm, b);
    const width = growthWidth(column, line.oscillatorStrength!, line.wavelengthNm, b, line.einsteinA ?? 1e8);
    const logW = Math.log10(width);
    const limit = coverage.sigmaW(wavelength, (wavelength * coverage.elementV) / C_KM_PER_S);
    if (!(logW > Math.log10(limit) - 0.9)) continue;
    // a saturated core is wider than b alone; damped lines as wide as their equivalent width
    const own = Math.max(2 * b * Math.sqrt(Math.log(Math.max(2, tau / Math.LN2))), (0.9 * width * C_KM_PER_S) / wavelength);
    const excited = (line.lowerEnergyPerCm ?? 0) > 1;
    const e: Expected = {
      line,
      wavelength,
      logW,
      scatter: excited ? 0.35 : LINE_SCATTER,
      sigmaV: Math.hypot(sigma, 0.1),
      fwhmV: Math.hypot(coverage.elementV, own),
    };
    const list = bySpecies.get(line.species);
    if (list) list.push(e);
    else bySpecies.set(line.species, [e]);
  }
  const species = [...bySpecies].map(([name, list]) => ({
    species: name,
    lines: list,
    priorMean: 0,
    priorSigma: SPECIES_SIGMA,
    presence: / /.test(name) ? ATOM_PRESENCE : MOLECULE_PRESENCE,
  }));
  const strengthOf = (wanted: readonly Line[]): Float64Array =>
    Float64Array.from(wanted, (l) =>
      l.type === 'band' || !isCommonInClouds(l.species) || !((l.oscillatorStrength ?? 0) > 0)
        ? NaN
        : Math.log10(growthWidth(10 ** (typicalColumn(l) + shift), l.oscillatorStrength!, l.wavelengthNm, b, l.einsteinA ?? 1e8)),
    );
  return {
    id,
    family: 'interstellar',
    kind: 'dip',
    velocity,
    velocitySigma: sigma,
    significance: 0,
    fwhmV: coverage.elementV,
    species,
    strengthOf,
  };
}

/**
 * Diffuse bands in front of the strongest clouds, blended into one set: bands are wider than the spacing of most clouds.
 * @param clouds found so far, strongest first; without any, the bands stand at zero velocity with a generous error
 */
export function diffuseBands(lines: readonly Line[], clouds: readonly SystemModel[], coverage: Coverage): SpeciesModel | null {
  const bands = lines.filter((l) => l.type === 'band' && l.bandFwhmNm !== null && l.species === 'DIB');
  const main = clouds[0];
  const factor = dopplerFactor(main?.velocity ?? 0);
  const out: Expected[] = [];
  for (const line of bands) {
    const wavelength = line.wavelengthNm * factor;
    if (wavelength < coverage.fromNm || wavelength > coverage.toNm) continue;
    const perMag = line.relativeIntensity !== null ? line.relativeIntensity * 1e-4 : BAND_PER_MAG_WEAK;
    const spread = clouds.length > 1 ? Math.abs(clouds[0]!.velocity - clouds[1]!.velocity) / 2 : 0;
    const rest = (BAND_REST_SIGMA_NM / wavelength) * C_KM_PER_S;
    out.push({
      line,
      wavelength,
      logW: Math.log10(perMag * REDDENING),
      scatter: line.relativeIntensity !== null ? 0.15 : 0.45,
      sigmaV: Math.hypot(rest, spread, main ? main.velocitySigma : 15),
      fwhmV: Math.hypot(coverage.elementV, (line.bandFwhmNm! / wavelength) * C_KM_PER_S),
    });
  }
  return out.length ? { species: 'DIB', lines: out, priorMean: 0, priorSigma: 0.4, presence: main ? 0.8 : 0.3 } : null;
}
