import type { Family, Line, LineList } from '../linelist/index.js';
import type { AnalysisSettings, ForbiddenSystem, SetSystem } from './settings.js';
import type { SystemModel } from './model.js';
import type { Scene } from './search.js';
import { dopplerFactor, velocityOf, type Coverage } from './views.js';

/** What a person says about velocity systems. */
export interface SystemWishes {
  readonly set: readonly SetSystem[];
  readonly forbidden: readonly ForbiddenSystem[];
}
export const NO_WISHES: SystemWishes = { set: [], forbidden: [] };

/**
 * Velocities at which a family may still be searched for: not forbidden, and not where it was set already.
 * @param apart km/s by which systems of one family must differ to be told apart
 */
export function permitted({ set, forbidden }: SystemWishes, family: Family, apart: number): ((velocity: number) => boolean) | undefined {
  const taken = set.filter((s) => s.family === family);
  const ranges = [
    ...forbidden.filter((f) => f.family === family).map((f) => [f.fromKmPerS, f.toKmPerS] as const),
    ...taken.map(
      ({ velocityKmPerS: v, toleranceKmPerS }) => [v - Math.max(toleranceKmPerS, apart), v + Math.max(toleranceKmPerS, apart)] as const,
    ),
  ];
  return ranges.length ? (velocity) => ranges.every(([from, to]) => velocity < from || velocity > to) : undefined;
}

/** The list as a person wants it considered: species left out, and species offered to families that they are not usual in. */
export function steeredList(list: LineList, { onlySpecies, withoutSpecies, alsoSpecies }: AnalysisSettings): LineList {
  if (onlySpecies.length + withoutSpecies.length + alsoSpecies.length === 0) return list;
  const only = onlySpecies.length ? new Set([...onlySpecies, ...alsoSpecies.map((a) => a.species)]) : null;
  const without = new Set(withoutSpecies);
  const also = new Map<string, Family[]>();
  for (const { species, family } of alsoSpecies) also.set(species, [...(also.get(species) ?? []), family]);
  const lines = list.lines.filter(({ species }) => !without.has(species) && (!only || only.has(species)));
  return { ...list, lines: lines.map((line) => offered(line, also.get(line.species) ?? [])) };
}

const offered = (line: Line, families: readonly Family[]): Line =>
  families.length ? { ...line, settings: [...new Set([...line.settings, ...families])], asked: true } : line;

/** Species that a person named and the list does not have. */
export function strangers(list: LineList, { onlySpecies, withoutSpecies, alsoSpecies }: AnalysisSettings): string[] {
  const asked = new Set([...onlySpecies, ...withoutSpecies, ...alsoSpecies.map(({ species }) => species)]);
  if (asked.size) for (const { species } of list.lines) asked.delete(species);
  return [...asked];
}

/**
 * A scene as an observer moving with `velocity` would have measured it: what is at that velocity stands at zero. Searches about a velocity
 * far from zero, or near one that a person set, are then the usual search.
 */
export function movedScene(scene: Scene, velocity: number): Scene {
  const factor = dopplerFactor(velocity);
  const shift = Math.log10(factor);
  const { coverage, background } = scene;
  const moved: Coverage = {
    ...coverage,
    fromNm: coverage.fromNm / factor,
    toNm: coverage.toNm / factor,
    sigmaW: (wavelength, fwhmNm) => coverage.sigmaW(wavelength * factor, fwhmNm * factor) / factor,
  };
  return {
    ...scene,
    features: scene.features.map((f) => ({ ...f, wavelength: f.wavelength / factor, logW: f.logW - shift, fwhmNm: f.fwhmNm / factor })),
    coverage: moved,
    background: { ...background, rate: (kind, wavelength) => background.rate(kind, wavelength * factor) },
  };
}

/** A system found in a moved scene, as it stands in the observed one. Velocities compose as Doppler factors. */
export function movedBack(system: SystemModel, velocity: number): SystemModel {
  const factor = dopplerFactor(velocity);
  const shift = Math.log10(factor);
  const { strengthOf } = system;
  return {
    ...system,
    velocity: velocityOf(dopplerFactor(system.velocity) * factor, 1),
    ...(strengthOf && { strengthOf: (lines: readonly Line[]) => strengthOf(lines).map((logW) => logW + shift) }),
    species: system.species.map((s) => ({
      ...s,
      lines: s.lines.map((e) => ({ ...e, wavelength: e.wavelength * factor, logW: e.logW + shift })),
    })),
  };
}
