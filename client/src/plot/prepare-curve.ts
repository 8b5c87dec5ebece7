import type { Continuum, Samples } from '@foreveil/shared';
import { buildCurveData, type CurveData } from './curve-data.js';
import type { ProfileNumbers } from './profile.js';
import type { Pyramid } from './pyramid.js';
import type { Range } from './view.js';

export interface CurveRequest {
  readonly samples: Samples;
  readonly continuum: Continuum | null;
  readonly features: readonly ProfileNumbers[];
  /** left out by a person: drawn as gaps */
  readonly masks?: readonly Range[];
}

/** Fewer samples are prepared faster than a worker starts. */
const WORTH_A_WORKER = 20_000;

const buffersOf = ({ values, levels }: Pyramid) => [values.buffer, ...levels.flatMap(({ low, high }) => [low.buffer, high.buffer])];

/** Every buffer of the data, each once. */
export function transferables({ wavelength, bad, sigma, flux, fitted }: CurveData): ArrayBuffer[] {
  const all = [wavelength.buffer, bad.buffer, sigma?.buffer, ...buffersOf(flux)];
  if (fitted) all.push(fitted.continuum.buffer, fitted.model.buffer, ...buffersOf(fitted.normalised), ...buffersOf(fitted.residual));
  return [...new Set(all)].filter((b): b is ArrayBuffer => b instanceof ArrayBuffer);
}

/** Only what profiles are drawn from: the arguments for the readings need not travel. */
const profilesOf = (features: readonly ProfileNumbers[]): ProfileNumbers[] =>
  features.map(({ wavelengthNm, fwhmNm, depth, equivalentWidthNm, kind, damped }) => ({
    ...{ wavelengthNm, fwhmNm, depth, equivalentWidthNm, kind },
    ...(damped && { damped }),
  }));

/** `buildCurveData` without blocking the page. Rejects when aborted or when the worker fails. */
export function prepareCurve({ samples, continuum, features, masks = [] }: CurveRequest, signal?: AbortSignal): Promise<CurveData> {
  const profiles = profilesOf(features);
  if (samples.wavelength.length < WORTH_A_WORKER || typeof Worker === 'undefined')
    return Promise.resolve(buildCurveData(samples, continuum, profiles, masks));
  const worker = new Worker(new URL('./curve-data.worker.ts', import.meta.url), { type: 'module' });
  return new Promise<CurveData>((resolve, reject) => {
    worker.onmessage = ({ data }: MessageEvent<CurveData>) => resolve(data);
    worker.onerror = ({ message }) => reject(new Error(message || 'the worker that prepares curves could not start'));
    signal?.addEventListener('abort', () => reject(signal.reason as Error), { once: true });
    worker.postMessage({ samples, continuum, features: profiles, masks } satisfies CurveRequest);
  }).finally(() => worker.terminate());
}
