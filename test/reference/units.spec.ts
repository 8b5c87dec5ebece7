import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import {
  BOLTZMANN_J_PER_K,
  C_KM_PER_S,
  C_M_PER_S,
  composeVelocities,
  convertFluxDensity,
  dopplerFactor,
  dopplerVelocity,
  fromNm,
  fromOpticalVelocity,
  fromRadioVelocity,
  hzPerNm,
  isLength,
  J_PER_EV,
  janskyToCgs,
  opticalVelocity,
  PLANCK_J_S,
  radioVelocity,
  shifted,
  toNm,
  velocityOfFactor,
  wavelengthFrom,
  wavelengthIn,
  type FluxDensityUnit,
  type KmPerS,
  type SpectralUnit,
  type VacuumNm,
  type WavelengthUnit,
} from '@foreveil/shared';

/**
 * Reference values computed with 40 digits and, independently, with astropy 5.2.1 (units.spectral, doppler_*, spectral_density);
 * definitions of the velocities: Greisen et al. 2006, A&A 446, 747, table 3.
 */
interface Reference {
  tolerance: { relative: number };
  cases: ({ kind: string; id: string } & Record<string, unknown>)[];
}
const reference = JSON.parse(readFileSync('test/fixtures/reference/units.json', 'utf8')) as Reference;
const RELATIVE = reference.tolerance.relative;
const casesOf = <T>(kind: string) => reference.cases.filter((one) => one.kind === kind) as unknown as (T & { id: string })[];

const within = (value: number, expected: number, relative = RELATIVE) =>
  expect(Math.abs(value - expected)).toBeLessThanOrEqual(relative * Math.abs(expected));

const SPECTRAL: Record<string, SpectralUnit> = {
  Angstrom: 'angstrom',
  nm: 'nm',
  um: 'micron',
  m: 'm',
  'cm^-1': 'wavenumber_per_cm',
  Hz: 'hz',
  GHz: 'ghz',
  THz: 'thz',
  eV: 'ev',
  keV: 'kev',
};
const FLUX: Record<string, FluxDensityUnit> = {
  'erg s-1 cm-2 Angstrom-1': 'cgs_per_angstrom',
  'W m-2 nm-1': 'w_m2_per_nm',
  'W m-2 um-1': 'w_m2_per_micron',
  'photon s-1 cm-2 Angstrom-1': 'photon_per_angstrom',
  'erg s-1 cm-2 Hz-1': 'cgs_per_hz',
  'W m-2 Hz-1': 'w_m2_per_hz',
  Jy: 'jy',
  mJy: 'mjy',
};
interface Conversion {
  from: { value: number; unit: string };
  to: { value: number; unit: string };
}

describe('constants', () => {
  it('are the exact ones of the SI (BIPM SI Brochure, 9th edition, 2019)', () => {
    expect(C_M_PER_S).toBe(299792458);
    expect(C_KM_PER_S * 1000).toBe(C_M_PER_S);
    expect([PLANCK_J_S, BOLTZMANN_J_PER_K, J_PER_EV]).toEqual([6.62607015e-34, 1.380649e-23, 1.602176634e-19]);
  });
});

describe('spectral axis units', () => {
  const cases = casesOf<Conversion>('spectral_axis');
  it('has the reference cases', () => expect(cases.length).toBe(150));
  it.each(cases)('$id', ({ from, to }) => {
    within(fromNm(toNm(from.value, SPECTRAL[from.unit]!), SPECTRAL[to.unit]!), to.value);
  });

  it('knows which units tell air from vacuum', () => {
    const lengths = Object.values(SPECTRAL).filter(isLength);
    expect(lengths.sort()).toEqual(['angstrom', 'm', 'micron', 'nm']);
  });

  it('comes back to the same wavelength from every unit', () => {
    const units = fc.constantFrom(...Object.values(SPECTRAL), 'wavenumber_per_m' as const);
    fc.assert(
      fc.property(units, fc.double({ min: 1e-3, max: 1e9, noNaN: true }), (unit, nm) => within(toNm(fromNm(nm, unit), unit), nm, 4e-16)),
    );
  });

  it('shows a wavelength in the units of the screen', () => {
    const shown = (unit: WavelengthUnit) => wavelengthIn(589.158326 as VacuumNm, unit);
    within(shown('angstrom'), 5891.58326);
    within(shown('micron'), 0.589158326);
    within(shown('wavenumber'), 16973.36617118435);
    within(wavelengthFrom(16973.36617118435, 'wavenumber'), 589.158326);
  });
});

