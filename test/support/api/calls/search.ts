import type { Calls } from './call.js';

export const calls: Calls = {
  'SearchController.find': { success: 200 },
  'SearchController.csv': { success: 200 },
  'SearchController.saved': { success: 200 },
  'SearchController.save': { body: { name: 'Sodium', query: { species: 'Na I' } }, success: 201 },
  'SearchController.remove': {
    params: async ({ api }, { userId, role }) => {
      if (role === 'anonymous') return { savedSearchId: '00000000-0000-4000-8000-000000000000' };
      const [row] = await api.db('saved_searches').insert({ user_id: userId, name: 'Own', query: '{}' }).returning<{ id: string }[]>('id');
      return { savedSearchId: row!.id };
    },
    success: 204,
  },
};
