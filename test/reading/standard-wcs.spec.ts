import { C_KM_PER_S, offeredFrames } from '@foreveil/shared';
import { binaryTable, concat, image, primary, type Card } from './support/fits-builder.js';
import { codes, range, read, refusal } from './support/read.js';

/** Greisen et al. 2006, A&A 446, 747 (Paper III), which is section 8.4 of the FITS Standard 4.0, rule by rule. */
const N = 1025;
const FLUX = range(N, (i) => 1 + 1e-3 * i);
const axis = (ctype: string, crval: number, cdelt: number, more: Card[] = [], crpix = 1): Card[] => [
  ['CTYPE1', ctype],
  ['CRVAL1', crval],
  ['CDELT1', cdelt],
  ['CRPIX1', crpix],
  ...more,
];
const nm: Card[] = [['CUNIT1', 'nm']];
const wavelengths = (cards: Card[]) => read(image(FLUX, cards)).spectrum.wavelength;
const relative = (a: number, b: number) => Math.abs(a / b - 1);

it.each([1, 1024.5])('W-01 pixels count from 1: CRPIX1 = %d puts CRVAL1 there, not one pixel off', (crpix) => {
  const all = wavelengths(axis('WAVE', 500, 0.01, nm, crpix));
  all.forEach((value, i) => expect(relative(value, 500 + (i + 1 - crpix) * 0.01)).toBeLessThan(1e-15));
});

describe('W-02 without CUNIT the unit is the metre', () => {
  it('which is taken where the values can be metres', () =>
    expect(read(image(FLUX, axis('WAVE', 5e-7, 1e-11))).reading).toMatchObject({ firstNm: 500, axisUnit: { value: 'm', how: 'stated' } }));
  it('and asked for where they cannot, without a guess', () => {
    for (const ctype of ['WAVE', 'AWAV', 'WAVE-LOG']) {
      const problem = refusal(image(FLUX, axis(ctype, 5000, 1)));
      expect([problem.code, problem.answers?.[0], problem.card]).toEqual(['unknown_axis_unit', 'axisUnit', 'CUNIT1']);
      expect(problem.sentence).toContain('Angstrom is likely');
    }
    expect(read(image(FLUX, axis('WAVE', 5000, 1)), { axisUnit: 'angstrom' }).reading.firstNm).toBe(500);
  });
});

describe('W-03 logarithmic axes', () => {
  it.each(['WAVE-LOG', 'AWAV-LOG'])('%s is a natural logarithm: S = Sr exp(w / Sr)', (ctype) => {
    const { reading } = read(image(FLUX, axis(ctype, 500, 0.01, nm)));
    expect(relative(reading.lastNm, 500 * Math.exp((N - 1) * (0.01 / 500)))).toBeLessThan(1e-14);
    expect(reading.medium.value).toBe(ctype === 'WAVE-LOG' ? 'vacuum' : 'air');
  });
  it('loglam and COEFF0, COEFF1 of surveys are decadic', () => {
    const { reading } = read(
      image(FLUX, [
        ['COEFF0', 3.7],
        ['COEFF1', 1e-4],
      ]),
    );
    expect(relative(reading.lastNm, 10 ** (3.7 + 1e-4 * (N - 1)) / 10)).toBeLessThan(1e-14);
    const loglam = range(N, (i) => 3.7 + 1e-4 * i);
    const table = binaryTable([
      { name: 'flux', form: 'E', rows: FLUX },
      { name: 'loglam', form: 'D', rows: loglam },
    ]);
    expect(relative(read(concat(primary(), table)).reading.lastNm, reading.lastNm)).toBeLessThan(1e-14);
  });
  it.each(['FREQ', 'WAVN', 'ENER'])('%s-LOG runs down in wavelength', (type) => {
    const { reading } = read(image(FLUX, axis(`${type}-LOG`, 2e6, 10, [['CUNIT1', { FREQ: 'GHz', WAVN: 'm-1', ENER: 'eV' }[type]!]])));
    expect(relative(reading.firstNm / reading.lastNm, Math.exp((N - 1) * (10 / 2e6)))).toBeLessThan(1e-12);
  });
});

describe('W-04 algorithms', () => {
  it.each(['WAVE-GRI', 'AWAV-GRA', 'WAVE-V2W', 'VELO-F2V', 'WAVE-XYZ'])('%s is not taken for a straight line but named', (ctype) => {
    const problem = refusal(image(FLUX, axis(ctype, 500, 0.01, nm)));
    expect([problem.code, problem.sentence.includes(ctype)]).toEqual(['unsupported_algorithm', true]);
  });
  it('-TAB cards on the columns of a table give way to its utypes (IVOA Spectrum model 1.2)', () => {
    const table = binaryTable(
      [
        {
          name: 'COORD',
          form: 'D',
          rows: range(30, (i) => 500 + i),
          cards: [
            ['TUNIT', 'nm'],
            ['TUTYP', 'Spectrum.Data.SpectralAxis.Value'],
          ],
        },
        { name: 'DATA', form: 'D', rows: range(30, (i) => i + 1), cards: [['TUTYP', 'Spectrum.Data.FluxAxis.Value']] },
      ],
      [
        ['1CTYP2', 'WAVE-TAB'],
        ['1S2_1', 'WAVE'],
      ],
    );
    expect(read(concat(primary(), table)).reading.wavelengthColumn).toBe('COORD');
  });
});

