import type { Line } from '../linelist/index.js';
import type { Frame } from '../spectrum/index.js';
import { airModel, findAir } from './air.js';
import { assumedCloud, findClouds } from './clouds.js';
import type { SystemModel } from './model.js';
import { assumedNebula, findNebulae, type LogContinuum } from './nebulae.js';
import type { SetSystem } from './settings.js';
import { assumedStar, findStar, type TemperatureHint } from './star.js';
import type { Scene } from './search.js';
import { movedBack, movedScene } from './steer.js';

/** What building a system takes beside the scene; lines by family, as the searches get them. */
export interface Ground {
  readonly photosphere: readonly Line[];
  readonly interstellar: readonly Line[];
  readonly nebular: readonly Line[];
  readonly telluric: readonly Line[];
  readonly temperature: TemperatureHint | null;
  readonly frame: Frame;
  readonly logContinuum: LogContinuum;
}

/** Velocities over which a search about the set one looks, so that it can tell a peak from the ground around it. */
const SEARCHED = 100;
/** Smallest error given to a velocity that was set, in resolution elements. */
const SURE = 0.05;

/**
 * The system at a velocity that a person set. It is looked for within the tolerance as any other; when nothing stands out there, the model of
 * its family is put at the velocity itself, with the tolerance as its error, and the ranking decides what lines it can claim.
 */
export function setSystem(wanted: SetSystem, n: number, scene: Scene, ground: Ground): SystemModel {
  const { velocityKmPerS: velocity, toleranceKmPerS: tolerance } = wanted;
  const moved: Scene = { ...movedScene(scene, velocity), permits: (v) => Math.abs(v) <= tolerance };
  const found = search(wanted, moved, ground);
  const sigma = Math.max(tolerance, SURE * scene.coverage.elementV);
  const system = found ? movedBack(found, velocity) : assume(wanted, n, scene, ground, sigma);
  return { ...system, id: nameOf(wanted, n), set: true };
}

function search({ family, velocityKmPerS }: SetSystem, moved: Scene, ground: Ground): SystemModel | null {
  if (family === 'stellar') return findStar(moved, ground.photosphere, ground.temperature, SEARCHED);
  if (family === 'interstellar') return findClouds(ground.interstellar, moved, SEARCHED)[0] ?? null;
  if (family === 'telluric') return findAir(ground.telluric, 'dip', moved, 'unknown');
  const factor = 1 + velocityKmPerS / 299_792.458;
  return findNebulae(ground.nebular, moved, SEARCHED, (nm) => ground.logContinuum(nm * factor))[0] ?? null;
}

function assume({ family, velocityKmPerS }: SetSystem, n: number, scene: Scene, ground: Ground, sigma: number): SystemModel {
  const v = velocityKmPerS;
  const id = `set${n}`;
  if (family === 'stellar') return assumedStar(scene, ground.photosphere, ground.temperature, v, sigma);
  if (family === 'interstellar') return assumedCloud(id, ground.interstellar, scene, v, sigma);
  if (family === 'telluric') return airModel(ground.telluric, 'dip', v, sigma, scene.coverage);
  return assumedNebula(id, ground.nebular, scene, v, sigma, ground.logContinuum);
}

/** 'star-set1', 'cloud-set2': systems found by the analysis keep their usual names. */
const NAMES: Record<SetSystem['family'], string> = { stellar: 'star', interstellar: 'cloud', nebular: 'nebula', telluric: 'air' };
const nameOf = ({ family }: SetSystem, n: number): string => `${NAMES[family]}-set${n}`;
