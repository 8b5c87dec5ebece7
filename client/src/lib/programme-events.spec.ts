import { beforeEach, expect, test, vi } from 'vitest';
import { quietClient } from '../test/show.js';
import { anAnalysis, anIdentification, aSpectrum, aTarget, aTargetSummary } from '../test/things.js';
import { applyEvent } from './programme-events.js';
import { targetQueries } from './queries/programmes.js';
import { analysisQueries, identificationQueries } from './queries/spectra.js';

const P = 'programme-1';
const list = targetQueries.list(P).queryKey;
const detail = targetQueries.detail(P, 'target-1').queryKey;
let client = quietClient();
beforeEach(() => {
  client = quietClient();
  client.setQueryData(list, [
    aTargetSummary({ spectra: [aSpectrum(), aSpectrum({ id: 'spectrum-2' })] }),
    aTargetSummary({ id: 'target-2' }),
  ]);
  client.setQueryData(detail, aTarget({ spectra: [aSpectrum()], identifications: [anIdentification()] }));
});

test('progress of an analysis shows on the list and on the target at once, without asking again', () => {
  const asked = vi.spyOn(client, 'invalidateQueries');
  const analysis = anAnalysis({ id: 'analysis-2', phase: 'EXECUTING', progress: 0.38, step: 'identification' });
  applyEvent(client, P, { type: 'analysis', spectrumId: 'spectrum-1', analysis });
  expect(client.getQueryData(list)![0]!.spectra.map((s) => s.analysis?.progress)).toEqual([0.38, 1]);
  expect(client.getQueryData(detail)!.spectra[0]!.analysis).toEqual(analysis);
  expect(asked).not.toHaveBeenCalled();
});

test('the end of an analysis brings counts and results, so they are asked for', () => {
  const asked = vi.spyOn(client, 'invalidateQueries');
  applyEvent(client, P, { type: 'analysis', spectrumId: 'spectrum-1', analysis: anAnalysis() });
  expect(asked.mock.calls.map(([filters]) => filters?.queryKey)).toContainEqual(targetQueries.all(P));
  expect(asked.mock.calls.map(([filters]) => filters?.queryKey)).toContainEqual(analysisQueries.detail(P, 'analysis-1').queryKey);
});

test('a teammate’s decision replaces the older version and is added when new; an older one never comes back', () => {
  const key = identificationQueries.list(P, 'spectrum-1').queryKey;
  client.setQueryData(key, [anIdentification({ version: 2 })]);
  applyEvent(client, P, { type: 'identification', identification: anIdentification({ version: 3, state: 'rejected' }) });
  applyEvent(client, P, { type: 'identification', identification: anIdentification({ version: 1, state: 'proposed' }) });
  applyEvent(client, P, { type: 'identification', identification: anIdentification({ id: 'identification-2' }) });
  expect(client.getQueryData(key)!.map(({ id, version, state }) => [id, version, state])).toEqual([
    ['identification-1', 3, 'rejected'],
    ['identification-2', 1, 'accepted'],
  ]);
  expect(client.getQueryData(detail)!.identifications).toHaveLength(2);
});

test('a page that shows nothing of a spectrum gets nothing invented into its cache', () => {
  const key = identificationQueries.list(P, 'spectrum-9').queryKey;
  applyEvent(client, P, { type: 'identification', identification: anIdentification({ spectrumId: 'spectrum-9' }) });
  expect(client.getQueryData(key)).toBeUndefined();
});
