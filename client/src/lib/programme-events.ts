import type { AnalysisSummary, Identification, ProgrammeEvent, SpectrumSummary, Target, TargetSummary } from '@foreveil/shared';
import type { QueryClient } from '@tanstack/react-query';
import { cloudQueries } from './queries/clouds.js';
import { comparisonQueries } from './queries/comparisons.js';
import { programmeQueries, targetQueries } from './queries/programmes.js';
import { recipeQueries, unplacedQueries } from './queries/steering.js';
import { analysisQueries, identificationQueries, spectrumQueries } from './queries/spectra.js';

const ENDED: ReadonlySet<AnalysisSummary['phase']> = new Set(['COMPLETED', 'ERROR', 'ABORTED']);

/** Puts what the server told into the cache of every page that shows it; what it did not tell in full is fetched anew. */
export function applyEvent(client: QueryClient, programmeId: string, event: ProgrammeEvent): void {
  switch (event.type) {
    case 'analysis':
      return applyAnalysis(client, programmeId, event.spectrumId, event.analysis);
    case 'identification':
      return applyIdentification(client, programmeId, event.identification);
    case 'analysis_recipes':
      return refetch(client, recipeQueries.list(programmeId).queryKey);
    case 'comparison':
      // the columns of clouds come from comparisons
      return refetch(client, comparisonQueries.all(programmeId), cloudQueries.all(programmeId));
    case 'cloud':
      return refetch(client, cloudQueries.all(programmeId));
    case 'programme': // a role may have changed: what may be done is asked anew, and where one is
      return refetch(client, programmeQueries.within(programmeId), programmeQueries.list().queryKey);
    case 'spectrum':
      // new, renamed, moved, read anew or removed: what hangs on it may be other, and its samples too
      refetch(
        client,
        targetQueries.all(programmeId),
        cloudQueries.all(programmeId),
        programmeQueries.detail(programmeId).queryKey,
        spectrumQueries.all(programmeId, event.spectrumId),
        spectrumQueries.samples(programmeId, event.spectrumId).queryKey,
      );
  }
}

function refetch(client: QueryClient, ...keys: (readonly unknown[])[]) {
  for (const queryKey of keys) void client.invalidateQueries({ queryKey });
}

function applyAnalysis(client: QueryClient, programmeId: string, spectrumId: string, analysis: AnalysisSummary) {
  const patch = <S extends SpectrumSummary>(spectrum: S): S => (spectrum.id === spectrumId ? { ...spectrum, analysis } : spectrum);
  const patchTarget = <T extends TargetSummary>(target: T): T =>
    target.spectra.some(({ id }) => id === spectrumId) ? { ...target, spectra: target.spectra.map(patch) } : target;

  client.setQueryData(targetQueries.list(programmeId).queryKey, (old) => old?.map(patchTarget));
  for (const [key] of client.getQueriesData<Target>({ queryKey: targetQueries.all(programmeId) })) {
    if (key.at(-1) !== 'list') client.setQueryData<Target>(key, (old) => old && patchTarget(old));
  }
  client.setQueryData(spectrumQueries.detail(programmeId, spectrumId).queryKey, (old) => old && patch(old));
  client.setQueryData(analysisQueries.list(programmeId, spectrumId).queryKey, (old) =>
    old?.map((one) => (one.id === analysis.id ? { ...one, ...analysis } : one)),
  );
  const listed = client.getQueryData(analysisQueries.list(programmeId, spectrumId).queryKey);
  const isNew = listed !== undefined && !listed.some(({ id }) => id === analysis.id);
  if (isNew) refetch(client, analysisQueries.list(programmeId, spectrumId).queryKey); // its settings are told only there
  client.setQueryData(analysisQueries.detail(programmeId, analysis.id).queryKey, (old) => old && { ...old, ...analysis });
  if (!ENDED.has(analysis.phase)) return;
  // counts, the strip's continuum and the result came with it
  refetch(
    client,
    targetQueries.all(programmeId),
    spectrumQueries.all(programmeId, spectrumId),
    analysisQueries.detail(programmeId, analysis.id).queryKey,
    programmeQueries.detail(programmeId).queryKey,
  );
}

const newest = (old: Identification[] | undefined, one: Identification) => {
  if (!old) return old;
  if (!old.some(({ id }) => id === one.id)) return [...old, one];
  return old.map((each) => (each.id === one.id && each.version <= one.version ? one : each));
};

function applyIdentification(client: QueryClient, programmeId: string, one: Identification) {
  client.setQueryData(identificationQueries.list(programmeId, one.spectrumId).queryKey, (old) => newest(old, one));
  client.setQueryData(
    targetQueries.detail(programmeId, one.targetId).queryKey,
    (old) => old && { ...old, identifications: newest(old.identifications, one) ?? [] },
  );
  refetch(client, unplacedQueries.list(programmeId, one.spectrumId).queryKey);
  // open and accepted counts stand on the lists
  refetch(client, targetQueries.list(programmeId).queryKey, programmeQueries.detail(programmeId).queryKey);
}
