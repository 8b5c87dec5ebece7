import type { PrintWavelength } from '@foreveil/shared';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shownWavelength } from '../../../plot/axis-ticks.js';

/** Wavelengths in sentences as the page shows them everywhere: in the person's unit and medium. */
export const printerFor =
  (display: WavelengthDisplay): PrintWavelength =>
  (nm) =>
    `${shownWavelength(nm, display, 3)} ${display.unitLabel}`;
