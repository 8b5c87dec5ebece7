import type { ChangeReading, ChangeSpectrum } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { Transform, Type } from 'class-transformer';
import { ArrayMaxSize, ArrayMinSize, IsArray, IsObject, IsString, IsUUID, Length, Matches, ValidateNested } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';
import { CorrectionsDto } from './corrections.dto.js';

export class ChangeSpectrumDto implements ChangeSpectrum {
  @ApiProperty({ required: false, minLength: 1, maxLength: 120 })
  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 120)
  label?: string;

  @ApiProperty({ required: false, format: 'uuid' })
  @Omittable()
  @IsUUID()
  targetId?: string;
}

export class ChangeReadingDto implements ChangeReading {
  @ApiProperty({ type: Object, description: 'all corrections that hold from now on; {} reads the file as it stands' })
  @IsObject()
  @ValidateNested()
  @Type(() => CorrectionsDto)
  corrections: CorrectionsDto;

  @ApiProperty({ required: false, minLength: 1, maxLength: 120 })
  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 120)
  recipe?: string;
}

const MOST_HASHES = 50;

export class KnownFilesDto {
  @ApiProperty({ type: String, description: 'SHA-256 in hexadecimal; several with commas between them' })
  @Transform(({ value }) => (typeof value === 'string' ? value.split(',') : value))
  @IsArray()
  @ArrayMinSize(1)
  @ArrayMaxSize(MOST_HASHES)
  @IsString({ each: true })
  @Matches(/^[0-9a-f]{64}$/, { each: true, message: 'sha256 must be 64 hexadecimal digits' })
  sha256: string[];
}
