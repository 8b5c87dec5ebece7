import { airToVacuum, vacuumToAir, wavelengthFrom, wavelengthIn } from '@foreveil/shared';
import type { AirNm, Medium, VacuumNm, WavelengthUnit } from '@foreveil/shared';
import { niceTicks, tickDigits, typeset } from './ticks.js';

/** How wavelengths are shown. Stored values stay vacuum nm; only labels and boxes pass through here. */
export interface WavelengthDisplay {
  readonly unit: WavelengthUnit;
  readonly medium: Medium;
  /** a vacuum wavelength, nm, as the shown number */
  readonly show: (nm: number) => number;
  /** a shown number as vacuum nm */
  readonly read: (shown: number) => number;
  /** 'nm', 'Å', 'µm', 'cm⁻¹' */
  readonly unitLabel: string;
  /** 'nm vac', 'Å air', 'cm⁻¹' */
  readonly shortLabel: string;
}

export const UNIT_LABEL: Record<WavelengthUnit, string> = { nm: 'nm', angstrom: 'Å', micron: 'µm', wavenumber: 'cm⁻¹' };

/** Wavenumbers belong to vacuum by definition, so there the medium changes nothing. */
export function wavelengthDisplay(unit: WavelengthUnit, chosen: Medium): WavelengthDisplay {
  const medium = unit === 'wavenumber' ? 'vacuum' : chosen;
  const inAir = medium === 'air';
  return {
    unit,
    medium,
    show: (nm) => wavelengthIn((inAir ? vacuumToAir(nm as VacuumNm) : nm) as VacuumNm, unit),
    read: (shown) => {
      const nm: number = wavelengthFrom(shown, unit);
      return inAir ? airToVacuum(nm as AirNm) : nm;
    },
    unitLabel: UNIT_LABEL[unit],
    shortLabel: unit === 'wavenumber' ? UNIT_LABEL[unit] : `${UNIT_LABEL[unit]} ${inAir ? 'air' : 'vac'}`,
  };
}

/** How much the shown number changes per nm at a wavelength, without sign: turns an error in nm into one in the shown unit. */
export function shownPerNm(nm: number, { unit }: WavelengthDisplay): number {
  if (unit === 'wavenumber') return 1e7 / nm ** 2;
  return wavelengthIn(1 as VacuumNm, unit);
}

export interface AxisTick {
  /** where it stands, vacuum nm */
  readonly nm: number;
  readonly label: string;
}

/** Round numbers of the shown unit, at the vacuum wavelengths where they stand. */
export function axisTicks(fromNm: number, toNm: number, display: WavelengthDisplay, count: number): AxisTick[] {
  const [a, b] = [display.show(fromNm), display.show(toNm)];
  const shown = niceTicks(Math.min(a, b), Math.max(a, b), count);
  const digits = tickDigits(shown);
  return shown.map((value) => ({ nm: display.read(value), label: typeset(value, digits) }));
}
