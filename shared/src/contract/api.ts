import type { Analysis, AnalysisSettings, AnalysisStep } from '../identify/index.js';
import type { Reading, ReadingCorrections } from '../reading/index.js';
import type { ReviewAction, ReviewState } from '../review/index.js';
import type { MemberRole } from './roles.js';

/** All times are ISO 8601 in UTC with Z. Ids are UUIDs. Every mutable resource carries `version`, also sent as a strong ETag. */
export type Iso = string;

export interface Me {
  id: string;
  email: string;
  name: string;
  /** manages the accounts of the site */
  administrator: boolean;
}
export interface SignIn {
  email: string;
  password: string;
  /** of the authenticator app, or a recovery code; asked for with second_factor_needed */
  code?: string;
}

export interface Member {
  userId: string;
  name: string;
  role: MemberRole;
}
export interface ProgrammeSummary {
  id: string;
  name: string;
  description: string;
  simulated: boolean;
  role: MemberRole;
  version: number;
  targets: number;
  spectra: number;
  accepted: number;
  open: number;
}
export interface Programme extends ProgrammeSummary {
  members: Member[];
}
export interface NewProgramme {
  name: string;
  description?: string;
}

export interface TargetSummary {
  id: string;
  name: string;
  kind: TargetKind;
  simulated: boolean;
  raDeg: number | null;
  decDeg: number | null;
  notes: string;
  version: number;
  accepted: number;
  rejected: number;
  open: number;
  spectra: SpectrumSummary[];
}
export type TargetKind = 'star' | 'nebula' | 'sightline' | 'other';
export interface NewTarget {
  name: string;
  kind: TargetKind;
  raDeg?: number | null;
  decDeg?: number | null;
  notes?: string;
}
/** A target with what was agreed on it. */
export interface Target extends TargetSummary {
  identifications: Identification[];
}

export interface SpectrumSummary {
  id: string;
  targetId: string;
  label: string;
  fileName: string;
  points: number;
  fromNm: number;
  toNm: number;
  resolvingPower: number | null;
  observedAt: string | null;
  instrument: string | null;
  createdAt: Iso;
  createdBy: string;
  /** small preview for light strips, 512 columns over [fromNm, toNm]: normalised flux minimum and maximum; null where masked */
  preview: { low: (number | null)[]; high: (number | null)[] } | null;
  analysis: AnalysisSummary | null;
}
export interface SpectrumDetail extends SpectrumSummary {
  programmeId: string;
  targetName: string;
  simulated: boolean;
  sizeBytes: number;
  sha256: string;
  reading: Reading;
  corrections: ReadingCorrections;
  hasSigma: boolean;
  /** counts every change of the row */
  version: number;
  /** counts how often the file was read; samples and analyses belong to one */
  readingRevision: number;
  /** name of the recipe by which it was read */
  recipe: string | null;
}
/** Multipart upload: `file` and these fields as a JSON string in the part `meta`. Either targetId or targetName. */
export interface UploadMeta {
  targetId?: string;
  targetName?: string;
  targetKind?: TargetKind;
  label?: string;
  corrections?: ReadingCorrections;
  /** name of the recipe that the corrections come from */
  recipe?: string;
}

/** UWS phases. */
export type AnalysisPhase = 'QUEUED' | 'EXECUTING' | 'COMPLETED' | 'ERROR' | 'ABORTED';
export interface AnalysisSummary {
  id: string;
  spectrumId: string;
  phase: AnalysisPhase;
  /** 0 to 1 */
  progress: number;
  step: AnalysisStep | null;
  error: string | null;
  requestedBy: string;
  requestedAt: Iso;
  endedAt: Iso | null;
  features: number | null;
  temperatureK: number | null;
  temperatureSigmaK: number | null;
  temperatureConstrained: boolean | null;
  programVersion: string;
  lineListName: string;
  lineListVersion: string;
  /** reading of the file that it rests on; older than the spectrum's: its wavelengths may be others */
  readingRevision: number;
}
export interface AnalysisDetail extends AnalysisSummary {
  settings: AnalysisSettings;
  /** null until COMPLETED */
  result: Analysis | null;
}
export interface NewAnalysis {
  /** the default list when left out */
  lineListId?: string;
  settings?: Partial<AnalysisSettings>;
}

/** A person's decision about a feature of a target. */
export interface Identification {
  id: string;
  targetId: string;
  spectrumId: string;
  spectrumLabel: string;
  /** feature of the spectrum's newest analysis that it belongs to; null when a re-run no longer finds it */
  featureIndex: number | null;
  kind: 'dip' | 'peak';
  wavelengthNm: number;
  wavelengthSigmaNm: number;
  equivalentWidthNm: number;
  equivalentWidthSigmaNm: number;
  fwhmNm: number;
  /** null: 'unidentified' was decided */
  lineId: string | null;
  species: string | null;
  restNm: number | null;
  lineSource: string | null;
  family: string | null;
  systemId: string | null;
  velocityKmPerS: number | null;
  velocitySigmaKmPerS: number | null;
  probability: number;
  state: ReviewState;
  version: number;
  decidedBy: string | null;
  decidedAt: Iso | null;
  history: IdentificationEvent[];
}
export interface IdentificationEvent {
  at: Iso;
  by: string;
  action: ReviewAction;
  from: ReviewState;
  to: ReviewState;
  reading: string;
  remark: string;
}
/**
 * Decide on a feature of an analysis. `lineId` null means 'unidentified'. If-Match carries the version seen; "0" when no
 * identification exists yet. 412 answers with the current Identification in `current`.
 */
export interface Decision {
  action: ReviewAction;
  lineId: string | null;
  systemId: string | null;
  remark?: string;
}

/** Server-sent events of a programme. */
export type ProgrammeEvent =
  | { type: 'analysis'; spectrumId: string; analysis: AnalysisSummary }
  | { type: 'identification'; identification: Identification }
  | { type: 'spectrum'; spectrumId: string; targetId: string }
  | { type: 'analysis_recipes' }
  | { type: 'comparison'; comparisonId: string }
  | { type: 'cloud'; cloudId: string }
  /** the programme's name, its members or their roles changed */
  | { type: 'programme'; programmeId: string };

/** problem+json, RFC 9457. */
export interface Problem {
  type: string;
  title: string;
  status: number;
  detail: string;
  instance: string;
  code: string;
  traceId: string;
  errors?: { pointer: string; detail: string }[];
  current?: unknown;
}
