import type { AnalysisStep, AnalysisSummary } from '@foreveil/shared';
import { counted, percent } from './number.js';

const STEP_WORDS: Record<AnalysisStep, string> = {
  continuum: 'fitting the continuum',
  noise: 'measuring the noise',
  detection: 'finding dips and peaks',
  measurement: 'measuring them',
  systems: 'finding velocity systems',
  identification: 'ranking candidates',
};

/** Where an analysis stands, in a few words: 'ranking candidates, 38 %'. */
export function analysisWords(analysis: AnalysisSummary | null): string {
  if (!analysis) return 'not analysed yet';
  switch (analysis.phase) {
    case 'QUEUED':
      return 'waiting for its turn';
    case 'EXECUTING':
      return `${analysis.step ? STEP_WORDS[analysis.step] : 'starting'}, ${percent(analysis.progress)}`;
    case 'COMPLETED':
      return counted(analysis.features ?? 0, 'feature');
    case 'ERROR':
      return 'failed';
    case 'ABORTED':
      return 'cancelled';
  }
}

export const isAtWork = (analysis: AnalysisSummary | null): boolean => analysis?.phase === 'QUEUED' || analysis?.phase === 'EXECUTING';
