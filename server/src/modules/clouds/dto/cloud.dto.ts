import { CLOUD_FRAMES, CLOUD_REACH_KM_PER_S, type CloudChange, type CloudFrame, type NewCloud } from '@foreveil/shared';
import { ApiProperty, OmitType, PartialType } from '@nestjs/swagger';
import { ArrayMaxSize, ArrayUnique, IsArray, IsIn, IsNumber, IsString, IsUUID, Length, Max, MaxLength, Min } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';

const FINITE = { allowNaN: false, allowInfinity: false };
const RANGE = { minimum: -CLOUD_REACH_KM_PER_S, maximum: CLOUD_REACH_KM_PER_S };

export class NewCloudDto implements NewCloud {
  @ApiProperty({ minLength: 1, maxLength: 120 })
  @Tidy()
  @IsString()
  @Length(1, 120)
  name: string;

  @ApiProperty({ ...RANGE, description: 'lowest velocity of the cloud, km/s' })
  @IsNumber(FINITE)
  @Min(-CLOUD_REACH_KM_PER_S)
  @Max(CLOUD_REACH_KM_PER_S)
  fromKmPerS: number;

  @ApiProperty({ ...RANGE, description: 'highest velocity of the cloud, km/s' })
  @IsNumber(FINITE)
  @Min(-CLOUD_REACH_KM_PER_S)
  @Max(CLOUD_REACH_KM_PER_S)
  toKmPerS: number;

  @ApiProperty({ enum: CLOUD_FRAMES, description: 'frame of the velocities' })
  @IsIn(CLOUD_FRAMES)
  frame: CloudFrame;

  @ApiProperty({ required: false, maxLength: 10_000 })
  @Tidy()
  @Omittable()
  @IsString()
  @MaxLength(10_000)
  notes?: string;

  @ApiProperty({ required: false, type: [String], format: 'uuid', description: 'spectra that look through it' })
  @Omittable()
  @IsArray()
  @ArrayMaxSize(100)
  @ArrayUnique()
  @IsUUID(undefined, { each: true })
  spectrumIds?: string[];
}

/** Only what is named changes. */
export class ChangeCloudDto
  extends PartialType(OmitType(NewCloudDto, ['spectrumIds'] as const), { skipNullProperties: false })
  implements CloudChange {}
