import type { Line } from '../linelist/index.js';
import { C_KM_PER_S } from '../units/index.js';
import type { Frame } from '../spectrum/index.js';
import { correlate, peaksOf, type VelocityGrid } from './correlate.js';
import type { Expected, SpeciesModel, SystemModel } from './model.js';
import { isPermitted, refinedVelocity, weigh, type Scene, type Weighed } from './search.js';
import { dopplerFactor, scaleSigma, type Coverage } from './views.js';

/** Largest velocity the Earth can have against the frame, km/s: its orbit and rotation, with room for the solar motion in LSR frames. */
const REACH: Record<Frame, number> = {
  topocentric: 2,
  geocentric: 3,
  heliocentric: 33,
  barycentric: 33,
  lsrk: 55,
  lsrd: 55,
  source: 300,
  unknown: 60,
};
const ENOUGH = 8;
const FULL_ABSORPTION_LOG_W = -2.1; // log10 nm of an absorption line of relative strength 1 near one air mass, typical
const SKY_LOG_W = -2.3; // log10 nm of the brightest sky lines against a faint source: moved by the data over decades

/** Expected lines of the air: absorption or sky emission, grouped by band since strengths are relative within one. */
export function airModel(lines: readonly Line[], kind: 'dip' | 'peak', velocity: number, sigma: number, coverage: Coverage): SystemModel {
  const factor = dopplerFactor(velocity);
  const groups = new Map<string, Expected[]>();
  for (const line of lines) {
    const sky = line.type !== 'telluric';
    if (sky !== (kind === 'peak')) continue;
    const wavelength = line.wavelengthNm * factor;
    if (wavelength < coverage.fromNm || wavelength > coverage.toNm) continue;
    const known = line.relativeIntensity !== null && (!sky || line.relativeIntensityScale === 'sky_photons');
    const relative = known ? Math.log10(sky ? line.relativeIntensity! / 100 : Math.max(line.relativeIntensity!, 1e-4)) : -0.7;
    const group = sky ? line.species : known ? `${line.species} ${line.multiplet}` : `${line.species} unmeasured`;
    const e: Expected = {
      line,
      wavelength,
      // absorption saturates: strong lines grow with about the square root of their strength
      logW: sky ? SKY_LOG_W + relative : FULL_ABSORPTION_LOG_W + (relative > -1 ? 0.6 * relative : relative + 0.4),
      scatter: known ? 0.2 : 0.4,
      sigmaV: Math.hypot(sigma, Math.max(line.source.includes('memory') ? 1 : 0.25, scaleSigma(coverage))),
      fwhmV: coverage.elementV * 1.05,
    };
    const list = groups.get(group);
    if (list) list.push(e);
    else groups.set(group, [e]);
  }
  const species: SpeciesModel[] = [...groups].map(([name, list]) => ({
    species: name,
    lines: list,
    priorMean: 0,
    priorSigma: kind === 'peak' ? 1 : 0.45,
    presence: 0.8,
  }));
  return {
    id: kind === 'dip' ? 'air' : 'sky',
    family: 'telluric',
    kind,
    velocity,
    velocitySigma: sigma,
    significance: 0,
    fwhmV: coverage.elementV,
    species,
  };
}

const KNOWN_ENOUGH = 4; // ln evidence, where time, site and pointing say at which velocity the air must be
const KNOWN_WITHIN = 1.5; // km/s: the wavelength scale's own error at high resolution

/**
 * The Earth's air, if its lines show: its velocity is what the frame took off. Where that is known it is looked for there first.
 * @param known km/s; null when time, site or pointing is not known
 */
export function findAir(
  lines: readonly Line[],
  kind: 'dip' | 'peak',
  scene: Scene,
  frame: Frame,
  known: number | null = null,
): SystemModel | null {
  if (known === null) return searchAir(lines, kind, scene, frame, ENOUGH);
  const within = Math.max(KNOWN_WITHIN, 0.5 * scene.coverage.elementV);
  const there: Scene = { ...scene, permits: (v) => isPermitted(scene, v) && Math.abs(v - known) < within };
  return searchAir(lines, kind, there, frame, KNOWN_ENOUGH) ?? searchAir(lines, kind, scene, frame, ENOUGH);
}

function searchAir(lines: readonly Line[], kind: 'dip' | 'peak', scene: Scene, frame: Frame, enough: number): SystemModel | null {
  const reach = REACH[frame];
  const features = scene.features.filter((f) => f.kind === kind && f.fwhmV < 3 * scene.coverage.elementV + 5);
  const listed = lines.filter((l) => (l.type !== 'telluric') === (kind === 'peak'));
  if (features.length === 0 || listed.length === 0) return null;
  const step = Math.max(0.15 * scene.coverage.elementV, 0.3);
  const grid: VelocityGrid = { from: -reach - 3 * step, step, count: 2 * Math.ceil(reach / step) + 7 };
  const template = {
    wavelength: listed.map((l) => l.wavelengthNm),
    weight: listed.map((l) =>
      l.relativeIntensity === null ? 0.2 : Math.sqrt(l.type === 'telluric' ? l.relativeIntensity : l.relativeIntensity / 100),
    ),
  };
  const weight = features.map(
    (f) =>
      Math.sqrt(Math.min((10 ** f.logW / f.wavelength) * C_KM_PER_S, 20)) *
      (1 - scene.background.explained(f.index, { id: '' } as SystemModel)),
  );
  const spread = features.map((f) => Math.hypot(f.sigmaV, 0.2 * scene.coverage.elementV));
  const peaks = peaksOf(
    correlate(features, weight, spread, template, grid),
    grid,
    0.5 * scene.coverage.elementV,
    scene.permits ? 60 : 6,
  ).filter((p) => Math.abs(p.velocity) <= reach + step && isPermitted(scene, p.velocity));
  let best: Weighed | null = null;
  for (const p of peaks) {
    const first = weigh(airModel(listed, kind, p.velocity, 0.1 * scene.coverage.elementV, scene.coverage), scene);
    const { velocity, sigma, members } = refinedVelocity(first);
    if (members === 0 || !isPermitted(scene, velocity)) continue;
    const w = weigh(airModel(listed, kind, velocity, sigma, scene.coverage), scene);
    if (!best || w.evidence > best.evidence) best = w;
  }
  if (!best || best.evidence < enough) return null;
  return { ...best.system, significance: Math.sqrt(2 * best.evidence) };
}
