import {
  airToVacuum,
  hasMedium,
  vacuumToAir,
  wavelengthFrom,
  wavelengthIn,
  type AirNm,
  type Medium,
  type VacuumNm,
  type WavelengthUnit,
} from '@foreveil/shared';
import { useLocalStorage } from '@mantine/hooks';
import { useMemo } from 'react';

/** How wavelengths are shown. Stored values stay vacuum nm; only labels and boxes pass through here. */
export interface WavelengthDisplay {
  readonly unit: WavelengthUnit;
  readonly medium: Medium;
  /** a vacuum wavelength, nm, as the shown number */
  readonly show: (nm: number) => number;
  /** a shown number as vacuum nm */
  readonly read: (shown: number) => number;
  /** 'nm', 'Å', 'µm', 'cm⁻¹', 'THz', 'eV' */
  readonly unitLabel: string;
  /** 'nm vac', 'Å air', 'cm⁻¹' */
  readonly shortLabel: string;
}

export const UNIT_LABEL: Record<WavelengthUnit, string> = {
  nm: 'nm',
  angstrom: 'Å',
  micron: 'µm',
  wavenumber: 'cm⁻¹',
  terahertz: 'THz',
  electronvolt: 'eV',
};

/** Decimals that show about a tenth of a milliangstrom. */
const DECIMALS: Record<WavelengthUnit, number> = { nm: 4, angstrom: 3, micron: 7, wavenumber: 3, terahertz: 4, electronvolt: 7 };

/** Wavenumbers, frequencies and energies belong to vacuum by definition, so there the medium changes nothing. */
export function wavelengthDisplay(unit: WavelengthUnit, chosen: Medium): WavelengthDisplay {
  const medium = hasMedium(unit) ? chosen : 'vacuum';
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
    shortLabel: hasMedium(unit) ? `${UNIT_LABEL[unit]} ${inAir ? 'air' : 'vac'}` : UNIT_LABEL[unit],
  };
}

export const wavelengthDecimals = (unit: WavelengthUnit): number => DECIMALS[unit];

export interface WavelengthChoice extends WavelengthDisplay {
  readonly setUnit: (unit: WavelengthUnit) => void;
  readonly setMedium: (medium: Medium) => void;
}

const KEY = 'foreveil-wavelength';
interface Stored {
  readonly unit: WavelengthUnit;
  readonly medium: Medium;
}
const USUAL: Stored = { unit: 'nm', medium: 'vacuum' };

/** What a browser kept, or the usual when it is not ours. */
function parseStored(text: string | undefined): Stored {
  try {
    const { unit, medium } = JSON.parse(text ?? '') as Partial<Stored>;
    if (unit && Object.hasOwn(UNIT_LABEL, unit) && (medium === 'air' || medium === 'vacuum')) return { unit, medium };
  } catch {
    // an older version's or a stranger's text
  }
  return USUAL;
}

/** The person's choice of unit and medium, the same on every page and in every tab of this browser. */
export function useWavelengthDisplay(): WavelengthChoice {
  const [{ unit, medium }, store] = useLocalStorage<Stored>({
    key: KEY,
    defaultValue: USUAL,
    getInitialValueInEffect: false,
    deserialize: parseStored,
  });
  return useMemo(
    () => ({
      ...wavelengthDisplay(unit, medium),
      setUnit: (next: WavelengthUnit) => store((old) => ({ ...old, unit: next })),
      setMedium: (next: Medium) => store((old) => ({ ...old, medium: next })),
    }),
    [unit, medium, store],
  );
}
