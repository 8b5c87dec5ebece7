import {
  DEFAULT_SETTINGS,
  type Analysis,
  type AnalysisDetail,
  type Candidate,
  type EvidencePart,
  type Feature,
  type Samples,
  type VelocitySystem,
} from '@foreveil/shared';
import { anAnalysis } from '../../../test/things.js';

/** An invented analysis: a star, a cloud and the air; the Na I doublet in the cloud, water beside it, one line of the star, one that no list holds. */

/** Five parts whose logarithms add to the odds of `p`. */
export function evidenceFor(p: number): EvidencePart[] {
  const parts: [EvidencePart['part'], number, string][] = [
    ['position', 3, '−0.20 ± 0.04 km/s off the cloud'],
    ['strength', -1.386, '149.7 mÅ measured, 132 ± 2 mÅ expected'],
    ['companions', 2.2, '5 of 5 due companions are seen'],
    ['width', 0, '7.96 ± 0.05 km/s wide, as the others'],
  ];
  const rest = Math.log(p / (1 - p)) - parts.reduce((sum, [, logOdds]) => sum + logOdds, 0);
  return [...parts, ['chance', rest, '4 listed lines lie within ±10 km/s'] as const].map(([part, logOdds, sentence]) => ({
    part,
    logOdds,
    sentence,
  }));
}

export const aCandidate = (parts: Partial<Candidate> = {}): Candidate => {
  const probability = parts.probability ?? 0.973;
  return {
    lineId: 'NaI-589.158',
    species: 'Na I',
    restNm: 589.1583,
    family: 'interstellar',
    systemId: 'cloud',
    velocityKmPerS: -4.18,
    velocitySigmaKmPerS: 0.03,
    probability,
    share: 1,
    expectedNm: 0.0132,
    expectedSigmaNm: 0.0002,
    evidence: evidenceFor(probability),
    companions: [
      {
        species: 'Na I',
        restNm: 589.7558,
        outcome: 'seen',
        expectedNm: 0.011,
        expectedSigmaNm: 0.001,
        measuredNm: 0.0118,
        measuredSigmaNm: 0.00004,
      },
      {
        species: 'Na I',
        restNm: 330.3,
        outcome: 'not_covered',
        expectedNm: 0.001,
        expectedSigmaNm: 0.0001,
        measuredNm: null,
        measuredSigmaNm: null,
      },
      {
        species: 'K I',
        restNm: 590.1,
        outcome: 'missing',
        expectedNm: 0.003,
        expectedSigmaNm: 0.0004,
        measuredNm: null,
        measuredSigmaNm: null,
      },
    ],
    sentence: 'Position, width and the doublet agree with the cloud.',
    ...parts,
  };
};

const water = (probability: number): Candidate =>
  aCandidate({
    lineId: 'H2O-589.127',
    species: 'H2O',
    restNm: 589.1269,
    family: 'telluric',
    systemId: 'air',
    velocityKmPerS: 11.1,
    probability,
    companions: [],
  });

export const aFeature = (parts: Partial<Feature> = {}): Feature => ({
  index: 0,
  kind: 'dip',
  wavelengthNm: 589.1501,
  wavelengthSigmaNm: 0.0001,
  equivalentWidthNm: 0.01497,
  equivalentWidthSigmaNm: 0.00004,
  directEquivalentWidthNm: 0.015,
  directEquivalentWidthSigmaNm: 0.0001,
  fwhmNm: 0.0156,
  fwhmSigmaNm: 0.0001,
  depth: 0.86,
  depthSigma: 0.005,
  shape: 'gaussian',
  significance: 90,
  snr: 200,
  flags: [],
  candidates: [aCandidate(), water(0.021)],
  unidentifiedProbability: 0.005,
  ...parts,
});

export const FEATURES: readonly Feature[] = [
  aFeature({
    index: 0,
    wavelengthNm: 587.746,
    fwhmNm: 0.3,
    depth: 0.2,
    significance: 60,
    candidates: [
      aCandidate({
        lineId: 'HeI-587.729',
        species: 'He I',
        restNm: 587.729,
        family: 'stellar',
        systemId: 'star',
        velocityKmPerS: 8.9,
        probability: 0.99,
        companions: [],
      }),
    ],
  }),
  aFeature({
    index: 1,
    wavelengthNm: 588.78,
    significance: 7,
    depth: 0.02,
    candidates: [{ ...water(0.3), lineId: 'H2O-588.75' }],
    unidentifiedProbability: 0.68,
  }),
  aFeature({ index: 2 }),
  aFeature({
    index: 3,
    wavelengthNm: 589.35,
    significance: 20,
    depth: 0.1,
    candidates: [{ ...water(0.95), lineId: 'H2O-589.33', restNm: 589.3293 }],
  }),
  aFeature({
    index: 4,
    wavelengthNm: 589.748,
    significance: 80,
    candidates: [aCandidate({ lineId: 'NaI-589.756', restNm: 589.7558, probability: 0.988 })],
  }),
];

const system = (id: string, family: VelocitySystem['family'], velocityKmPerS: number): VelocitySystem => ({
  id,
  family,
  velocityKmPerS,
  velocitySigmaKmPerS: 0.1,
  significance: 40,
  members: 2,
  fwhmKmPerS: 7,
});

const span = { fromNm: 587, toNm: 591 };

export const aResult = (parts: Partial<Analysis> = {}): Analysis => ({
  programVersion: '0.1.0',
  lineListName: 'default',
  lineListVersion: '2031.1',
  settings: DEFAULT_SETTINGS,
  points: 2001,
  ...span,
  frame: 'barycentric',
  resolvingPower: 60000,
  resolvingPowerHow: 'stated',
  snr: 200,
  noiseHow: 'stated',
  continuum: {
    model: 'planck',
    temperatureK: 16800,
    temperatureSigmaK: 2100,
    constrained: false,
    statement: 'Reddening trades against temperature over this range; above 14 500 K at 2 sigma.',
    lowerBoundK: 14500,
    upperBoundK: null,
    wienPeakNm: 172,
    chi2PerDegree: 1.1,
    clippedFraction: 0.2,
    sampleNm: [span.fromNm, span.toNm],
    sampleFlux: [0.2, 0.2],
  },
  systems: [system('star', 'stellar', 8.94), system('cloud', 'interstellar', -3.98), system('air', 'telluric', 11.07)],
  features: FEATURES,
  cautions: ['Water lines of the air lie among the Na I lines.'],
  ...parts,
});

export const anAnalysisDetail = (parts: Partial<AnalysisDetail> = {}): AnalysisDetail => ({
  ...anAnalysis({ features: FEATURES.length }),
  settings: DEFAULT_SETTINGS,
  result: aResult(),
  ...parts,
});

/** A flat spectrum of 0.2 with the dips of `FEATURES` as boxes, 0.002 nm a sample. */
export function someSamples(): Samples {
  const n = 2001;
  const wavelength = Float64Array.from({ length: n }, (_, i) => span.fromNm + (i * (span.toNm - span.fromNm)) / (n - 1));
  const flux = new Float32Array(n).fill(0.2);
  for (const f of FEATURES) wavelength.forEach((nm, i) => Math.abs(nm - f.wavelengthNm) < f.fwhmNm / 2 && (flux[i]! *= 1 - f.depth));
  return { wavelength, flux, sigma: new Float32Array(n).fill(0.001), bad: new Uint8Array(n) };
}