describe('W-05 velocities about a rest wavelength', () => {
  // 657.5 nm in vacuum about 656.4614 nm: VOPT, VRAD and VELO from the definitions c(l/l0 - 1), c(1 - l0/l), c(q^2 - 1)/(q^2 + 1)
  const RESTWAV = 656.4614e-9;
  it.each([
    ['VOPT', 474.307],
    ['VRAD', 473.558],
    ['VELO', 473.932],
  ])('%s = %d km/s is 657.5 nm', (ctype, kmPerS) => {
    const { reading } = read(image(FLUX, axis(ctype, kmPerS * 1000, 100, [['RESTWAV', RESTWAV]])));
    // the velocities are given to 1 m/s, 2 pm at most
    expect(Math.abs(reading.firstNm - 657.5)).toBeLessThan(2e-6 * 657.5);
    expect(reading.medium.value).toBe('vacuum');
  });
  it('ZOPT and BETA have no unit; the rest may be given as a frequency', () => {
    const rest: Card[] = [['RESTFRQ', (C_KM_PER_S * 1e3) / RESTWAV]];
    expect(relative(read(image(FLUX, axis('ZOPT', 0.1, 1e-5, rest))).reading.firstNm, 656.4614 * 1.1)).toBeLessThan(1e-12);
    expect(relative(read(image(FLUX, axis('BETA', 0.6, 1e-5, rest))).reading.firstNm, 656.4614 * 2)).toBeLessThan(1e-12);
  });
  it('without a rest wavelength ask for it, and take it from a person', () => {
    const cards = axis('VOPT', 0, 1000);
    expect(refusal(image(FLUX, cards)).answers).toEqual(['restWavelengthNm']);
    expect(relative(read(image(FLUX, cards), { restWavelengthNm: 656.4614 }).reading.firstNm, 656.4614)).toBeLessThan(1e-14);
  });
});

describe('W-06 frames', () => {
  const when: Card[] = [
    ['DATE-OBS', '2012-03-04T05:06:07'],
    ['EXPTIME', 1200],
    ['RA', 266.4168],
    ['DEC', -29.0078],
  ];
  const site: Card[] = [
    ['OBSGEO-X', 1946404.3],
    ['OBSGEO-Y', -5467644.3],
    ['OBSGEO-Z', -2642728.2],
  ];
  const reading = (more: Card[]) => read(image(FLUX, axis('WAVE', 500, 0.01, [...nm, ...more]))).reading;
  it('BARYCENT and HELIOCEN: no motion of the Earth is taken off again, only the standards of rest are offered', () => {
    for (const specsys of ['BARYCENT', 'HELIOCEN']) {
      const offered = offeredFrames(reading([['SPECSYS', specsys], ...when, ...site])).map(({ to }) => to);
      expect(offered).toEqual(['lsrk', 'lsrd', 'lsr_2010']);
    }
  });
  it('TOPOCENT: the correction is offered only where direction, time and site are known', () => {
    const topo: Card[] = [['SPECSYS', 'TOPOCENT']];
    expect(offeredFrames(reading([...topo, ...when, ...site])).map(({ to }) => to)).toEqual([
      'barycentric',
      'heliocentric',
      'lsrk',
      'lsrd',
      'lsr_2010',
    ]);
    expect(offeredFrames(reading([...topo, ...when]))).toEqual([]);
    expect(offeredFrames(reading([...topo, ...site]))).toEqual([]);
  });
  it('unknown: nothing is offered, and it is not called heliocentric', () => {
    const unknown = reading([...when, ...site]);
    expect(unknown.frame).toEqual({ value: 'unknown', how: 'not_stated', where: '' });
    expect([offeredFrames(unknown), unknown.observerVelocityKmPerS.value]).toEqual([[], null]);
  });
  it('VELOSYS is kept and not applied, as its sign is not agreed on', () => {
    const bare = reading([['SPECSYS', 'TOPOCENT']]);
    const result = read(image(FLUX, axis('WAVE', 500, 0.01, [...nm, ['SPECSYS', 'TOPOCENT'], ['VELOSYS', 25000]])));
    expect([result.reading.firstNm, result.reading.lastNm]).toEqual([bare.firstNm, bare.lastNm]);
    expect(codes(result)).toEqual([]);
  });
});
