import {
  apiPaths,
  type ChangeReading,
  type ChangeReadingRecipe,
  type ChangeSpectrum,
  type KnownFile,
  type NewReadingRecipe,
  type ReadingEvent,
  type ReadingRecipe,
  type RemovedSpectrum,
  type SpectrumDetail,
} from '@foreveil/shared';
import { queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';
import { programmeQueries } from './programmes.js';
import { spectrumQueries } from './spectra.js';

export const recipeQueries = {
  list: (programmeId: string) =>
    queryOptions({
      queryKey: [...programmeQueries.within(programmeId), 'recipes'] as const,
      queryFn: ({ signal }) => http.get<ReadingRecipe[]>(apiPaths.recipes(programmeId), { signal }),
    }),
};

export const fileQueries = {
  /** all the ways in which the file of a spectrum was read */
  readings: (programmeId: string, spectrumId: string) =>
    queryOptions({
      queryKey: [...spectrumQueries.all(programmeId, spectrumId), 'readings'] as const,
      queryFn: ({ signal }) => http.get<ReadingEvent[]>(apiPaths.spectrumReading(programmeId, spectrumId), { signal }),
    }),
  removed: (programmeId: string) =>
    queryOptions({
      queryKey: [...programmeQueries.within(programmeId), 'removed-spectra'] as const,
      queryFn: ({ signal }) => http.get<RemovedSpectrum[]>(apiPaths.removedSpectra(programmeId), { signal }),
    }),
};

export const createRecipe = (programmeId: string, wanted: NewReadingRecipe) =>
  http.post<ReadingRecipe>(apiPaths.recipes(programmeId), wanted);
/** @param recipe as it was seen; a 412 carries what it is now in `problem.current` */
export const changeRecipe = (programmeId: string, { id, version }: ReadingRecipe, change: ChangeReadingRecipe) =>
  http.patch<ReadingRecipe>(apiPaths.recipe(programmeId, id), change, { ifMatch: version });
export const deleteRecipe = (programmeId: string, { id, version }: ReadingRecipe) =>
  http.delete(apiPaths.recipe(programmeId, id), { ifMatch: version });

type Seen = Pick<SpectrumDetail, 'id' | 'version'>;
export const changeSpectrum = (programmeId: string, { id, version }: Seen, change: ChangeSpectrum) =>
  http.patch<SpectrumDetail>(apiPaths.spectrum(programmeId, id), change, { ifMatch: version });
/** Reads the stored file anew and starts an analysis. */
export const readAnew = (programmeId: string, { id, version }: Seen, change: ChangeReading) =>
  http.patch<SpectrumDetail>(apiPaths.spectrumReading(programmeId, id), change, { ifMatch: version });
export const removeSpectrum = (programmeId: string, { id, version }: Seen) =>
  http.delete(apiPaths.spectrum(programmeId, id), { ifMatch: version });
export const restoreSpectrum = (programmeId: string, id: string) => http.post<SpectrumDetail>(apiPaths.restoreSpectrum(programmeId, id));

/** As many as the server takes in one question. */
const MOST_HASHES = 50;

/** Which of these files, told by their SHA-256, the programme has already. */
export async function findKnownFiles(programmeId: string, hashes: readonly string[]): Promise<KnownFile[]> {
  const known: KnownFile[] = [];
  for (let at = 0; at < hashes.length; at += MOST_HASHES) {
    const some = hashes.slice(at, at + MOST_HASHES).join(',');
    known.push(...(await http.get<KnownFile[]>(`${apiPaths.knownFiles(programmeId)}?sha256=${some}`)));
  }
  return known;
}
