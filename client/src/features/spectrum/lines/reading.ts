import type { Analysis, Candidate, Feature, Identification, ReviewState } from '@foreveil/shared';
import type { MarkFamily } from '../../../plot/marks.js';

/** What a feature is taken for: a listed line in a velocity system, or nothing the list knows. */
export interface Reading {
  /** null: unidentified */
  readonly lineId: string | null;
  readonly systemId: string | null;
  readonly species: string | null;
  /** vacuum nm */
  readonly restNm: number | null;
  readonly family: MarkFamily;
  readonly velocityKmPerS: number | null;
  readonly velocitySigmaKmPerS: number | null;
  readonly probability: number;
  /** the analysis's own argument; null for 'unidentified' and for a reading that the newest analysis no longer offers */
  readonly candidate: Candidate | null;
}

/** A feature with what people and the analysis make of it. */
export interface LineRow {
  readonly feature: Feature;
  readonly reading: Reading;
  readonly state: ReviewState;
  readonly identification: Identification | null;
  /** the staff it sits on: a system's id or 'unidentified' */
  readonly staveId: string;
}

export const UNIDENTIFIED_STAVE = 'unidentified';

export const fromCandidate = (candidate: Candidate): Reading => ({ ...candidate, candidate });

export const unidentified = (probability: number): Reading => ({
  lineId: null,
  systemId: null,
  species: null,
  restNm: null,
  family: 'unidentified',
  velocityKmPerS: null,
  velocitySigmaKmPerS: null,
  probability,
  candidate: null,
});

/** Candidates a person may choose from: up to nine listed ones, then 'unidentified'. */
export const choices = (feature: Feature): Reading[] => [
  ...feature.candidates.slice(0, 9).map(fromCandidate),
  unidentified(feature.unidentifiedProbability),
];

/** What the analysis alone would say. */
function likeliest(feature: Feature): Reading {
  const [first] = feature.candidates;
  return first && first.probability >= feature.unidentifiedProbability
    ? fromCandidate(first)
    : unidentified(feature.unidentifiedProbability);
}

const FAMILIES: readonly string[] = ['stellar', 'interstellar', 'nebular', 'telluric'];

/** What a person decided, with the analysis's argument where it still offers that reading. */
function decided(feature: Feature, made: Identification): Reading {
  if (made.lineId === null) return unidentified(feature.unidentifiedProbability);
  const sameLine = feature.candidates.filter((c) => c.lineId === made.lineId);
  const candidate = sameLine.find((c) => c.systemId === made.systemId) ?? sameLine[0];
  if (candidate) return fromCandidate(candidate);
  return {
    lineId: made.lineId,
    systemId: made.systemId,
    species: made.species,
    restNm: made.restNm,
    family: FAMILIES.includes(made.family ?? '') ? (made.family as MarkFamily) : 'unidentified',
    velocityKmPerS: made.velocityKmPerS,
    velocitySigmaKmPerS: made.velocitySigmaKmPerS,
    probability: made.probability,
    candidate: null,
  };
}

function staveOf(reading: Reading, analysis: Analysis): string {
  const { systemId, family, velocityKmPerS: velocity } = reading;
  if (systemId !== null && analysis.systems.some((s) => s.id === systemId)) return systemId;
  const kin = analysis.systems.filter((s) => s.family === family);
  if (kin.length === 0 || velocity === null) return UNIDENTIFIED_STAVE;
  return kin.reduce((a, b) => (Math.abs(b.velocityKmPerS - velocity) < Math.abs(a.velocityKmPerS - velocity) ? b : a)).id;
}

/** Every feature with its reading and state, ascending in wavelength. */
export function lineRows(analysis: Analysis, identifications: readonly Identification[]): LineRow[] {
  const byFeature = new Map(identifications.map((i) => [i.featureIndex, i]));
  return analysis.features
    .map((feature) => {
      const identification = byFeature.get(feature.index) ?? null;
      const reading = identification ? decided(feature, identification) : likeliest(feature);
      return {
        feature,
        identification,
        reading,
        state: identification?.state ?? 'proposed',
        staveId: staveOf(reading, analysis),
      } satisfies LineRow;
    })
    .sort((a, b) => a.feature.wavelengthNm - b.feature.wavelengthNm);
}

export const sameReading = (a: Pick<Reading, 'lineId' | 'systemId'>, b: Pick<Reading, 'lineId' | 'systemId'>) =>
  a.lineId === b.lineId && (a.lineId === null || a.systemId === b.systemId);
