import type {
  AnalysisSummary,
  Identification,
  Problem,
  Reading,
  SpectrumDetail,
  SpectrumSummary,
  Stated,
  Target,
  TargetSummary,
} from '@foreveil/shared';
import { FACE_COLUMNS, type Face } from '../workers/face.js';

/** Invented rows of the API, complete, for tests that care about a few of their fields. */

export const anAnalysis = (parts: Partial<AnalysisSummary> = {}): AnalysisSummary => ({
  id: 'analysis-1',
  spectrumId: 'spectrum-1',
  phase: 'COMPLETED',
  progress: 1,
  step: null,
  error: null,
  requestedBy: 'Ana Weir',
  requestedAt: '2031-03-14T20:00:00Z',
  endedAt: '2031-03-14T20:00:09Z',
  features: 24,
  temperatureK: 9432,
  temperatureSigmaK: 213,
  temperatureConstrained: true,
  programVersion: '0.1.0',
  lineListName: 'default',
  lineListVersion: '2031.1',
  readingRevision: 1,
  ...parts,
});

export const aSpectrum = (parts: Partial<SpectrumSummary> = {}): SpectrumSummary => ({
  id: 'spectrum-1',
  targetId: 'target-1',
  label: 'échelle',
  fileName: 'echelle.fits',
  points: 61262,
  fromNm: 380,
  toNm: 680,
  resolvingPower: 60000,
  observedAt: '2031-03-14T03:12:00',
  instrument: null,
  createdAt: '2031-03-14T19:59:00Z',
  createdBy: 'Ana Weir',
  preview: null,
  analysis: anAnalysis(),
  ...parts,
});

export const aSpectrumDetail = (parts: Partial<SpectrumDetail> = {}): SpectrumDetail => ({
  ...aSpectrum(),
  programmeId: 'programme-1',
  targetName: 'Heron 4 A',
  simulated: true,
  sizeBytes: 1_100_000,
  sha256: 'ab'.repeat(32),
  reading: aReading(),
  corrections: {},
  hasSigma: true,
  version: 1,
  readingRevision: 1,
  recipe: null,
  ...parts,
});

export const aTargetSummary = (parts: Partial<TargetSummary> = {}): TargetSummary => ({
  id: 'target-1',
  name: 'Heron 4 A',
  kind: 'star',
  simulated: true,
  raDeg: 318.5304583,
  decDeg: 48.2143333,
  notes: '',
  version: 3,
  accepted: 0,
  rejected: 0,
  open: 0,
  spectra: [],
  ...parts,
});

export const aTarget = (parts: Partial<Target> = {}): Target => ({ ...aTargetSummary(), identifications: [], ...parts });

export const anIdentification = (parts: Partial<Identification> = {}): Identification => ({
  id: 'identification-1',
  targetId: 'target-1',
  spectrumId: 'spectrum-1',
  spectrumLabel: 'échelle',
  featureIndex: 0,
  kind: 'dip',
  wavelengthNm: 589.1501,
  wavelengthSigmaNm: 0.0001,
  equivalentWidthNm: 0.01497,
  equivalentWidthSigmaNm: 0.00004,
  fwhmNm: 0.0155,
  lineId: 'na-1-589.158',
  species: 'Na I',
  restNm: 589.1583,
  lineSource: 'NIST ASD',
  family: 'interstellar',
  systemId: 's1',
  velocityKmPerS: -4.18,
  velocitySigmaKmPerS: 0.03,
  probability: 0.973,
  state: 'accepted',
  version: 1,
  decidedBy: 'Ana Weir',
  decidedAt: '2031-03-15T09:00:00Z',
  history: [],
  ...parts,
});

const stated = <T>(value: T, where = 'test'): Stated<T> => ({ value, how: 'stated', where });

export const aReading = (parts: Partial<Reading> = {}): Reading => ({
  format: 'fits_table',
  place: 'HDU 1 SPECTRUM',
  points: 61262,
  objectName: stated<string | null>('Heron 4 A', 'OBJECT'),
  wavelengthColumn: 'WAVE',
  axisUnit: stated('angstrom', 'TUNIT1'),
  medium: stated('vacuum', 'VACUUM'),
  frame: stated('barycentric', 'SPECSYS'),
  fluxColumn: 'FLUX',
  fluxUnit: stated('erg/s/cm2/Angstrom', 'TUNIT2'),
  fluxKind: stated('per_wavelength', 'TUNIT2'),
  uncertaintyColumn: 'ERR',
  uncertaintyKind: stated('sigma', 'column name'),
  maskColumn: null,
  resolvingPower: stated<number | null>(42000, 'SPEC_RES'),
  fluxCalibration: { value: null, how: 'not_stated', where: '' },
  wavelengthRmsNm: { value: null, how: 'not_stated', where: '' },
  observedAt: { value: null, how: 'not_stated', where: '' },
  time: { value: null, how: 'not_stated', where: '' },
  exposureS: { value: null, how: 'not_stated', where: '' },
  midMjdUtc: { value: null, how: 'not_stated', where: '' },
  site: { value: null, how: 'not_stated', where: '' },
  pointing: { value: null, how: 'not_stated', where: '' },
  observerVelocityKmPerS: { value: null, how: 'not_stated', where: '' },
  instrument: null,
  telescope: null,
  raDeg: null,
  decDeg: null,
  firstNm: 385,
  lastNm: 690,
  columns: ['WAVE', 'FLUX', 'ERR'],
  columnFacts: [],
  uncorrectedColumns: {},
  otherPlaces: [],
  places: [],
  checksums: [],
  segments: [],
  header: ['SIMPLE  =                    T'],
  warnings: [],
  ...parts,
});

export const aFace = (parts: Partial<Face> = {}): Face => {
  const ones = new Array<number | null>(FACE_COLUMNS).fill(1);
  return { fromNm: 385, toNm: 690, fluxLow: ones, fluxHigh: ones, low: ones, high: ones, ...parts };
};

export const aProblem = (parts: Partial<Problem> = {}): Problem => ({
  type: 'urn:foreveil:problem:internal',
  title: 'Internal error',
  status: 500,
  detail: '',
  instance: '/api',
  code: 'internal',
  traceId: 'trace-7',
  ...parts,
});

/** An answer of the API as fetch gives it. */
export const answer = (status: number, body: unknown, headers: Record<string, string> = {}) =>
  new Response(body === undefined ? null : JSON.stringify(body), {
    status,
    headers: { 'content-type': status < 400 ? 'application/json' : 'application/problem+json', ...headers },
  });
