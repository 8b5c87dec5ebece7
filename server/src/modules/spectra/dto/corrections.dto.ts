import type { AxisUnit, FluxKind, Frame, Medium, ReadingCorrections, UncertaintyKind } from '@foreveil/shared';
import { IsIn, IsNumber, IsString, Max, MaxLength, Min, ValidateIf } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';

const UNCERTAINTY_KINDS: readonly UncertaintyKind[] = ['sigma', 'variance', 'inverse_variance'];
const MEDIA: readonly Medium[] = ['vacuum', 'air'];
const FLUX_KINDS: readonly FluxKind[] = ['per_wavelength', 'per_frequency', 'normalised', 'counts', 'unknown'];
const FRAMES: readonly Frame[] = ['topocentric', 'geocentric', 'heliocentric', 'barycentric', 'lsrk', 'lsrd', 'source', 'unknown'];
const AXIS_UNITS: readonly AxisUnit[] = [
  ...(['m', 'nm', 'angstrom', 'micron', 'wavenumber_per_cm', 'wavenumber_per_m'] as const),
  ...(['hz', 'ghz', 'thz', 'ev', 'kev', 'velocity'] as const),
];
const FINITE = { allowNaN: false, allowInfinity: false };
const NullOrSet = () => ValidateIf((_, value) => value !== undefined && value !== null);

export class CorrectionsDto implements ReadingCorrections {
  @Omittable()
  @IsString()
  @MaxLength(200)
  place?: string;

  @Omittable()
  @IsString()
  @MaxLength(200)
  wavelengthColumn?: string;

  @Omittable()
  @IsString()
  @MaxLength(200)
  fluxColumn?: string;

  @NullOrSet()
  @IsString()
  @MaxLength(200)
  uncertaintyColumn?: string | null;

  @Omittable()
  @IsIn(UNCERTAINTY_KINDS)
  uncertaintyKind?: UncertaintyKind;

  @Omittable()
  @IsIn(AXIS_UNITS)
  axisUnit?: AxisUnit;

  @Omittable()
  @IsIn(MEDIA)
  medium?: Medium;

  @Omittable()
  @IsIn(FRAMES)
  frame?: Frame;

  @Omittable()
  @IsIn(FLUX_KINDS)
  fluxKind?: FluxKind;

  @Omittable()
  @IsNumber(FINITE)
  @Min(1)
  @Max(10_000_000)
  resolvingPower?: number;
}

/** Checked corrections as plain data: what a thread can be sent and a row can hold. */
export const plainCorrections = (corrections: CorrectionsDto | undefined): ReadingCorrections =>
  JSON.parse(JSON.stringify(corrections ?? {})) as ReadingCorrections;
