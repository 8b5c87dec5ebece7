import { DEFAULT_COMPARISON_SETTINGS } from '@foreveil/shared';
import { aComparison, anotherSpectrum } from '../comparisons.js';
import type { Call, Calls } from './call.js';

const params: Call['params'] = async ({ api, team, spectrum }) => ({
  comparisonId: await aComparison(api, team, spectrum, await anotherSpectrum(api, team)),
  lineKey: encodeURIComponent('NaI-5889.951 cloud1'),
});

export const calls: Calls = {
  'ComparisonsController.list': { success: 200 },
  'ComparisonsController.create': {
    body: async ({ api, team, spectrum }) => {
      const other = await anotherSpectrum(api, team);
      return { spectrumA: spectrum.id, spectrumB: other.id, settings: { matchKmPerS: DEFAULT_COMPARISON_SETTINGS.matchKmPerS } };
    },
    success: 201,
  },
  'ComparisonsController.get': { params, success: 200 },
  'ComparisonsController.rerun': { params, body: {}, success: 201 },
  'ComparisonsController.remove': { params, headers: { 'If-Match': '"1"' }, success: 204 },
  'ComparisonsController.report': { params, success: 200 },
  'ComparisonsController.rule': {
    params,
    body: { verdict: 'cannot-tell', remark: 'the star has a line there' },
    headers: { 'If-Match': '"0"' },
    success: 200,
  },
};
