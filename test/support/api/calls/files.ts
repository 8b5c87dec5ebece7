import { randomUUID } from 'node:crypto';
import type { FileSignature } from '@foreveil/shared';
import type { Call, Calls } from './call.js';

export const A_SIGNATURE: FileSignature = {
  format: 'text',
  columns: ['wavelength', 'flux'],
  instrument: null,
  telescope: null,
  writer: [],
};
const IF_FIRST = { 'If-Match': '"1"' };

/** A recipe in the programme of the stage. */
const aRecipe: Call['params'] = async ({ api, team }) => {
  const row = {
    ...{ programme_id: team.programmeId, name: `Old plates ${randomUUID()}`, signature: A_SIGNATURE, corrections: { medium: 'air' } },
    ...{ created_by: team.analyst.userId, changed_by: team.analyst.userId },
  };
  const [made] = await api.db('reading_recipes').insert(row).returning<{ id: string }[]>('id');
  return { recipeId: made!.id };
};

export const calls: Calls = {
  'SpectrumChangesController.known': { success: 400 }, // past the door, then refused for naming no file
  'SpectrumChangesController.removed': { success: 200 },
  'SpectrumChangesController.change': { body: { label: 'another name' }, headers: IF_FIRST, success: 200 },
  'SpectrumChangesController.remove': { headers: IF_FIRST, success: 204 },
  'SpectrumChangesController.restore': { success: 200 },
  'SpectrumChangesController.readings': { success: 200 },
  'SpectrumChangesController.reread': { body: { corrections: { medium: 'air' } }, headers: IF_FIRST, success: 200 },
  'RecipesController.list': { success: 200 },
  'RecipesController.create': {
    body: (_, { role }) => ({ name: `Recipe of ${role}`, signature: A_SIGNATURE, corrections: { medium: 'air' } }),
    success: 201,
  },
  'RecipesController.change': { params: aRecipe, body: { name: 'New plates' }, headers: IF_FIRST, success: 200 },
  'RecipesController.remove': { params: aRecipe, headers: IF_FIRST, success: 204 },
};
