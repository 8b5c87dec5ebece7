import type { FluxCalibration, FluxKind, Frame } from '../spectrum/index.js';
import type { Medium } from '../units/index.js';
import type { Axis } from './columns/axis.js';
import type {
  ChecksumVerdict,
  ColumnFact,
  ObservingTime,
  PlaceFact,
  Pointing,
  Reading,
  ReadWarning,
  Site,
  Stated,
  UncertaintyKind,
  UncorrectedColumns,
} from './types.js';

/** What a file says of the observation as a whole. */
export interface Facts {
  readonly objectName: Stated<string | null>;
  readonly frame: Stated<Frame>;
  readonly resolvingPower: Stated<number | null>;
  readonly fluxCalibration: Stated<FluxCalibration | null>;
  readonly wavelengthRmsNm: Stated<number | null>;
  readonly time: Stated<ObservingTime | null>;
  readonly exposureS: Stated<number | null>;
  /** from start to end of the observation, pauses included; null when not known */
  readonly elapsedS: number | null;
  readonly site: Stated<Site | null>;
  readonly pointing: Stated<Pointing | null>;
  readonly instrument: string | null;
  readonly telescope: string | null;
}

/** What is known of the file around the spectrum. */
export interface FileFacts {
  readonly places: readonly PlaceFact[];
  readonly checksums: readonly ChecksumVerdict[];
}

/**
 * A spectrum as it stands in the file: columns of equal length in file order, missing values NaN, nothing sorted, merged or
 * converted but the axis, which is in nm of the file's own medium.
 */
export interface RawSpectrum extends FileFacts {
  readonly format: Reading['format'];
  readonly place: string;
  readonly columnFacts: readonly ColumnFact[];
  readonly uncorrectedColumns: UncorrectedColumns;
  readonly header: readonly string[];
  readonly axisName: string;
  readonly axis: Axis;
  /** what the file says of the medium; null when it says nothing */
  readonly medium: Stated<Medium> | null;
  readonly flux: Float64Array;
  readonly fluxName: string;
  readonly fluxUnit: Stated<string>;
  readonly fluxKind: Stated<FluxKind>;
  readonly uncertainty: { readonly values: Float64Array; readonly name: string; readonly kind: Stated<UncertaintyKind> } | null;
  /** samples with a value of 1 or more must not be used */
  readonly mask: { readonly values: Float64Array; readonly name: string } | null;
  /** samples where one order or piece of the file ends and the next begins, with what each is called; null: told by the axis */
  readonly orders: readonly { readonly from: number; readonly name: string }[] | null;
  /** how a sample is named in a sentence: 'line 12', 'row 3' */
  readonly locate: (index: number) => { readonly words: string; readonly row: number };
  readonly facts: Facts;
  readonly warnings: ReadWarning[];
}
