import type {
  Analysis,
  AnalysisSettings,
  AnalysisStep,
  ComparisonSettings,
  LineList,
  Sightline,
  SightlineComparison,
  Spectrum,
} from '@foreveil/shared';

/** What a worker process says to its analysis thread. The list is sent once and kept. */
export type ToThread =
  | { readonly say: 'keep_list'; readonly listId: string; readonly list: LineList }
  | { readonly say: 'run'; readonly listId: string; readonly spectrum: Spectrum; readonly settings: AnalysisSettings }
  | ({ readonly say: 'compare' } & CompareInThread);

export interface CompareInThread {
  readonly listId: string;
  readonly a: Sightline;
  readonly b: Sightline;
  readonly settings: ComparisonSettings;
}

/** What the thread says back. */
export type FromThread =
  | { readonly say: 'progress'; readonly step: AnalysisStep; readonly done: number }
  | { readonly say: 'done'; readonly analysis: Analysis }
  | { readonly say: 'compared'; readonly comparison: SightlineComparison }
  | { readonly say: 'failed'; readonly reason: string };
