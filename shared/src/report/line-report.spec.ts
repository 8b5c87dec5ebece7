import Papa from 'papaparse';
import type { Identification } from '../contract/index.js';
import { DEFAULT_SETTINGS, type Analysis, type Candidate, type Feature } from '../identify/index.js';
import type { Line } from '../linelist/index.js';
import type { Reading } from '../reading/index.js';
import { lineReportCsv } from './line-report.js';
import type { LineReport, ReportedSpectrum } from './types.js';

const SODIUM: Line = {
  ...{ id: 'NaI-5889.951', species: 'Na I', element: 'Na', ionStage: 1, wavelengthNm: 589.158325, type: 'allowed' },
  ...{ lowerEnergyPerCm: 0, upperEnergyPerCm: 16973.36619, lowerJ: 0.5, upperJ: 1.5, logGf: 0.108, oscillatorStrength: 0.641 },
  ...{ einsteinA: 61_600_000, bandFwhmNm: null, settings: ['interstellar'], multiplet: '2p6.3s 2S - 2p6.3p 2P*' },
  ...{ relativeIntensity: null, relativeIntensityScale: '', tier: 1, source: 'NIST ASD, levels and A' },
};
const CARBON: Line = {
  ...SODIUM,
  id: 'CII-1335',
  species: 'C II',
  element: 'C',
  ionStage: 2,
  wavelengthNm: 133.566,
  lowerEnergyPerCm: 63.42,
};

const candidate = (line: Line, changes: Partial<Candidate> = {}): Candidate => ({
  ...{ lineId: line.id, species: line.species, restNm: line.wavelengthNm, family: 'interstellar', systemId: 'cloud1' },
  ...{ velocityKmPerS: -11.7521, velocitySigmaKmPerS: 0.0111, probability: 0.987654321, share: 1, expectedNm: null, expectedSigmaNm: null },
  ...{ evidence: [], companions: [], sentence: '', ...changes },
});
// a Gaussian dip of depth 0.5 and FWHM 0.02 nm: equivalent width 0.0106447 nm = 10.6447 pm (closed form, depth FWHM sqrt(pi / 4 ln 2))
const feature = (index: number, wavelengthNm: number, changes: Partial<Feature> = {}): Feature => ({
  ...{ index, kind: 'dip', wavelengthNm, wavelengthSigmaNm: 0.0000218, shape: 'gaussian', significance: 63, snr: 219.6, flags: [] },
  ...{ equivalentWidthNm: 0.5 * 0.02 * Math.sqrt(Math.PI / (4 * Math.LN2)), equivalentWidthSigmaNm: 0.000044 },
  ...{
    directEquivalentWidthNm: 0.0106,
    directEquivalentWidthSigmaNm: 0.0001,
    fwhmNm: 0.02,
    fwhmSigmaNm: 0.00057,
    depth: 0.5,
    depthSigma: 0.0017,
  },
  ...{ candidates: [candidate(SODIUM)], unidentifiedProbability: 0.01, ...changes },
});
const analysis = (features: Feature[]): Analysis => ({
  ...{ programVersion: '0.1.0', lineListName: 'Foreveil default', lineListVersion: '2026.1', settings: DEFAULT_SETTINGS, points: 100 },
  ...{
    fromNm: 100,
    toNm: 700,
    frame: 'barycentric',
    resolvingPower: 60_000,
    resolvingPowerHow: 'stated',
    snr: 220,
    noiseHow: 'stated_rescaled',
  },
  continuum: {
    ...{
      model: 'planck',
      temperatureK: 24_138.4,
      temperatureSigmaK: 912,
      constrained: true,
      statement: '',
      lowerBoundK: null,
      upperBoundK: null,
    },
    ...{ wienPeakNm: 120, chi2PerDegree: 1, clippedFraction: 0, sampleNm: [], sampleFlux: [] },
  },
  ...{ systems: [], features, cautions: ['The blue end is noisy.'] },
});
const stated = <T>(value: T, where = 'CARD') => ({ value, how: 'stated' as const, where });
const reading = (changes: Partial<Reading> = {}): Reading => ({
  ...{
    format: 'fits_table',
    place: 'HDU 1',
    points: 100,
    objectName: stated('Tern 1'),
    wavelengthColumn: 'WAVE',
    axisUnit: stated('angstrom'),
  },
  ...{
    medium: stated('air'),
    frame: stated('barycentric', 'SPECSYS'),
    fluxColumn: 'FLUX',
    fluxUnit: stated(''),
    fluxKind: stated('per_wavelength'),
  },
  ...{ uncertaintyColumn: null, uncertaintyKind: stated(null), maskColumn: null, resolvingPower: stated(60_000), telescope: 'T1' },
  ...{ observedAt: stated('2026-03-04T05:06:07', 'DATE-OBS'), instrument: 'Echelle', raDeg: null, decDeg: null, firstNm: 100, lastNm: 700 },
  ...{
    columns: [],
    columnFacts: [],
    uncorrectedColumns: {},
    otherPlaces: [],
    places: [],
    checksums: [],
    segments: [],
    header: [],
    warnings: [],
  },
  ...{ time: stated(null), exposureS: stated(null), midMjdUtc: stated(null), site: stated(null), pointing: stated(null) },
  ...{ observerVelocityKmPerS: stated(null), fluxCalibration: stated(null), wavelengthRmsNm: stated(null), ...changes },
});
const decision = (changes: Partial<Identification> = {}): Identification => ({
  ...{ id: 'i', targetId: 't', spectrumId: 's', spectrumLabel: 'l', featureIndex: 0, kind: 'dip', wavelengthNm: 589.13523 },
  ...{ wavelengthSigmaNm: 0.00002, equivalentWidthNm: 0.0132, equivalentWidthSigmaNm: 0.00004, fwhmNm: 0.0156, lineId: SODIUM.id },
  ...{ species: 'Na I', restNm: SODIUM.wavelengthNm, lineSource: SODIUM.source, family: 'interstellar', systemId: 'cloud1' },
  ...{ velocityKmPerS: -11.75, velocitySigmaKmPerS: 0.01, probability: 0.9, state: 'accepted', version: 2, decidedBy: 'Vera Vale' },
  decidedAt: '2026-12-01T10:00:00.000Z',
  history: [
    { at: '', by: '', action: 'propose', from: 'proposed', to: 'proposed', reading: '', remark: 'first thought' },
    { at: '', by: '', action: 'accept', from: 'proposed', to: 'accepted', reading: '', remark: '=HYPERLINK("x")' },
  ],
  ...changes,
});
const spectrum = (changes: Partial<ReportedSpectrum> = {}): ReportedSpectrum => ({
  ...{ label: 'Tern 1, blue', fileName: 'tern.fits', sha256: 'ab'.repeat(32), reading: reading() },
  ...{ analysis: analysis([feature(0, 589.13523)]), identifications: [], ...changes },
});
const report = (spectra: ReportedSpectrum[]): LineReport => ({
  ...{
    programmeName: 'Dunlin',
    targetName: 'Tern 1',
    simulated: true,
    spectra,
    programVersion: '0.1.0',
    writtenAt: '2026-12-01T12:00:00.000Z',
  },
  lines: new Map([SODIUM, CARBON].map((line) => [line.id, line])),
});

