import { hasMedium, wavelengthIn, type VacuumNm } from '@foreveil/shared';
import { fixed } from '../lib/number.js';
import type { WavelengthDisplay } from '../lib/wavelength.js';
import { niceTicks, tickDigits } from './ticks.js';

/** How much the shown number changes per nm at a wavelength, without sign: turns an error in nm into one in the shown unit. */
export function shownPerNm(nm: number, { unit }: WavelengthDisplay): number {
  // a length is in proportion to the nm, everything else to its inverse
  return hasMedium(unit) ? wavelengthIn(1 as VacuumNm, unit) : wavelengthIn(nm as VacuumNm, unit) / nm;
}

/** Decimals that show as much as `decimalsInNm` do in nm. */
export const decimalsFor = (nm: number, display: WavelengthDisplay, decimalsInNm: number) =>
  Math.max(0, decimalsInNm - Math.round(Math.log10(shownPerNm(nm, display))));

/** A vacuum wavelength as shown, as finely as `decimalsInNm` decimals in nm. */
export const shownWavelength = (nm: number, display: WavelengthDisplay, decimalsInNm: number) =>
  fixed(display.show(nm), decimalsFor(nm, display, decimalsInNm));

export interface AxisTick {
  /** where it stands, vacuum nm */
  readonly nm: number;
  readonly label: string;
}

/** Round numbers of the shown unit, at the vacuum wavelengths where they stand. */
export function axisTicks(fromNm: number, toNm: number, display: WavelengthDisplay, count: number): AxisTick[] {
  const [a, b] = [display.show(fromNm), display.show(toNm)];
  const shown = niceTicks(Math.min(a, b), Math.max(a, b), count);
  const decimals = tickDigits(shown);
  return shown.map((value) => ({ nm: display.read(value), label: fixed(value, decimals) }));
}