describe('Doppler velocities', () => {
  interface Doppler {
    convention: 'relativistic' | 'optical' | 'radio';
    rest_vacuum_nm: number;
    v_km_s: number;
    observed_vacuum_nm: number;
  }
  const cases = casesOf<Doppler>('doppler');
  const toObserved = {
    relativistic: (v: KmPerS, rest: VacuumNm) => shifted(rest, v),
    optical: fromOpticalVelocity,
    radio: fromRadioVelocity,
  };
  const toVelocity = { relativistic: dopplerVelocity, optical: opticalVelocity, radio: radioVelocity };

  it('has the reference cases', () => expect(cases.length).toBe(255));
  it.each(cases)('$id', ({ convention, rest_vacuum_nm, v_km_s, observed_vacuum_nm }) => {
    const rest = rest_vacuum_nm as VacuumNm;
    within(toObserved[convention](v_km_s as KmPerS, rest), observed_vacuum_nm);
    // below 1 km/s the velocity is lost in the last digits of the wavelength: 1e-16 c is 30 nm/s
    const back = toVelocity[convention](observed_vacuum_nm as VacuumNm, rest);
    expect(Math.abs(back - v_km_s)).toBeLessThanOrEqual(
      Math.max(RELATIVE * Math.abs(v_km_s), 3e-16 * C_KM_PER_S * (observed_vacuum_nm / rest + rest / observed_vacuum_nm)),
    );
  });

  it.each(casesOf<{ v_relativistic_km_s: number; v_radio_km_s: number; v_optical_km_s: number; z: number }>('velocity_convention'))(
    '$id in the three conventions',
    ({ v_relativistic_km_s, v_radio_km_s, v_optical_km_s, z }) => {
      const rest = 500 as VacuumNm;
      const observed = shifted(rest, v_relativistic_km_s as KmPerS);
      within(radioVelocity(observed, rest), v_radio_km_s, 1e-11);
      within(opticalVelocity(observed, rest), v_optical_km_s, 1e-11);
      within(dopplerFactor(v_relativistic_km_s as KmPerS) - 1, z, 1e-10);
    },
  );

  it('gives 474.307, 473.558 and 473.932 km/s for 656.4614 nm seen at 657.5 nm (worked from the definitions)', () => {
    const [observed, rest] = [657.5 as VacuumNm, 656.4614 as VacuumNm];
    expect(opticalVelocity(observed, rest)).toBeCloseTo(474.307, 3);
    expect(radioVelocity(observed, rest)).toBeCloseTo(473.558, 3);
    expect(dopplerVelocity(observed, rest)).toBeCloseTo(473.932, 3);
  });

  const velocity = fc.double({ min: -0.9 * C_KM_PER_S, max: 0.9 * C_KM_PER_S, noNaN: true });
  it('composes velocities as special relativity does (Einstein 1905): (a + b) / (1 + a b / c^2)', () => {
    fc.assert(
      fc.property(velocity, velocity, (a, b) => {
        const expected = (a + b) / (1 + (a * b) / C_KM_PER_S ** 2);
        expect(Math.abs(composeVelocities(a as KmPerS, b as KmPerS) - expected)).toBeLessThan(1e-9);
      }),
    );
  });
  it('comes back to the same velocity from a Doppler factor', () => {
    fc.assert(fc.property(velocity, (v) => expect(Math.abs(velocityOfFactor(dopplerFactor(v as KmPerS)) - v)).toBeLessThan(1e-9)));
  });
});

describe('flux densities', () => {
  const cases = casesOf<Conversion & { wavelength_nm: number }>('flux_density');
  it('has the reference cases', () => expect(cases.length).toBe(168));
  it.each(cases)('$id', ({ wavelength_nm, from, to }) => {
    within(convertFluxDensity(from.value, FLUX[from.unit]!, FLUX[to.unit]!, wavelength_nm), to.value);
  });

  it('gives the AB zero point of Oke & Gunn 1983 in all units', () => {
    const [zero] = casesOf<{ F_nu_erg_s_cm2_Hz: number; Jy: number; 'F_lambda_at_555.6nm_erg_s_cm2_A': number }>('ab_magnitude');
    within(convertFluxDensity(zero!.F_nu_erg_s_cm2_Hz, 'cgs_per_hz', 'jy', 555.6), zero!.Jy);
    within(janskyToCgs(zero!.Jy, 555.6), zero!['F_lambda_at_555.6nm_erg_s_cm2_A']);
  });

  it('keeps the energy of a small interval, whichever axis it is counted on', () => {
    fc.assert(
      fc.property(fc.double({ min: 10, max: 1e6, noNaN: true }), (nm) => {
        // |d nu| of an interval of 1e-6 of the wavelength, exactly by subtraction of frequencies
        const step = 1e-6 * nm;
        const exact = (C_M_PER_S * 1e9 * step) / ((nm - step / 2) * (nm + step / 2));
        within(hzPerNm(nm) * step, exact, 1e-12);
      }),
    );
  });

  it.each(casesOf<{ wavelength_nm: number; d_lambda_nm: number; d_nu_GHz: number }>('interval'))(
    '$id in GHz',
    ({ wavelength_nm, d_lambda_nm, d_nu_GHz }) => {
      within(hzPerNm(wavelength_nm) * d_lambda_nm * 1e-9, d_nu_GHz);
    },
  );
});
