import type { Analysis, AnalysisSettings, AnalysisStep, LineList, Spectrum } from '@foreveil/shared';

/** What a worker process says to its analysis thread. The list is sent once and kept. */
export type ToThread =
  | { readonly say: 'keep_list'; readonly listId: string; readonly list: LineList }
  | { readonly say: 'run'; readonly listId: string; readonly spectrum: Spectrum; readonly settings: AnalysisSettings };

/** What the thread says back. */
export type FromThread =
  | { readonly say: 'progress'; readonly step: AnalysisStep; readonly done: number }
  | { readonly say: 'done'; readonly analysis: Analysis }
  | { readonly say: 'failed'; readonly reason: string };
