import type { Medium } from '../../units/index.js';
import type { Axis } from '../columns/axis.js';
import type { Stated } from '../types.js';
import type { Hdu } from './hdu.js';

/** Spectral axis of an image: its name, its values in nm and what it says of the medium. */
export interface ImageAxis {
  readonly name: string;
  readonly axis: Axis;
  readonly medium: Stated<Medium> | null;
}

/** Where an axis is described: axis number `k` of a unit, `length` pixels long. */
export interface AxisPlace {
  readonly hdu: Hdu;
  readonly k: number;
  readonly length: number;
}
