import type { AxisUnit, FluxKind, Frame, Medium, ReadingCorrections, TargetKind, UncertaintyKind, UploadMeta } from '@foreveil/shared';
import { Type } from 'class-transformer';
import { IsIn, IsNumber, IsObject, IsString, IsUUID, Length, Max, MaxLength, Min, ValidateIf, ValidateNested } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';
import { TARGET_KINDS } from '../../targets/dto/target.dto.js';

const UNCERTAINTY_KINDS: readonly UncertaintyKind[] = ['sigma', 'variance', 'inverse_variance'];
const MEDIA: readonly Medium[] = ['vacuum', 'air'];
const FLUX_KINDS: readonly FluxKind[] = ['per_wavelength', 'per_frequency', 'normalised', 'counts', 'unknown'];
const FRAMES: readonly Frame[] = ['topocentric', 'geocentric', 'heliocentric', 'barycentric', 'lsrk', 'lsrd', 'source', 'unknown'];
const AXIS_UNITS: readonly AxisUnit[] = [
  ...(['m', 'nm', 'angstrom', 'micron', 'wavenumber_per_cm', 'wavenumber_per_m'] as const),
  ...(['hz', 'ghz', 'thz', 'ev', 'kev', 'velocity'] as const),
];

class CorrectionsDto implements ReadingCorrections {
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

  @ValidateIf((_, value) => value !== undefined && value !== null)
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
  @IsNumber({ allowNaN: false, allowInfinity: false })
  @Min(1)
  @Max(10_000_000)
  resolvingPower?: number;
}

/** The JSON text in the part `meta` of an upload. */
export class UploadMetaDto implements UploadMeta {
  @Omittable()
  @IsUUID()
  targetId?: string;

  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 120)
  targetName?: string;

  @Omittable()
  @IsIn(TARGET_KINDS)
  targetKind?: TargetKind;

  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 120)
  label?: string;

  @Omittable()
  @IsObject()
  @ValidateNested()
  @Type(() => CorrectionsDto)
  corrections?: CorrectionsDto;
}
