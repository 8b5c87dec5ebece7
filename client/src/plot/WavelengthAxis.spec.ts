import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { wavelengthDisplay } from '../lib/wavelength.js';
import { placeTicks } from './WavelengthAxis.js';

describe('labels of the abscissa', () => {
  it('never touch each other, not even where wavenumbers crowd', () => {
    const unit = fc.constantFrom('nm', 'angstrom', 'micron', 'wavenumber' as const);
    fc.assert(
      fc.property(
        unit,
        fc.double({ min: 120, max: 900, noNaN: true }),
        fc.double({ min: 0.1, max: 800, noNaN: true }),
        fc.integer({ min: 200, max: 2000 }),
        (u, from, length, width) => {
          const ticks = placeTicks({ fromNm: from, toNm: from + length }, width, wavelengthDisplay(u, 'vacuum'), 84);
          const labels = ticks.filter((t) => t.labelled);
          expect(labels.length).toBeGreaterThan(0);
          labels.slice(1).forEach((next, i) => {
            const [a, b] = [labels[i]!, next];
            expect(b.x - a.x).toBeGreaterThan(((a.label.length + b.label.length) / 2) * 6);
          });
        },
      ),
    );
  });
});
