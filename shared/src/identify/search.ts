import type { SystemModel } from './model.js';
import { positionSigma, speciesState, systemEvidence, type Background, type SpeciesState } from './offsets.js';
import { velocityOf, type Coverage, type FeatureView } from './views.js';

/** Ground that a search for systems stands on. */
export interface Scene {
  readonly features: readonly FeatureView[];
  readonly coverage: Coverage;
  readonly background: Background;
  /** whether a system may be at a velocity; absent: anywhere */
  readonly permits?: (velocity: number) => boolean;
}

export const isPermitted = ({ permits }: Scene, velocity: number): boolean => !permits || permits(velocity);

export interface Weighed {
  readonly system: SystemModel;
  readonly states: SpeciesState[];
  /** ln evidence ratio: system there against not */
  readonly evidence: number;
}

export function weigh(system: SystemModel, scene: Scene): Weighed {
  const states = system.species.map((s) => speciesState(s, system, scene.features, scene.coverage, scene.background));
  return { system, states, evidence: systemEvidence(states) };
}

/** The variant of a system with the highest evidence, its velocity refined on its own members twice. */
export function bestVariant(velocity: number, make: (velocity: number, sigma: number) => SystemModel[], scene: Scene): Weighed | null {
  let best: Weighed | null = null;
  for (const system of make(velocity, scene.coverage.elementV * 0.1)) {
    const w = weigh(system, scene);
    if (!best || w.evidence > best.evidence) best = w;
  }
  return best;
}

/** Weighted mean velocity of the lines a system explains by itself, and its error from weights and scatter. */
export function refinedVelocity(w: Weighed): { velocity: number; sigma: number; members: number } {
  const pairs: { v: number; sigma: number }[] = [];
  for (const s of w.states) {
    if (s.logEvidence < 1) continue;
    const offset = mode(s);
    for (const t of s.terms) {
      if (t.outcome !== 'seen' || !t.feature || !t.term) continue;
      if (Math.abs(t.feature.logW - t.expected.logW - offset) > 0.5) continue;
      pairs.push({
        v: velocityOf(t.feature.wavelength, t.expected.line.wavelengthNm),
        sigma: positionSigma({ ...t.expected, sigmaV: 0 }, t.feature),
      });
    }
  }
  if (pairs.length === 0) return { velocity: w.system.velocity, sigma: NaN, members: 0 };
  pairs.sort((a, b) => a.v - b.v);
  const centre = pairs[pairs.length >> 1]!.v;
  const good = pairs.filter((p) => Math.abs(p.v - centre) < 4 * Math.max(p.sigma, 0.3));
  const total = good.reduce((s, p) => s + p.sigma ** -2, 0);
  const velocity = good.reduce((s, p) => s + p.v * p.sigma ** -2, 0) / total;
  const chi2 = good.reduce((s, p) => s + ((p.v - velocity) / p.sigma) ** 2, 0);
  return { velocity, sigma: Math.sqrt(Math.max(1, chi2 / Math.max(good.length - 1, 1)) / total), members: good.length };
}

function mode(s: SpeciesState): number {
  let best = 0;
  for (let i = 1; i < s.logPosterior.length; i++) if (s.logPosterior[i]! > s.logPosterior[best]!) best = i;
  return (best - (s.logPosterior.length >> 1)) * 0.08;
}

const FACTORS = [0.5, 0.7, 1.4, 2];
const ENOUGH_LINES = 12; // seen lines: fewer tell nothing of their scatter

/** The system with the scatter of its lines' strengths as its own lines show it: line lists and models are better for some stars than for others. */
export function withOwnScatter(system: SystemModel, scene: Scene): SystemModel {
  const assumed = weigh(system, scene);
  const seen = assumed.states.reduce((sum, s) => sum + s.terms.filter((t) => t.outcome === 'seen').length, 0);
  if (seen < ENOUGH_LINES) return system;
  let best = assumed;
  for (const factor of FACTORS) {
    const tried = weigh(scattered(system, factor), scene);
    if (tried.evidence > best.evidence) best = tried;
  }
  return best.system;
}

function scattered(system: SystemModel, factor: number): SystemModel {
  const species = system.species.map((s) => ({
    ...s,
    lines: s.lines.map((e) => (e.line.element === 'H' ? e : { ...e, scatter: e.scatter * factor })),
  }));
  return { ...system, species };
}
