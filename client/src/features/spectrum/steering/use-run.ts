import { notifications } from '@mantine/notifications';
import { changedSettings, type AnalysisSettings } from '@foreveil/shared';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { errorSentence } from '../../../lib/error-sentences.js';
import { analysisQueries, cancelAnalysis, requestAnalysis, spectrumQueries } from '../../../lib/queries/spectra.js';

const failed = (title: string) => (error: unknown) => void notifications.show({ title, message: errorSentence(error) });

/** Starts a run with settings; what is at its default is left out, so that it stays so. @param lineListId undefined: the default list */
export function useRun(programmeId: string, spectrumId: string, lineListId?: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (settings: AnalysisSettings) =>
      requestAnalysis(programmeId, spectrumId, {
        ...(lineListId === undefined ? {} : { lineListId }),
        settings: Object.fromEntries(changedSettings(settings).map((key) => [key, settings[key]])),
      }),
    onSuccess: () => client.invalidateQueries({ queryKey: analysisQueries.list(programmeId, spectrumId).queryKey }),
    onError: failed('The analysis was not started'),
  });
}

export function useCancel(programmeId: string, spectrumId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (analysisId: string) => cancelAnalysis(programmeId, analysisId),
    onSuccess: () => client.invalidateQueries({ queryKey: spectrumQueries.all(programmeId, spectrumId) }),
    onError: failed('The analysis was not cancelled'),
  });
}
