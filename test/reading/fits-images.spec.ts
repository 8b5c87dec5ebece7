import { airToVacuum, C_KM_PER_S, type AirNm } from '@foreveil/shared';
import { binaryTable, concat, elements, image, unit, type Card } from './support/fits-builder.js';
import { codes, range, read, refusal } from './support/read.js';

/** Spectral axes of images: Greisen et al. 2006, A&A 446, 747 (Paper III), and the conventions that came before it. */
const N = 40;
const FLUX = range(N, (i) => 1 + 0.01 * i);
const axis = (ctype: string, crval: number, cdelt: number, more: Card[] = []): Card[] => [
  ['CTYPE1', ctype],
  ['CRVAL1', crval],
  ['CDELT1', cdelt],
  ['CRPIX1', 1],
  ...more,
];
/** Vacuum nm in file order. */
const inFileOrder = (cards: Card[]): number[] => {
  const { spectrum, reading } = read(image(FLUX, cards));
  const nm = [...spectrum.wavelength];
  return reading.firstNm > reading.lastNm ? nm.reverse() : nm;
};
const expectAxis = (cards: Card[], expected: (i: number) => number) =>
  inFileOrder(cards).forEach((nm, i) => expect(Math.abs(nm / expected(i) - 1)).toBeLessThan(1e-12));

describe('linear axes', () => {
  it.each([1, 1024.5, -3])('counts pixels from 1 at reference pixel %d', (crpix) => {
    const cards = axis('WAVE', 5e-7, 1e-10).map((card): Card => (card[0] === 'CRPIX1' ? ['CRPIX1', crpix] : card));
    expectAxis(cards, (i) => (5e-7 + (i + 1 - crpix) * 1e-10) * 1e9);
  });

  it('takes CD1_1 for CDELT1, and multiplies CDELT1 by PC1_1', () => {
    expectAxis(
      [
        ['CTYPE1', 'WAVE'],
        ['CUNIT1', 'nm'],
        ['CRVAL1', 500],
        ['CRPIX1', 1],
        ['CD1_1', 0.2],
      ],
      (i) => 500 + 0.2 * i,
    );
    expectAxis(
      axis('WAVE', 500, 0.1, [
        ['CUNIT1', 'nm'],
        ['PC1_1', 2],
      ]),
      (i) => 500 + 0.2 * i,
    );
  });

  it('takes pixel 0 where CRPIX1 is missing, as the standard says, and warns', () => {
    const result = read(
      image(FLUX, [
        ['CTYPE1', 'WAVE'],
        ['CUNIT1', 'nm'],
        ['CRVAL1', 500],
        ['CDELT1', 1],
      ]),
    );
    expect(result.reading.firstNm).toBe(501);
    expect(codes(result)).toContain('reference_pixel_assumed');
  });

  it('asks for the unit where Angstrom and nm both fit', () => {
    expect(refusal(image(FLUX, axis('LINEAR', 1500, 1))).code).toBe('unknown_axis_unit');
    expect(read(image(FLUX, axis('LINEAR', 1500, 1)), { axisUnit: 'nm' }).reading.firstNm).toBe(1500);
  });

  it('reads the unit from the attribute string or the name of the axis', () => {
    expect(
      read(image(FLUX, axis('LINEAR', 1500, 1, [['WAT1_001', 'wtype=linear label=Wavelength units=angstroms']]))).reading.axisUnit,
    ).toEqual({
      value: 'angstrom',
      how: 'stated',
      where: 'WAT1_001',
    });
    expect(read(image(FLUX, axis('WAVELENGTH [nm]', 1500, 1))).reading.axisUnit).toEqual({ value: 'nm', how: 'stated', where: 'CTYPE1' });
  });
});

