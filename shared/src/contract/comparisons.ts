import type { ComparisonSettings, SightlineComparison, Verdict } from '../sightlines/index.js';
import type { AnalysisPhase, Iso } from './api.js';

/** One end of a comparison as screens name it. */
export interface ComparedSpectrum {
  spectrumId: string;
  label: string;
  targetId: string;
  targetName: string;
  /** the analysis that the comparison rests on; null until it has run */
  analysisId: string | null;
}

export interface ComparisonSummary {
  id: string;
  name: string;
  a: ComparedSpectrum;
  b: ComparedSpectrum;
  phase: AnalysisPhase;
  /** 0 to 1 */
  progress: number;
  error: string | null;
  requestedBy: string;
  requestedAt: Iso;
  endedAt: Iso | null;
  programVersion: string;
  lineListName: string;
  lineListVersion: string;
  /** lines by verdict, with people's rulings applied; null until COMPLETED */
  counts: Record<Verdict, number> | null;
  /** one of the two spectra has a newer analysis than the one compared */
  outdated: boolean;
  /** the comparison that a re-run made in its place; null when this is the newest */
  supersededBy: string | null;
  version: number;
}

export interface ComparisonDetail extends ComparisonSummary {
  simulated: boolean;
  settings: ComparisonSettings;
  /** null until COMPLETED */
  result: SightlineComparison | null;
  /** people's rulings, newest state of each line */
  rulings: VerdictRuling[];
}

/** A person's ruling on the verdict of one line. It stays with the comparison and is carried over to a re-run by line. */
export interface VerdictRuling {
  lineKey: string;
  /** null: ruling withdrawn, the computed verdict holds */
  verdict: Verdict | null;
  remark: string;
  by: string;
  at: Iso;
  version: number;
  history: { verdict: Verdict | null; remark: string; by: string; at: Iso }[];
}

/** POST comparisons. Re-run is the address below the comparison, with settings and name alone; what is left out stays as it was. */
export interface NewComparison {
  spectrumA: string;
  spectrumB: string;
  name?: string;
  settings?: Partial<ComparisonSettings>;
}
export interface ComparisonRerun {
  name?: string;
  settings?: Partial<ComparisonSettings>;
}

/** PUT lines/:key/ruling with If-Match: the ruling's version seen, "0" when there is none. 412 answers with the current one. */
export interface NewRuling {
  verdict: Verdict | null;
  remark: string;
}
