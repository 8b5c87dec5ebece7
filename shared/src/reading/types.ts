import type { Medium } from '../units/index.js';
import type { FluxCalibration, FluxKind, Frame, Segment, Spectrum } from '../spectrum/index.js';

/** How a fact about the file is known: the file says so, we took it for granted, or a person said so. */
export type How = 'stated' | 'assumed' | 'corrected' | 'not_stated';

/** A fact with its origin; `where` names the card, column or comment line ('TUNIT1', 'column name', '# frame'). */
export interface Stated<T> {
  readonly value: T;
  readonly how: How;
  readonly where: string;
  /** beside a correction what the file itself gave, 'not_stated' included; absent where its own word could not be used */
  readonly said?: { readonly value: T; readonly how: How; readonly where: string };
}

/** Time scales of FITS Standard 4.0 table 30 that are told apart here; 'unknown' counts as UTC in computations, and a warning says so. */
export type TimeScale = 'utc' | 'tai' | 'tt' | 'tdb' | 'ut1' | 'gps' | 'unknown';
/** What of the exposure a time marks. */
export type TimeMark = 'start' | 'mid' | 'end' | 'unknown';

export interface ObservingTime {
  /** ISO 8601 without zone, in `scale`: '2026-03-04T05:06:07.25'; a date alone when the file gives no more */
  readonly iso: string;
  readonly scale: TimeScale;
  readonly marks: TimeMark;
}

/** Where the telescope stood: geodetic (WGS 84). */
export interface Site {
  readonly latitudeDeg: number;
  /** positive to the east */
  readonly longitudeDegEast: number;
  readonly heightM: number;
}

/** Where the telescope looked, ICRS degrees. */
export interface Pointing {
  readonly raDeg: number;
  readonly decDeg: number;
}

/** What DATASUM and CHECKSUM of one unit of a FITS file say of its content. */
export interface ChecksumVerdict {
  /** as in `PlaceFact.place` */
  readonly place: string;
  readonly verdict: 'verified' | 'mismatch' | 'absent';
}

/** A part of a file that a person may choose. */
export interface PlaceFact {
  /** give this back as `ReadingCorrections.place` */
  readonly place: string;
  /** EXTNAME, or '' */
  readonly name: string;
  readonly kind: 'image' | 'binary_table' | 'ascii_table' | 'text' | 'other';
  /** samples, or rows of a table; null when not known */
  readonly rows: number | null;
  readonly isSpectrum: boolean;
  /** why it is none, as a sentence; '' when it is one */
  readonly why: string;
}

export type ColumnRole = 'wavelength' | 'flux' | 'uncertainty' | 'mask';

/** A column as the file describes it, and the role it plays in this reading. */
export interface ColumnFact {
  readonly name: string;
  readonly unit: string;
  readonly ucd: string;
  readonly utype: string;
  /** only numeric columns can be given a role */
  readonly numeric: boolean;
  /** null: not used */
  readonly role: ColumnRole | null;
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
  readonly fluxCalibration: Stated<FluxCalibration | null>;
  /** 1 sigma of the wavelength solution, nm (LAMRMS of archive products, which count wavelengths in nm) */
  readonly wavelengthRmsNm: Stated<number | null>;
  /** ISO 8601 without zone, as the file's own time scale; the text of `time` */
  readonly observedAt: Stated<string | null>;
  readonly time: Stated<ObservingTime | null>;
  readonly exposureS: Stated<number | null>;
  /** Modified Julian Date, UTC, of the middle of the exposure; null when it cannot be had from `time` and `exposureS` */
  readonly midMjdUtc: Stated<number | null>;
  readonly site: Stated<Site | null>;
  readonly pointing: Stated<Pointing | null>;
  /**
   * velocity, km/s, at which lines of the Earth's air stand on the wavelengths of the file: 0 in a topocentric file, the correction
   * itself in a corrected one. Null when frame, time, site or pointing is not known, or the frame is that of the source.
   */
  readonly observerVelocityKmPerS: Stated<number | null>;
  readonly instrument: string | null;
  readonly telescope: string | null;
  /** right ascension and declination, ICRS degrees; the numbers of `pointing` */
  readonly raDeg: number | null;
  readonly decDeg: number | null;
  /** range in the file's own medium, nm, in file order */
  readonly firstNm: number;
  readonly lastNm: number;
  /** columns a person may choose from when correcting */
  readonly columns: readonly string[];
  /** the same with what is known of each, numeric or not */
  readonly columnFacts: readonly ColumnFact[];
  /** beside a corrected column the one that the reader would have taken; empty when none was corrected */
  readonly uncorrectedColumns: UncorrectedColumns;
  /** other parts of the file that hold a spectrum too */
  readonly otherPlaces: readonly string[];
  /** every part of the file, this one included */
  readonly places: readonly PlaceFact[];
  readonly checksums: readonly ChecksumVerdict[];
  /** orders or pieces that the spectrum was joined from, ascending; one where it is of one piece */
  readonly segments: readonly Segment[];
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
  /** null: no mask is used */
  readonly maskColumn?: string | null;
  readonly axisUnit?: AxisUnit;
  /** vacuum nm that an axis of velocities refers to */
  readonly restWavelengthNm?: number;
  readonly medium?: Medium;
  readonly frame?: Frame;
  readonly fluxUnit?: string;
  readonly fluxKind?: FluxKind;
  readonly resolvingPower?: number;
  readonly objectName?: string;
  readonly time?: ObservingTime;
  readonly exposureS?: number;
  readonly site?: Site;
  readonly pointing?: Pointing;
  /** how the cells of a text table are told apart */
  readonly delimiter?: ',' | ';' | '\t' | '|' | ' ';
  readonly decimalComma?: boolean;
}

/** What the reader would have taken by itself where a person named a column; null when it knew none. */
export type UncorrectedColumns = {
  readonly [K in 'wavelengthColumn' | 'fluxColumn' | 'uncertaintyColumn' | 'maskColumn']?: string | null;
};

/** Why a file cannot be read. `sentence` says what is wrong, where, and what to do. */
export interface ReadProblem {
  readonly code: string;
  readonly sentence: string;
  readonly row?: number;
  readonly column?: string;
  readonly card?: string;
  /** corrections that answer it, the likeliest first; absent when no correction can help */
  readonly answers?: readonly (keyof ReadingCorrections)[];
  /** what there is to choose from, when the file was understood so far */
  readonly columnFacts?: readonly ColumnFact[];
  readonly places?: readonly PlaceFact[];
}

export type ReadResult =
  { readonly ok: true; readonly spectrum: Spectrum; readonly reading: Reading } | { readonly ok: false; readonly problem: ReadProblem };
