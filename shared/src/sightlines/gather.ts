import { dopplerFactor, type KmPerS } from '../units/index.js';
import type { ComparisonSettings, Side } from './comparison.js';
import type { Light } from './light.js';

/** A cloud tried on both sightlines. Velocities are on the common scale, km/s. */
export interface CloudDraft {
  /** where it is measured on each side, and how well that is known */
  readonly at: Record<Side, { velocity: number; sigma: number }>;
  /** sides whose analysis found it */
  readonly found: readonly Side[];
}

export interface Pair {
  readonly a: Light;
  readonly b: Light;
}

const SIGMAS = 3;
const LEAST_SIGMA = 0.05; // km/s

/** Clouds of both analyses; two that agree within their errors or the setting are one, nearest first. */
export function gatherClouds(pair: Pair, settings: ComparisonSettings): CloudDraft[] {
  const [a, b] = [cloudsOf(pair.a), cloudsOf(pair.b)];
  const drafts: CloudDraft[] = [];
  const pairs = a
    .flatMap((x) => b.map((y) => ({ x, y, apart: Math.abs(x.velocity - y.velocity) })))
    .filter(({ x, y, apart }) => apart < Math.max(settings.matchKmPerS, SIGMAS * Math.hypot(x.sigma, y.sigma)))
    .sort((p, q) => p.apart - q.apart);
  const taken = new Set<object>();
  for (const { x, y } of pairs) {
    if (taken.has(x) || taken.has(y)) continue;
    taken.add(x).add(y);
    drafts.push({ at: { a: { ...x }, b: { ...y } }, found: ['a', 'b'] });
  }
  for (const x of a) if (!taken.has(x)) drafts.push({ at: { a: { ...x }, b: { ...x } }, found: ['a'] });
  for (const y of b) if (!taken.has(y)) drafts.push({ at: { a: { ...y }, b: { ...y } }, found: ['b'] });
  const near = (v: number) => drafts.some((d) => Math.abs(d.at.a.velocity - v) < settings.matchKmPerS);
  for (const v of settings.extraCloudsKmPerS) {
    const at = { velocity: v, sigma: settings.matchKmPerS };
    if (!near(v)) drafts.push({ at: { a: { ...at }, b: { ...at } }, found: [] });
  }
  return drafts.sort((p, q) => p.at.a.velocity - q.at.a.velocity);
}

const cloudsOf = (light: Light) =>
  light.analysis.systems
    .filter((s) => s.family === 'interstellar')
    .map((s) => ({
      velocity: light.velocityOf(dopplerFactor(s.velocityKmPerS as KmPerS), 1),
      sigma: Math.max(LEAST_SIGMA, s.velocitySigmaKmPerS),
    }));

const HIDDEN = 0.8; // of a resolution element: closer to a cloud of this side, another one's line cannot be told from its

/** The cloud of this side behind whose lines those of `drafts[k]` would hide; null when they would stand free. */
export function hiddenBehind(drafts: readonly CloudDraft[], k: number, side: Side, elementV: number): number | null {
  const { at, found } = drafts[k]!;
  if (found.includes(side)) return null;
  const nearest = drafts.findIndex(
    (d, j) => j !== k && d.found.includes(side) && Math.abs(d.at[side].velocity - at[side].velocity) < HIDDEN * elementV,
  );
  return nearest < 0 ? null : nearest;
}
