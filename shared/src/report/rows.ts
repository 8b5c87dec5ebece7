import type { Identification } from '../contract/index.js';
import type { Candidate, Feature } from '../identify/index.js';
import type { Line } from '../linelist/index.js';
import type { ReviewState } from '../review/index.js';
import type { ReportedSpectrum } from './types.js';

/** One feature of a report: what was measured, what it is said to be, and who said so. Lengths in nm, velocities in km/s. */
export interface ReportRow {
  readonly spectrum: number;
  readonly feature: number | null;
  readonly kind: 'dip' | 'peak';
  readonly wavelengthNm: number;
  readonly wavelengthSigmaNm: number;
  readonly equivalentWidthNm: number;
  readonly equivalentWidthSigmaNm: number;
  readonly fwhmNm: number;
  readonly fwhmSigmaNm: number | null;
  readonly depth: number | null;
  readonly depthSigma: number | null;
  readonly snr: number | null;
  readonly flags: readonly string[];
  readonly reading: ReportedReading;
  readonly status: ReviewState | 'unreviewed';
  readonly reviewer: string | null;
  readonly reviewedAt: string | null;
  readonly remark: string;
}

/** What a feature is said to be; `species` null: unidentified. */
export interface ReportedReading {
  readonly species: string | null;
  readonly restNm: number | null;
  readonly family: string | null;
  readonly systemId: string | null;
  readonly velocityKmPerS: number | null;
  readonly velocitySigmaKmPerS: number | null;
  readonly probability: number;
  readonly line: Line | null;
  readonly source: string | null;
}

/** Said of a decision whose feature a later analysis no longer finds. */
const NOT_FOUND_AGAIN = 'not found again';

/** Every feature of the current analysis, decided on or not, and every decision whose feature is gone, by wavelength. */
export function reportRows(spectrum: ReportedSpectrum, number: number, lines: ReadonlyMap<string, Line>): ReportRow[] {
  const decisions = new Map(spectrum.identifications.map((decision) => [decision.featureIndex, decision]));
  const found = (spectrum.analysis?.features ?? []).map((feature) => ofFeature(feature, decisions.get(feature.index), number, lines));
  const gone = spectrum.identifications.filter(({ featureIndex }) => featureIndex === null).map((each) => ofDecision(each, number, lines));
  return [...found, ...gone].sort((a, b) => a.wavelengthNm - b.wavelengthNm);
}

function ofFeature(feature: Feature, decision: Identification | undefined, spectrum: number, lines: ReadonlyMap<string, Line>): ReportRow {
  const { kind, wavelengthNm, wavelengthSigmaNm, equivalentWidthNm, equivalentWidthSigmaNm, fwhmNm, fwhmSigmaNm } = feature;
  const { depth, depthSigma, snr, flags } = feature;
  return {
    ...{ spectrum, feature: feature.index, kind, wavelengthNm, wavelengthSigmaNm, equivalentWidthNm, equivalentWidthSigmaNm },
    ...{ fwhmNm, fwhmSigmaNm, depth, depthSigma, snr, flags },
    reading: decision ? decidedReading(decision, lines) : likeliestReading(feature, lines),
    ...reviewOf(decision),
  };
}

function ofDecision(decision: Identification, spectrum: number, lines: ReadonlyMap<string, Line>): ReportRow {
  const { kind, wavelengthNm, wavelengthSigmaNm, equivalentWidthNm, equivalentWidthSigmaNm, fwhmNm } = decision;
  return {
    ...{ spectrum, feature: null, kind, wavelengthNm, wavelengthSigmaNm, equivalentWidthNm, equivalentWidthSigmaNm },
    ...{ fwhmNm, fwhmSigmaNm: null, depth: null, depthSigma: null, snr: null, flags: [NOT_FOUND_AGAIN] },
    reading: decidedReading(decision, lines),
    ...reviewOf(decision),
  };
}

function reviewOf(decision: Identification | undefined): Pick<ReportRow, 'status' | 'reviewer' | 'reviewedAt' | 'remark'> {
  if (!decision) return { status: 'unreviewed', reviewer: null, reviewedAt: null, remark: '' };
  const { state, decidedBy, decidedAt, history } = decision;
  return { status: state, reviewer: decidedBy, reviewedAt: decidedAt, remark: history.at(-1)?.remark ?? '' };
}

function decidedReading(decision: Identification, lines: ReadonlyMap<string, Line>): ReportedReading {
  const { species, restNm, family, systemId, velocityKmPerS, velocitySigmaKmPerS, probability, lineId, lineSource } = decision;
  const line = lineId === null ? null : (lines.get(lineId) ?? null);
  return { species, restNm, family, systemId, velocityKmPerS, velocitySigmaKmPerS, probability, line, source: lineSource };
}

/** The analysis' own opinion while nobody decided: its first candidate, or that no listed line fits, whichever is likelier. */
function likeliestReading({ candidates, unidentifiedProbability }: Feature, lines: ReadonlyMap<string, Line>): ReportedReading {
  const [first] = candidates;
  return first && first.probability >= unidentifiedProbability ? candidateReading(first, lines) : unidentified(unidentifiedProbability);
}

function candidateReading(candidate: Candidate, lines: ReadonlyMap<string, Line>): ReportedReading {
  const { species, restNm, family, systemId, velocityKmPerS, velocitySigmaKmPerS, probability, lineId } = candidate;
  const line = lines.get(lineId) ?? null;
  return { species, restNm, family, systemId, velocityKmPerS, velocitySigmaKmPerS, probability, line, source: line?.source ?? null };
}

const unidentified = (probability: number): ReportedReading => ({
  ...{ species: null, restNm: null, family: null, systemId: null, velocityKmPerS: null, velocitySigmaKmPerS: null },
  ...{ probability, line: null, source: null },
});
