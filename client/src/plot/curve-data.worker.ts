import { buildCurveData } from './curve-data.js';
import { transferables, type CurveRequest } from './prepare-curve.js';

/** Beside the page: samples and fit in, all that is drawn out. The arrays change owner, nothing is copied on the way back. */
self.onmessage = ({ data: { samples, continuum, features, masks } }: MessageEvent<CurveRequest>) => {
  const data = buildCurveData(samples, continuum, features, masks);
  self.postMessage(data, { transfer: transferables(data) });
};
