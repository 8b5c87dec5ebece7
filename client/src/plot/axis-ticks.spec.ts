import fc from 'fast-check';
import type { Medium, WavelengthUnit } from '@foreveil/shared';
import { describe, expect, it } from 'vitest';
import { wavelengthDisplay } from '../lib/wavelength.js';
import { axisTicks, shownPerNm, shownWavelength } from './axis-ticks.js';
import { scaledUnit, typesetUnit, valueLabels } from './value-axis.js';

const displays = fc.tuple(
  fc.constantFrom<WavelengthUnit>('nm', 'angstrom', 'micron', 'wavenumber', 'terahertz', 'electronvolt'),
  fc.constantFrom<Medium>('vacuum', 'air'),
);

describe('the wavelength axis', () => {
  it('has round numbers of the shown unit, where they belong, inside the view', () => {
    fc.assert(
      fc.property(
        displays,
        fc.double({ min: 210, max: 900, noNaN: true }),
        fc.double({ min: 0.01, max: 300, noNaN: true }),
        ([unit, medium], from, length) => {
          const display = wavelengthDisplay(unit, medium);
          const ticks = axisTicks(from, from + length, display, 10);
          expect(ticks.length).toBeGreaterThan(1);
          for (const { nm, label } of ticks) {
            expect(nm).toBeGreaterThan(from - 1e-6 * length);
            expect(nm).toBeLessThan(from + length * (1 + 1e-6));
            expect(Number(label.replace(/\u202f/g, ''))).toBeCloseTo(display.show(nm), 6);
          }
        },
      ),
    );
  });

  it('turns an error in nm into the shown unit as the scale does', () => {
    for (const unit of ['nm', 'angstrom', 'micron', 'wavenumber', 'terahertz', 'electronvolt'] as const) {
      const display = wavelengthDisplay(unit, 'vacuum');
      const slope = Math.abs(display.show(500.001) - display.show(499.999)) / 0.002;
      expect(shownPerNm(500, display) / slope).toBeCloseTo(1, 6);
    }
  });

  it('shows the Na I D2 line as the trade writes it', () => {
    // vacuum 589.1583 nm, air 5889.951 Å: NIST Atomic Spectra Database
    expect(shownWavelength(589.158326, wavelengthDisplay('nm', 'vacuum'), 4)).toBe('589.1583');
    expect(shownWavelength(589.158326, wavelengthDisplay('angstrom', 'air'), 4)).toBe('5889.951');
  });
});

describe('the flux axis', () => {
  it('takes the power of ten out of the labels and names it in the unit', () => {
    expect(valueLabels([0, 5e-16, 1e-15], -15)).toEqual(['0.0', '0.5', '1.0']);
    expect(scaledUnit('erg/s/cm²/Å', -15)).toBe('10⁻¹⁵ erg/s/cm²/Å');
    expect(scaledUnit('counts', 0)).toBe('counts');
  });

  it('typesets the units of FITS headers', () => {
    expect(typesetUnit('erg/s/cm2/Angstrom')).toBe('erg/s/cm²/Å');
    expect(typesetUnit('erg s-1 cm**-2 Angstrom^-1')).toBe('erg s⁻¹ cm⁻² Å⁻¹');
  });
});
