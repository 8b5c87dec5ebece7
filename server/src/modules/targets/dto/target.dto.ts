import type { NewTarget, TargetKind } from '@foreveil/shared';
import { ApiProperty, PartialType } from '@nestjs/swagger';
import { IsIn, IsNumber, IsOptional, IsString, Length, Max, MaxLength, Min } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';

export const TARGET_KINDS: readonly TargetKind[] = ['star', 'nebula', 'sightline', 'other'];
const FINITE = { allowNaN: false, allowInfinity: false };

export class NewTargetDto implements NewTarget {
  @ApiProperty({ minLength: 1, maxLength: 120 })
  @Tidy()
  @IsString()
  @Length(1, 120)
  name: string;

  @ApiProperty({ enum: TARGET_KINDS })
  @IsIn(TARGET_KINDS)
  kind: TargetKind;

  @ApiProperty({ required: false, nullable: true, type: Number, description: 'right ascension, ICRS degrees', minimum: 0, maximum: 360 })
  @IsOptional()
  @IsNumber(FINITE)
  @Min(0)
  @Max(359.999999999)
  raDeg?: number | null;

  @ApiProperty({ required: false, nullable: true, type: Number, description: 'declination, ICRS degrees', minimum: -90, maximum: 90 })
  @IsOptional()
  @IsNumber(FINITE)
  @Min(-90)
  @Max(90)
  decDeg?: number | null;

  @ApiProperty({ required: false, maxLength: 4000 })
  @Omittable()
  @Tidy()
  @IsString()
  @MaxLength(4000)
  notes?: string;
}

/** Only what is named changes. */
export class ChangeTargetDto extends PartialType(NewTargetDto, { skipNullProperties: false }) {}
