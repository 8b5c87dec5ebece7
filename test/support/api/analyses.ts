import { DEFAULT_SETTINGS, type Analysis, type Candidate, type Feature } from '@foreveil/shared';
import { claim } from '../../../server/src/modules/analyses/work/claim.js';
import { storeResult } from '../../../server/src/modules/analyses/work/store-result.js';
import { loadSpectrum } from '../../../server/src/modules/spectra/spectrum-bytes.js';
import type { Api } from './api.js';

/** A line of the default list that the made-up candidates name: Na I D2, vacuum nm. */
export const SODIUM = { lineId: 'NaI-5889.951', species: 'Na I', restNm: 589.158325 };
/** Another one: D1. */
export const SODIUM_D1 = { lineId: 'NaI-5895.924', species: 'Na I', restNm: 589.755815 };

export const candidate = (changes: Partial<Candidate> = {}): Candidate => ({
  ...SODIUM,
  family: 'interstellar',
  systemId: 'cloud1',
  velocityKmPerS: -12.5,
  velocitySigmaKmPerS: 0.2,
  probability: 0.97,
  share: 1,
  expectedNm: 0.01,
  expectedSigmaNm: 0.002,
  evidence: [{ part: 'position', logOdds: 3.5, sentence: 'It stands where the line should be.' }],
  companions: [],
  sentence: 'It stands where the line should be.',
  ...changes,
});

export const feature = (index: number, wavelengthNm: number, changes: Partial<Feature> = {}): Feature => ({
  index,
  kind: 'dip',
  wavelengthNm,
  wavelengthSigmaNm: 0.0004,
  equivalentWidthNm: 0.05,
  equivalentWidthSigmaNm: 0.0012,
  directEquivalentWidthNm: 0.05,
  directEquivalentWidthSigmaNm: 0.0012,
  fwhmNm: 0.12,
  fwhmSigmaNm: 0.003,
  depth: 0.4,
  depthSigma: 0.01,
  shape: 'gaussian',
  significance: 40,
  snr: 100,
  flags: [],
  candidates: [candidate(), candidate({ ...SODIUM_D1, probability: 0.02, velocityKmPerS: 30 })],
  unidentifiedProbability: 0.01,
  ...changes,
});

/** A result with features at the given places and one velocity system. */
export const analysisOf = (features: readonly Feature[]): Analysis => ({
  programVersion: '0.1.0',
  lineListName: 'Foreveil default',
  lineListVersion: '2026.1',
  settings: DEFAULT_SETTINGS,
  points: 400,
  fromNm: 500,
  toNm: 503.99,
  frame: 'barycentric',
  resolvingPower: 5000,
  resolvingPowerHow: 'stated',
  snr: 100,
  noiseHow: 'stated',
  continuum: {
    model: 'planck',
    temperatureK: 9000,
    temperatureSigmaK: 300,
    constrained: true,
    statement: '',
    lowerBoundK: null,
    upperBoundK: null,
    wienPeakNm: 322,
    chi2PerDegree: 1,
    clippedFraction: 0,
    sampleNm: [500, 504],
    sampleFlux: [1, 1],
  },
  systems: [
    { id: 'cloud1', family: 'interstellar', velocityKmPerS: -12.5, velocitySigmaKmPerS: 0.2, significance: 12, members: 3, fwhmKmPerS: 8 },
  ],
  features,
  cautions: [],
});

/** Does the work of a worker on an analysis that is queued, with a made-up result. */
export async function complete(api: Api, analysisId: string, analysis: Analysis): Promise<void> {
  const claimed = await claim(api.db, analysisId);
  if (!claimed) throw new Error('nothing to work on');
  const spectrum = await loadSpectrum(api.db, claimed, claimed.spectrumId);
  if (!(await storeResult(api.db, claimed, spectrum!, analysis))) throw new Error('the result was refused');
}