const commentsOf = (csv: string) => csv.split('\r\n').filter((line) => line.startsWith('# '));
function rowsOf(csv: string): Record<string, string>[] {
  const table = csv.slice(csv.indexOf('\r\nspectrum,feature,') + 2);
  return Papa.parse<Record<string, string>>(table, { header: true, skipEmptyLines: true }).data;
}
const write = (...spectra: ReportedSpectrum[]) => lineReportCsv(report(spectra));

test('says in its comments all that is needed to read it', () => {
  expect(commentsOf(write(spectrum())).map((line) => line.slice(2))).toEqual(
    expect.arrayContaining([
      'programme: Dunlin',
      'target: Tern 1',
      'simulated: yes, these data were computed and are no observation',
      'equivalent width: positive in absorption, negative in emission',
      'velocity: relativistic Doppler velocity (VELO), positive when receding',
      'file: tern.fits',
      `sha256: ${'ab'.repeat(32)}`,
      'observed: 2026-03-04T05:06:07, as stated in the file (DATE-OBS)',
      'instrument: T1, Echelle',
      'medium of the file: air, as stated in the file (CARD)',
      'frame: barycentric, as stated in the file (SPECSYS)',
      'continuum: Planck fit; colour temperature 24140 +/- 910 K',
      'resolving power: 60000, stated',
      'signal to noise: 220 per sample (median), noise stated, rescaled',
      'line list: Foreveil default 2026.1',
      'program: Foreveil 0.1.0',
      'caution: The blue end is noisy.',
      'written: 2026-12-01T12:00:00.000Z',
    ]),
  );
});

test('does not call a frame heliocentric, or anything, that the file does not state', () => {
  const unknown = { value: 'unknown' as const, how: 'not_stated' as const, where: '' };
  expect(commentsOf(write(spectrum({ reading: reading({ frame: unknown }) })))).toContain('# frame: not stated in the file');
});

