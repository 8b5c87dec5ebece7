import { nebularIntensity } from '../atoms/index.js';
import type { Line } from '../linelist/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { findClouds } from './clouds.js';
import type { SystemModel } from './model.js';
import { findNebulae, type LogContinuum } from './nebulae.js';
import type { Scene } from './search.js';
import { findStar, type TemperatureHint } from './star.js';
import { movedBack, movedScene } from './steer.js';
import { velocityOf, type FeatureView } from './views.js';

/** Lines by family, of the whole list: at a redshift, lines from far outside the observed range come into it. */
export interface WholeList {
  readonly nebular: readonly Line[];
  readonly photosphere: readonly Line[];
  readonly interstellar: readonly Line[];
}

const FARTHEST = Math.log(2.2); // ln (1 + z): optical patterns stay recognisable in optical data up to z of about 1
const BRIGHT = 0.5; // log10 intensity (H beta = 100) of lines that make the pattern
const STRONG = 6; // sigma of peaks that make the pattern
const MOST_PEAKS = 30;
const FEWEST_PEAKS = 3;
const PLACES = 8;
const AROUND = 400; // km/s: within a galaxy, and what the first guess is off
const ENOUGH = 8; // ln evidence, on top of the ln of the number of independent redshifts tried

/**
 * Gas far beyond the velocities looked for as usual: the redshift at which the unexplained peaks make the pattern of bright nebular lines,
 * accepted when its evidence outweighs the number of redshifts tried; then the galaxy's own gas in absorption and its stars about there.
 */
export function findFar(
  scene: Scene,
  lines: WholeList,
  hint: TemperatureHint | null,
  logContinuum: LogContinuum,
  rangeV: number,
): SystemModel[] {
  const peaks = unexplainedPeaks(scene);
  if (peaks.length < FEWEST_PEAKS) return [];
  const trials = FARTHEST / (scene.coverage.elementV / C_KM_PER_S);
  let best: { system: SystemModel; velocity: number } | null = null;
  for (const velocity of likelyVelocities(peaks, lines.nebular, scene.coverage.elementV, rangeV)) {
    const factor = Math.sqrt((1 + velocity / C_KM_PER_S) / (1 - velocity / C_KM_PER_S));
    const [system] = findNebulae(within(lines.nebular, scene, factor), movedScene(scene, velocity), AROUND, (nm) =>
      logContinuum(nm * factor),
    );
    if (!system || system.significance ** 2 / 2 < ENOUGH + Math.log(trials)) continue;
    if (!best || system.significance > best.system.significance) best = { system, velocity };
  }
  if (!best) return [];
  const gas = movedBack(best.system, best.velocity);
  return [{ ...gas, id: 'far-nebula' }, ...aroundIt(gas.velocity, scene, lines, hint)];
}

function aroundIt(velocity: number, scene: Scene, lines: WholeList, hint: TemperatureHint | null): SystemModel[] {
  const factor = Math.sqrt((1 + velocity / C_KM_PER_S) / (1 - velocity / C_KM_PER_S));
  const moved = movedScene(scene, velocity);
  const star = findStar(moved, within(lines.photosphere, scene, factor), hint, AROUND);
  const clouds = findClouds(within(lines.interstellar, scene, factor), moved, AROUND).slice(0, 1);
  return [
    ...(star ? [{ ...movedBack(star, velocity), id: 'far-star' }] : []),
    ...clouds.map((c) => ({ ...movedBack(c, velocity), id: 'far-cloud' })),
  ];
}

const within = (lines: readonly Line[], { coverage }: Scene, factor: number): Line[] => {
  const margin = 1 + (1.2 * AROUND) / C_KM_PER_S;
  return lines.filter((l) => l.wavelengthNm * factor > coverage.fromNm / margin && l.wavelengthNm * factor < coverage.toNm * margin);
};

function unexplainedPeaks({ features, background }: Scene): FeatureView[] {
  return features
    .filter((f) => f.kind === 'peak' && f.significance >= STRONG && !f.flags.includes('cosmic'))
    .filter((f) => background.explained(f.index, { id: '' } as SystemModel) < 0.5)
    .sort((a, b) => b.significance - a.significance)
    .slice(0, MOST_PEAKS);
}

/** Velocities at which most of the peaks' weight meets most of the pattern's: votes of pairs in bins of ln (1 + z), as wide as a resolution element. */
function likelyVelocities(peaks: readonly FeatureView[], lines: readonly Line[], elementV: number, rangeV: number): number[] {
  const intensity = nebularIntensity(lines);
  const bin = (0.5 * elementV) / C_KM_PER_S;
  const near = rangeV / C_KM_PER_S;
  const votes = new Float64Array(Math.ceil(FARTHEST / bin) + 4);
  lines.forEach((line, k) => {
    if (!(intensity[k]! > BRIGHT)) return;
    const weight = 10 ** (0.25 * intensity[k]!);
    for (const f of peaks) {
      const z = Math.log(f.wavelength / line.wavelengthNm);
      if (z < near || z > FARTHEST) continue;
      const at = z / bin;
      for (let i = Math.max(0, Math.floor(at) - 1); i <= at + 2; i++)
        votes[i]! += weight * Math.sqrt(f.significance) * Math.exp(-0.5 * ((i - at) / 0.8) ** 2);
    }
  });
  const order = [...votes.keys()].filter((i) => votes[i]! > 0).sort((a, b) => votes[b]! - votes[a]! || a - b);
  const chosen: number[] = [];
  for (const i of order) {
    if (chosen.length >= PLACES) break;
    if (chosen.every((c) => Math.abs(c - i) > 3)) chosen.push(i);
  }
  return chosen.map((i) => velocityOf(Math.exp(i * bin), 1));
}