describe('the codes of Paper III', () => {
  const c = C_KM_PER_S * 1000;
  const h = 6.62607015e-34;
  it('reads wavelengths in air and turns them into vacuum', () => {
    expectAxis(axis('AWAV', 5e-7, 1e-10), (i) => airToVacuum(((5e-7 + i * 1e-10) * 1e9) as AirNm));
    expect(read(image(FLUX, axis('AWAV', 5e-7, 1e-10))).reading.medium).toEqual({ value: 'air', how: 'stated', where: 'CTYPE1' });
  });
  it('reads frequencies, energies in joules and wavenumbers per metre', () => {
    expectAxis(axis('FREQ', 5e14, 1e11), (i) => (c / (5e14 + i * 1e11)) * 1e9);
    expectAxis(axis('ENER', 3e-19, 1e-22), (i) => ((h * c) / (3e-19 + i * 1e-22)) * 1e9);
    expectAxis(axis('WAVN', 2e6, 1e3), (i) => 1e9 / (2e6 + i * 1e3));
  });

  const rest: Card[] = [['RESTWAV', 6.564614e-7]];
  // lambda0 = 656.4614 nm seen at 657.5 nm: 474.307, 473.558 and 473.932 km/s in the three conventions, from the definitions
  it.each([
    ['VOPT', 474.307],
    ['VRAD', 473.558],
    ['VELO', 473.932],
  ])('reads %s about a rest wavelength', (code, velocity) => {
    expect(inFileOrder(axis(code, velocity * 1000, 500, rest))[0]).toBeCloseTo(657.5, 5);
    expect(inFileOrder(axis(code, velocity, 0.5, [...rest, ['CUNIT1', 'km/s']]))[0]).toBeCloseTo(657.5, 5);
  });
  it('reads redshift and v/c, which have no unit', () => {
    expectAxis(axis('ZOPT', 0.1, 1e-4, rest), (i) => 656.4614 * (1.1 + i * 1e-4));
    expectAxis(axis('BETA', 0.1, 1e-4, rest), (i) => 656.4614 * Math.sqrt((1.1 + i * 1e-4) / (0.9 - i * 1e-4)));
  });
  it('refuses velocities without a rest wavelength', () => {
    expect(refusal(image(FLUX, axis('VOPT', 0, 500)))).toMatchObject({ code: 'no_rest_wavelength', card: 'RESTWAV' });
  });

  it('reads natural logarithms: S = Sr exp(w / Sr)', () => {
    expectAxis(axis('WAVE-LOG', 500, 0.1, [['CUNIT1', 'nm']]), (i) => 500 * Math.exp((0.1 * i) / 500));
    expectAxis(axis('FREQ-LOG', 5e14, 1e11), (i) => ((c / 5e14) * 1e9) / Math.exp((1e11 * i) / 5e14));
  });
  it('reads axes even in the reciprocal', () => {
    // WAVE-F2W: frequency is linear, with d(nu) = -c / lambda^2 d(lambda) at the reference
    expectAxis(axis('WAVE-F2W', 5e-7, 1e-10), (i) => (c / (c / 5e-7 - (c / 5e-7 ** 2) * 1e-10 * i)) * 1e9);
    expectAxis(axis('FREQ-W2F', 5e14, 1e11), (i) => (c / 5e14 - (c / 5e14 ** 2) * 1e11 * i) * 1e9);
  });
  it.each(['WAVE-GRI', 'AWAV-GRA', 'VOPT-F2W', 'WAVE-V2W'])('names the algorithm it does not know: %s', (ctype) => {
    const problem = refusal(image(FLUX, axis(ctype, 5e-7, 1e-10, rest)));
    expect(problem.code).toBe('unsupported_algorithm');
    expect(problem.sentence).toContain(ctype);
  });
  it('refuses an axis of positions', () => {
    expect(refusal(image(FLUX, axis('RA---TAN', 10, 0.1))).code).toBe('no_spectrum');
  });

  it('reads a look-up table with an index column', () => {
    const cards: Card[] = [...axis('WAVE-TAB', 1, 1), ['CUNIT1', 'nm'], ['PS1_0', 'TAB'], ['PS1_1', 'COORDS'], ['PS1_2', 'INDEX']];
    const table = binaryTable(
      [
        { name: 'COORDS', form: '3D', rows: [[500, 520, 600]] },
        { name: 'INDEX', form: '3D', rows: [[1, 21, 41]] },
      ],
      [['EXTNAME', 'TAB']],
    );
    const { spectrum } = read(concat(image(FLUX, cards), table));
    spectrum.wavelength.forEach((nm, i) => expect(nm).toBeCloseTo(i <= 20 ? 500 + i : 520 + 4 * (i - 20), 9));
    expect(refusal(image(FLUX, cards)).code).toBe('no_look_up_table');
  });
});

