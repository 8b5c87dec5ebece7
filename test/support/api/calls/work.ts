import type { Calls } from './call.js';

export const calls: Calls = {
  'TargetsController.list': { success: 200 },
  'TargetsController.create': { body: (_, { role }) => ({ name: `Target of ${role}`, kind: 'star' }), success: 201 },
  'TargetsController.get': { success: 200 },
  'TargetsController.change': { body: { notes: 'seen' }, headers: { 'If-Match': '"1"' }, success: 200 },
  'SpectraController.list': { success: 200 },
  'SpectraController.upload': { success: 400 }, // past the door, then refused for sending no file
  'SpectraController.get': { success: 200 },
  'SpectraController.samples': { success: 200 },
  'SpectraController.original': { success: 200 },
  'LineListsController.list': { success: 200 },
  'AnalysesController.list': { success: 200 },
  'AnalysesController.request': { body: {}, success: 201 },
  'AnalysesController.get': { success: 200 },
  'AnalysesController.cancel': { success: 409 }, // past the door, then refused because it has ended
  'IdentificationsController.list': { success: 200 },
  'IdentificationsController.decide': {
    body: { action: 'propose', lineId: null, systemId: null },
    headers: { 'If-Match': '"0"' },
    success: 200,
  },
  'ReportsController.ofTarget': { success: 200 },
  'ReportsController.ofSpectrum': { success: 200 },
  'EventsController.stream': { success: 200, stream: true },
  'HealthController.live': { success: 200 },
  'HealthController.ready': { success: 200 },
};
