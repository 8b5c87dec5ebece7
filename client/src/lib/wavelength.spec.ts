import { expect, test } from 'vitest';
import { wavelengthDisplay } from './wavelength.js';

test('a vacuum wavelength is shown in air as published', () => {
  // Na I D2: 589.15833 nm in vacuum, 588.99509 nm in air (NIST Atomic Spectra Database)
  expect(wavelengthDisplay('nm', 'air').show(589.15833)).toBeCloseTo(588.9951, 3);
  expect(wavelengthDisplay('angstrom', 'air').show(589.15833)).toBeCloseTo(5889.951, 2);
  expect(wavelengthDisplay('micron', 'vacuum').show(589.15833)).toBeCloseTo(0.58915833, 9);
});

test('wavenumbers belong to vacuum whatever medium is chosen', () => {
  const shown = wavelengthDisplay('wavenumber', 'air');
  expect(shown.medium).toBe('vacuum');
  expect(shown.show(500)).toBe(20_000);
});

test('a hundred changes of unit and medium leave a wavelength as it was', () => {
  let nm = 656.4614;
  for (let i = 0; i < 100; i++) {
    const display = wavelengthDisplay(
      (['nm', 'angstrom', 'micron', 'wavenumber', 'terahertz', 'electronvolt'] as const)[i % 6]!,
      i % 3 ? 'air' : 'vacuum',
    );
    nm = display.read(display.show(nm));
  }
  expect(Math.abs(nm - 656.4614)).toBeLessThan(1e-10); // some hundred roundings of 1e-13
});

test('frequencies and photon energies are those of the vacuum wavelength', () => {
  // c = 299 792 458 m/s and h c = 1239.841984 eV nm, both exact in the SI
  expect(wavelengthDisplay('terahertz', 'air').show(500)).toBeCloseTo(599.584916, 6);
  expect(wavelengthDisplay('electronvolt', 'air').show(500)).toBeCloseTo(2.479683968, 8);
  expect(wavelengthDisplay('electronvolt', 'air').shortLabel).toBe('eV');
});