describe('decadic logarithms of older conventions', () => {
  it('reads DC-FLAG = 1 and the COEFF cards', () => {
    const log10 = (i: number) => 10 ** (3.6 + 1e-4 * i) / 10;
    expectAxis(axis('LINEAR', 3.6, 1e-4, [['DC-FLAG', 1]]), log10);
    expectAxis(
      [
        ['COEFF0', 3.6],
        ['COEFF1', 1e-4],
      ],
      log10,
    );
  });
  it('does not read a dispersion function that is not linear as if it were', () => {
    const wat: Card[] = [
      ['WAT1_001', 'wtype=multispec label=Wavelength units=angstroms'],
      ['WAT2_001', 'wtype=multispec spec1 = "1 113 2 4955.4 0.05 40 0. 23.2 31.3 1. 0. 2 4"'],
    ];
    expect(refusal(image(FLUX, axis('MULTISPE', 5000, 1, wat))).code).toBe('unsupported_algorithm');
  });
});

describe('rows and shapes', () => {
  const nm: Card[] = axis('WAVE', 500, 0.1, [['CUNIT1', 'nm']]);
  const sigma = FLUX.map((f) => f / 100);
  it('reads rows by the names that the header gives them', () => {
    const rows = [...FLUX.map((f) => 2 * f), ...FLUX, ...sigma];
    const named = (keyword: string, names: string[]) =>
      read(image(rows, [...nm, ...names.map((name, i): Card => [`${keyword}${i + 1}`, name])], [N, 1, 3]));
    for (const result of [
      named('ARRAY', ['RAW', 'SPECTRUM', 'SIGMA']),
      named('BANDID', ['raw - background none', 'spectrum - background fit', 'sigma - background fit']),
    ]) {
      expect([...result.spectrum.flux]).toEqual(FLUX);
      expect([...result.spectrum.sigma!]).toEqual(sigma);
    }
  });
  it('takes the first of rows without names and warns', () => {
    const result = read(image([...FLUX, ...sigma], nm, [N, 2]));
    expect([...result.spectrum.flux]).toEqual(FLUX);
    expect(result.spectrum.sigma).toBeNull();
    expect(codes(result)).toContain('rows_not_named');
    expect(read(image([...FLUX, ...sigma], nm, [N, 2]), { fluxColumn: 'row 2' }).spectrum.flux[0]).toBe(sigma[0]);
  });
  it('reads a spectrum along the second axis', () => {
    const cards: Card[] = [
      ['CTYPE2', 'WAVE'],
      ['CUNIT2', 'nm'],
      ['CRVAL2', 500],
      ['CDELT2', 0.1],
      ['CRPIX2', 1],
    ];
    expect(read(image(FLUX, cards, [1, N])).reading.lastNm).toBeCloseTo(503.9, 9);
  });
  it('refuses pictures and empty images', () => {
    expect(
      refusal(
        image(
          range(400, (i) => i),
          nm,
          [20, 20],
        ),
      ).code,
    ).toBe('not_one_dimensional');
    expect(refusal(image([], nm, [0])).code).toBe('no_data');
  });
  it('reads error and wavelength images that go with a flux image', () => {
    const part = (name: string, values: number[], more: Card[] = []) =>
      unit(
        [['XTENSION', 'IMAGE'], ['BITPIX', -64], ['NAXIS', 1], ['NAXIS1', N], ['PCOUNT', 0], ['GCOUNT', 1], ['EXTNAME', name], ...more],
        elements('D', values),
      );
    const wave = range(N, (i) => 500 + i);
    const { spectrum, reading } = read(concat(image(FLUX, []), part('WAVELENGTH', wave, [['BUNIT', 'nm']]), part('ERROR', sigma)));
    expect([...spectrum.wavelength]).toEqual(wave);
    expect([...spectrum.sigma!]).toEqual(sigma);
    expect(reading.axisUnit).toEqual({ value: 'nm', how: 'stated', where: 'BUNIT of HDU 1 WAVELENGTH' });
  });
});
