import type { Medium } from '../units/index.js';
import type { FluxKind, Frame, Spectrum } from '../spectrum/index.js';

/** How a fact about the file is known: the file says so, we took it for granted, or a person said so. */
export type How = 'stated' | 'assumed' | 'corrected' | 'not_stated';

/** A fact with its origin; `where` names the card, column or comment line ('TUNIT1', 'column name', '# frame'). */
export interface Stated<T> {
  readonly value: T;
  readonly how: How;
  readonly where: string;
}

/** Spectral axis units the reader converts from. 'velocity' axes carry their rest wavelength in the header. */
export type AxisUnit =
  'm' | 'nm' | 'angstrom' | 'micron' | 'wavenumber_per_cm' | 'wavenumber_per_m' | 'hz' | 'ghz' | 'thz' | 'ev' | 'kev' | 'velocity';

export type UncertaintyKind = 'sigma' | 'variance' | 'inverse_variance';

/** A located remark; the sentence is complete for a person. */
export interface ReadWarning {
  readonly code: string;
  readonly sentence: string;
  readonly row?: number;
  readonly column?: string;
}

/** What was read and how that is known: shown before anything is computed, stored beside the original bytes. */
export interface Reading {
  readonly format: 'fits_table' | 'fits_ascii_table' | 'fits_image' | 'text';
  /** where in the file: 'HDU 1 SPECTRUM', 'line 5 onwards' */
  readonly place: string;
  /** samples in the file, missing ones included; the spectrum has fewer when some were merged or left out, which a warning says */
  readonly points: number;
  readonly objectName: Stated<string | null>;
  readonly wavelengthColumn: string;
  readonly axisUnit: Stated<AxisUnit>;
  readonly medium: Stated<Medium>;
  readonly frame: Stated<Frame>;
  readonly fluxColumn: string;
  readonly fluxUnit: Stated<string>;
  /** unit of the numbers in the spectrum where they were converted: flux per frequency becomes flux per wavelength */
  readonly convertedFluxUnit?: string;
  readonly fluxKind: Stated<FluxKind>;
  readonly uncertaintyColumn: string | null;
  readonly uncertaintyKind: Stated<UncertaintyKind | null>;
  readonly maskColumn: string | null;
  readonly resolvingPower: Stated<number | null>;
  /** ISO 8601 without zone, as the file's own time scale */
  readonly observedAt: Stated<string | null>;
  readonly instrument: string | null;
  readonly telescope: string | null;
  /** right ascension and declination, ICRS degrees */
  readonly raDeg: number | null;
  readonly decDeg: number | null;
  /** range in the file's own medium, nm, in file order */
  readonly firstNm: number;
  readonly lastNm: number;
  /** columns a person may choose from when correcting */
  readonly columns: readonly string[];
  /** other parts of the file that hold a spectrum too */
  readonly otherPlaces: readonly string[];
  /** every header card or comment line, verbatim */
  readonly header: readonly string[];
  readonly warnings: readonly ReadWarning[];
}

/** What a person corrected; kept beside what the file said. */
export interface ReadingCorrections {
  readonly place?: string;
  readonly wavelengthColumn?: string;
  readonly fluxColumn?: string;
  readonly uncertaintyColumn?: string | null;
  readonly uncertaintyKind?: UncertaintyKind;
  readonly axisUnit?: AxisUnit;
  readonly medium?: Medium;
  readonly frame?: Frame;
  readonly fluxKind?: FluxKind;
  readonly resolvingPower?: number;
}

/** Why a file cannot be read. `sentence` says what is wrong, where, and what to do. */
export interface ReadProblem {
  readonly code: string;
  readonly sentence: string;
  readonly row?: number;
  readonly column?: string;
  readonly card?: string;
}

export type ReadResult =
  { readonly ok: true; readonly spectrum: Spectrum; readonly reading: Reading } | { readonly ok: false; readonly problem: ReadProblem };
