import {
  apiPaths,
  type AnalysisRecipe,
  type AnalysisRecipeChange,
  type Identification,
  type NewAnalysisRecipe,
  type PlaceDecision,
  type UnplacedDecision,
} from '@foreveil/shared';
import { queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';
import { programmeQueries } from './programmes.js';
import { spectrumQueries } from './spectra.js';

export const recipeQueries = {
  list: (programmeId: string) =>
    queryOptions({
      queryKey: [...programmeQueries.within(programmeId), 'analysis-recipes'] as const,
      queryFn: ({ signal }) => http.get<AnalysisRecipe[]>(apiPaths.analysisRecipes(programmeId), { signal }),
    }),
};

export const unplacedQueries = {
  list: (programmeId: string, spectrumId: string) =>
    queryOptions({
      queryKey: [...spectrumQueries.all(programmeId, spectrumId), 'unplaced'] as const,
      queryFn: ({ signal }) => http.get<UnplacedDecision[]>(apiPaths.unplacedDecisions(programmeId, spectrumId), { signal }),
    }),
};

export const createRecipe = (programmeId: string, recipe: NewAnalysisRecipe) =>
  http.post<AnalysisRecipe>(apiPaths.analysisRecipes(programmeId), recipe);
/** @param version that was seen; a 412 carries the present recipe in `problem.current` */
export const changeRecipe = (programmeId: string, id: string, version: number, change: AnalysisRecipeChange) =>
  http.patch<AnalysisRecipe>(apiPaths.analysisRecipe(programmeId, id), change, { ifMatch: version });
export const deleteRecipe = (programmeId: string, id: string, version: number) =>
  http.delete(apiPaths.analysisRecipe(programmeId, id), { ifMatch: version });

export const keepDecision = (programmeId: string, { id, version }: Identification) =>
  http.post<Identification>(apiPaths.keepDecision(programmeId, id), {}, { ifMatch: version });
export const placeDecision = (programmeId: string, { id, version }: Identification, to: PlaceDecision) =>
  http.post<Identification>(apiPaths.placeDecision(programmeId, id), to, { ifMatch: version });
