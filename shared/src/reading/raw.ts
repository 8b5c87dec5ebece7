import type { FluxKind, Frame } from '../spectrum/index.js';
import type { Medium } from '../units/index.js';
import type { Axis } from './columns/axis.js';
import type { Reading, ReadWarning, Stated, UncertaintyKind } from './types.js';

/** What a file says of the observation as a whole. */
export interface Facts {
  readonly objectName: Stated<string | null>;
  readonly frame: Stated<Frame>;
  readonly resolvingPower: Stated<number | null>;
  readonly observedAt: Stated<string | null>;
  readonly instrument: string | null;
  readonly telescope: string | null;
  readonly raDeg: number | null;
  readonly decDeg: number | null;
}

/**
 * A spectrum as it stands in the file: columns of equal length in file order, missing values NaN, nothing sorted, merged or
 * converted but the axis, which is in nm of the file's own medium.
 */
export interface RawSpectrum {
  readonly format: Reading['format'];
  readonly place: string;
  readonly otherPlaces: readonly string[];
  readonly columns: readonly string[];
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
  /** how a sample is named in a sentence: 'line 12', 'row 3' */
  readonly locate: (index: number) => { readonly words: string; readonly row: number };
  readonly facts: Facts;
  readonly warnings: ReadWarning[];
}
