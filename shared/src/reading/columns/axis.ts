import type { Medium } from '../../units/index.js';
import { isLength, toNm, type SpectralUnit } from '../../units/index.js';
import type { ReadContext } from '../context.js';
import { quoted, refuse } from '../refusal.js';
import type { AxisUnit, Stated } from '../types.js';
import { AXIS_UNIT_NAMES, parseAxisUnit, type ScaledAxisUnit } from './axis-unit.js';
import type { SpectralQuantity } from './words.js';

/** What the file says about its spectral axis. */
export interface AxisStatement {
  readonly name: string;
  readonly quantity: SpectralQuantity;
  /** unit text and where it stands; '' when there is none */
  readonly unit: string;
  readonly where: string;
}

/** A spectral axis in nm, in the medium of the file. */
export interface Axis {
  readonly nm: Float64Array;
  readonly unit: Stated<AxisUnit>;
  /** vacuum for frequencies, energies and wavenumbers, which are so by definition */
  readonly medium: Stated<Medium> | null;
}

const DEFAULTS: Partial<Record<SpectralQuantity, AxisUnit>> = { frequency: 'hz', energy: 'ev', wavenumber: 'wavenumber_per_cm' };

/**
 * Values of a spectral axis, turned into nm in place. The unit is the corrected one, else the stated one, else one that is
 * assumed with a warning.
 */
export function settleAxis(values: Float64Array, statement: AxisStatement, context: ReadContext): Axis {
  const log10 = statement.quantity === 'log10_length' || (parseAxisUnit(statement.unit)?.log10 ?? false);
  if (log10) for (let i = 0; i < values.length; i++) values[i] = 10 ** values[i]!;
  const { scaled, ...known } = settleUnit(values, statement, log10, context);
  if (scaled.unit === 'velocity')
    refuse(
      'no_rest_wavelength',
      `Column ${quoted(statement.name)} holds velocities without a rest wavelength. Choose a column with wavelengths.`,
    );
  const unit = scaled.unit as SpectralUnit;
  for (let i = 0; i < values.length; i++) values[i] = toNm(values[i]! * scaled.scale, unit);
  const medium: Stated<Medium> | null = isLength(unit)
    ? null
    : { value: 'vacuum', how: 'stated', where: `${AXIS_UNIT_NAMES[unit]} is vacuum by definition` };
  return { nm: values, unit: { value: scaled.unit, ...known }, medium };
}

interface Settled {
  readonly scaled: ScaledAxisUnit;
  readonly how: Stated<AxisUnit>['how'];
  readonly where: string;
  readonly said?: Stated<AxisUnit>['said'];
}

function settleUnit(values: Float64Array, statement: AxisStatement, log10: boolean, { corrections, warnings }: ReadContext): Settled {
  if (corrections.axisUnit) {
    const said = parseAxisUnit(statement.unit);
    const scaled = { unit: corrections.axisUnit, scale: 1 };
    return {
      scaled,
      how: 'corrected',
      where: 'correction',
      ...(said && { said: { value: said.unit, how: 'stated', where: statement.where } }),
    };
  }
  if (statement.unit.trim() !== '') {
    const scaled = parseAxisUnit(statement.unit);
    if (scaled) return { scaled, how: 'stated', where: statement.where };
    refuse(
      'unknown_axis_unit',
      `The unit "${quoted(statement.unit)}" of the wavelength column ${quoted(statement.name)} (${statement.where}) is not a unit of wavelength, frequency, energy or wavenumber. Say which unit it is.`,
      { column: statement.name, card: statement.where },
    );
  }
  const usual = DEFAULTS[statement.quantity] ?? (log10 ? 'angstrom' : unitOfRange(values, statement.name));
  const reason = DEFAULTS[statement.quantity]
    ? 'usual for such an axis'
    : log10
      ? 'usual for a logarithmic axis'
      : 'judged by the range of the values';
  warnings.push({
    code: 'axis_unit_assumed',
    sentence: `The file does not give the unit of the wavelength axis (${quoted(statement.name)}); ${AXIS_UNIT_NAMES[usual]} was assumed, ${reason}. Correct it if it is another one.`,
    column: statement.name,
  });
  return { scaled: { unit: usual, scale: 1 }, how: 'assumed', where: reason };
}

/**
 * Unit that the range of unlabelled wavelengths can only mean. Optical spectra in Angstrom start above 900 (the Lyman
 * limit) and usually pass 3200; in nm they lie below 3200; in micrometres below 60. Where two units fit, the person is asked.
 */
export function unitOfRange(values: Float64Array, name: string): AxisUnit {
  let min = Infinity;
  let max = -Infinity;
  for (const v of values) {
    if (!Number.isFinite(v)) continue;
    if (v < min) min = v;
    if (v > max) max = v;
  }
  if (max > 0 && max < 1e-3) return 'm';
  if (max <= 60) return 'micron';
  if (max > 3200) return 'angstrom';
  if (min < 900) return 'nm';
  refuse(
    'unknown_axis_unit',
    `The file does not give the unit of the wavelength axis (${quoted(name)}), and values from ${min} to ${max} may be Angstrom as well as nm. Say which unit it is.`,
    { column: name },
  );
}
