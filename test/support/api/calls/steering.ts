import { apiPaths, type AnalysisRecipe, type Identification } from '@foreveil/shared';
import { analysisOf, complete, feature } from '../analyses.js';
import type { Calls, Stage } from './call.js';

let recipes = 0;
async function aRecipe({ team }: Stage): Promise<Record<string, string>> {
  const { body } = await team.analyst.post(apiPaths.analysisRecipes(team.programmeId), { name: `Wide ${++recipes}`, settings: {} });
  return { recipeId: (body as AnalysisRecipe).id };
}

/** A decision on the spectrum's only feature, which the next analysis does not find; that finds another one instead. */
async function anUnplacedDecision({ api, team, spectrum }: Stage): Promise<Record<string, string>> {
  const made = await api.db('identifications').where({ spectrum_id: spectrum.id }).first<{ id: string } | undefined>('id');
  if (made) return { identificationId: made.id };
  const decision = { action: 'propose', lineId: null, systemId: null };
  const path = apiPaths.decide(team.programmeId, spectrum.analysis!.id, 0);
  const { body } = await team.analyst.post(path, decision, { 'If-Match': '"0"' });
  const again = await team.analyst.post(apiPaths.analyses(team.programmeId, spectrum.id), {});
  await complete(api, (again.body as { id: string }).id, analysisOf([feature(0, 502)]));
  return { identificationId: (body as Identification).id };
}

const currentOf = async ({ api, spectrum }: Stage): Promise<string> =>
  (await api.db('spectra').where({ id: spectrum.id }).first<{ current_analysis_id: string }>('current_analysis_id')).current_analysis_id;

const SEEN = { 'If-Match': '"1"' };

export const calls: Calls = {
  'AnalysisRecipesController.list': { success: 200 },
  'AnalysisRecipesController.create': { body: { name: 'Hot stars', settings: { falseFeatures: 1 } }, success: 201 },
  'AnalysisRecipesController.change': { params: aRecipe, body: { name: 'Wider' }, headers: SEEN, success: 200 },
  'AnalysisRecipesController.remove': { params: aRecipe, headers: SEEN, success: 204 },
  'UnplacedController.list': { success: 200 },
  'UnplacedController.keep': { params: anUnplacedDecision, headers: SEEN, success: 200 },
  'UnplacedController.place': {
    params: anUnplacedDecision,
    body: async (stage) => ({ analysisId: await currentOf(stage), featureIndex: 0 }),
    headers: SEEN,
    success: 200,
  },
};