test('explains every column, and has no other', () => {
  const csv = write(spectrum());
  const explained = commentsOf(csv).flatMap((line) => /^# column (\w+): \S/.exec(line)?.[1] ?? []);
  expect(Object.keys(rowsOf(csv)[0]!)).toEqual(explained);
});

test('gives the numbers of a line, rounded to their errors', () => {
  const [row] = rowsOf(write(spectrum()));
  expect(row).toMatchObject({
    ...{ spectrum: '1', feature: '0', kind: 'A', lambda_obs_nm: '589.135230', lambda_obs_err_nm: '0.000022' },
    // air wavelength of Na I D2: 588.9950 nm as in the tables of Morton 2000, ApJS 130, 403 and NIST, here to 6 decimals
    ...{ lambda_rest_vac_nm: '589.158325', lambda_rest_air_nm: '588.995085', title: 'Na I 589.158', species: 'Na I', ion_stage: '1' },
    ...{ e_low_ev: '0', log_gf: '0.108', einstein_a_per_s: '61600000', source: 'NIST ASD, levels and A' },
    ...{ ew_pm: '10.645', ew_err_pm: '0.044', fwhm_pm: '20.00', fwhm_err_pm: '0.57', depth: '0.5000', depth_err: '0.0017' },
    ...{ rv_km_s: '-11.752', rv_err_km_s: '0.011', snr: '219.6', family: 'interstellar', system: 'cloud1', probability: '0.987654' },
    ...{ status: 'unreviewed', flags: '', reviewer: '', reviewed_at: '', remark: '' },
  });
});

test('has no air wavelength in the far ultraviolet, and energies in eV', () => {
  const [row] = rowsOf(write(spectrum({ analysis: analysis([feature(0, 133.5, { candidates: [candidate(CARBON)] })]) })));
  // 63.42 cm^-1 x 1.239841984e-4 eV cm (CODATA 2018, exact) = 0.00786308 eV
  expect(row).toMatchObject({ lambda_rest_vac_nm: '133.566', lambda_rest_air_nm: '', e_low_ev: '0.00786308', ion_stage: '2' });
});

test('lists what is unidentified, and emission with its signs', () => {
  const peak = { kind: 'peak', equivalentWidthNm: -0.5, equivalentWidthSigmaNm: 0.012, depth: -3.21, depthSigma: 0.11 } as const;
  const features = [
    feature(0, 600, { candidates: [], unidentifiedProbability: 1 }),
    feature(1, 601, { ...peak, unidentifiedProbability: 0.99 }),
  ];
  expect(rowsOf(write(spectrum({ analysis: analysis(features) })))).toMatchObject([
    { kind: 'A', title: 'unidentified', species: '', lambda_rest_vac_nm: '', rv_km_s: '', rv_err_km_s: '', probability: '1' },
    { kind: 'E', title: 'unidentified', ew_pm: '-500', ew_err_pm: '12', depth: '-3.21', probability: '0.99' },
  ]);
});

test('puts what people decided before what the analysis thinks', () => {
  const decided = [
    decision(),
    decision({ id: 'j', featureIndex: 1, lineId: null, species: null, restNm: null, state: 'rejected', history: [] }),
  ];
  const rows = rowsOf(write(spectrum({ analysis: analysis([feature(0, 589.13523), feature(1, 600)]), identifications: decided })));
  expect(rows).toMatchObject([
    { status: 'accepted', reviewer: 'Vera Vale', reviewed_at: '2026-12-01T10:00:00.000Z', remark: `'=HYPERLINK("x")`, probability: '0.9' },
    { status: 'rejected', title: 'unidentified', remark: '' },
  ]);
});

test('keeps a decision whose feature is gone, and says so', () => {
  const gone = decision({ featureIndex: null, wavelengthNm: 400.1 });
  const rows = rowsOf(write(spectrum({ identifications: [gone] })));
  expect(rows).toMatchObject([
    { feature: '', lambda_obs_nm: '400.100000', flags: 'not found again', status: 'accepted', depth: '', snr: '', fwhm_err_pm: '' },
    { feature: '0', status: 'unreviewed' },
  ]);
});

test('goes spectrum by spectrum, each by wavelength, and tells them apart', () => {
  const csv = write(
    spectrum({ analysis: analysis([feature(0, 600), feature(1, 500)]) }),
    spectrum({ label: 'Tern 1, red', fileName: 'red.csv', analysis: null }),
    spectrum({ label: 'Tern 1, again', analysis: analysis([feature(0, 400)]) }),
  );
  expect(rowsOf(csv).map(({ spectrum: number, lambda_obs_nm: nm }) => [number, nm])).toEqual([
    ['1', '500.000000'],
    ['1', '600.000000'],
    ['3', '400.000000'],
  ]);
  expect(commentsOf(csv)).toEqual(
    expect.arrayContaining(['# spectrum 1: Tern 1, blue', '# spectrum 2 file: red.csv', '# spectrum 2 analysis: none completed yet']),
  );
});
