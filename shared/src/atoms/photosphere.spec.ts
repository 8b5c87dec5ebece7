import { lineOf } from '../../../test/support/lines.js';
import { photosphericIndex } from './photosphere.js';

const SODIUM = lineOf({ species: 'Na I', wavelengthNm: 589.7558, logGf: -0.194, lowerEnergyPerCm: 0 });
const IRON = lineOf({ species: 'Fe I', wavelengthNm: 540.7277, logGf: -1.876, lowerEnergyPerCm: 12968.554 });
const IONISED = lineOf({ species: 'Fe II', wavelengthNm: 517.0468, logGf: -1.05, lowerEnergyPerCm: 23317.6351 });

describe('strength index, worked by hand at T = 6000 K, log n_e = 13.5', () => {
  // theta = 11604.518 / 6000 = 1.934086 per eV, 0.839963 in log10; Saha: 15.683890 + 1.5 log10 T = 21.351117, less 13.5 is 7.851117
  const index = (line: typeof SODIUM) => photosphericIndex([line], 6000, 13.5)[0]!;

  it('of the sodium line at 589.8 nm', () => {
    // U(Na I) = 2.1660, U(Na II) = 1, chi = 5.139077 eV
    // log n(II)/n(I) = 7.851117 + log10(1 / 2.1660) - 0.839963 x 5.139077 = 7.851117 - 0.335658 - 4.316635 = 3.198824
    // neutral: -log10(1 + 10^3.198824) = -3.199099; Na III takes nothing at 47 eV
    // 6.24 - 12 - 3.199099 - 0.335658 - 0.194 + log10(589.7558) = 2.770672
    expect(index(SODIUM)).toBeCloseTo(-5.76 - 3.199099 - 0.335658 - 0.194 + 2.770672, 4);
  });

  it('of an iron line that starts 1.6 eV up', () => {
    // U(Fe I) = 31.7377, U(Fe II) = 47.56, chi = 7.902468 eV
    // log n(II)/n(I) = 7.851117 + log10(47.56 / 31.7377) - 0.839963 x 7.902468 = 7.851117 + 0.175658 - 6.637781 = 1.388994
    // neutral: -log10(1 + 10^1.388994) = -1.406371
    // Boltzmann: 12968.554 / (0.695034800 x 6000) x log10(e) = 3.109809 x 0.434294 = 1.350573
    // 7.50 - 12 - 1.406371 - log10(31.7377) = 1.501576, - 1.876 + log10(540.7277) = 2.732979, - 1.350573
    expect(index(IRON)).toBeCloseTo(-4.5 - 1.406371 - 1.501576 - 1.876 + 2.732979 - 1.350573, 4);
  });

  it('of a line of ionised iron', () => {
    // ionised: 1.388994 - 1.406371 = -0.017377; U(Fe II) = 47.56: 1.677242; Boltzmann: 5.591450 x 0.434294 = 2.428336; Fe III at 16.2 eV: none
    expect(index(IONISED)).toBeCloseTo(-4.5 - 0.017377 - 1.677242 - 1.05 + 2.71353 - 2.428336, 4);
  });
});

describe('strength index', () => {
  it('goes with gf and wavelength, as a thin line does', () => {
    const [one, double] = photosphericIndex([SODIUM, { ...SODIUM, logGf: SODIUM.logGf! + 0.3 }], 5500, 13);
    expect(double! - one!).toBeCloseTo(0.3, 9);
  });

  it('is the same for a line whatever other lines are asked with it', () => {
    const together = photosphericIndex([IRON, SODIUM, IONISED], 7000, 14);
    expect([IRON, SODIUM, IONISED].map((l) => photosphericIndex([l], 7000, 14)[0])).toEqual([...together]);
  });

  it('favours ions in hot stars and atoms in cool ones', () => {
    const gap = (t: number) => {
      const [atom, ion] = photosphericIndex([IRON, IONISED], t, 13);
      return ion! - atom!;
    };
    for (let t = 4000; t < 12_000; t += 500) expect(gap(t + 500)).toBeGreaterThan(gap(t));
  });

  it('has the Balmer line strongest near 9000 K: excitation fills its lower level, ionisation empties the atom', () => {
    const balmer = lineOf({ species: 'H I', wavelengthNm: 656.46, logGf: 0.71, lowerEnergyPerCm: 82259.16 });
    const at = (t: number) => photosphericIndex([balmer], t, 14)[0]!;
    const temperatures = Array.from({ length: 50 }, (_, i) => 5000 + 500 * i);
    const strongest = temperatures.reduce((best, t) => (at(t) > at(best) ? t : best));
    expect(strongest).toBeGreaterThanOrEqual(8500);
    expect(strongest).toBeLessThanOrEqual(12_000);
    expect(at(25_000)).toBeLessThan(at(strongest) - 1);
  });

  it('is none where the list or the tables lack a number', () => {
    const lacking = [
      { ...SODIUM, logGf: null },
      { ...SODIUM, lowerEnergyPerCm: null },
      lineOf({ species: 'CH', logGf: -1, lowerEnergyPerCm: 0 }),
      lineOf({ species: 'Xx I', logGf: 0, lowerEnergyPerCm: 0 }),
    ];
    expect([...photosphericIndex(lacking, 6000, 13)]).toEqual([NaN, NaN, NaN, NaN]);
  });
});
