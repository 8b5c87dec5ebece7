import {
  VERDICTS,
  type ComparisonRerun,
  type ComparisonSettings,
  type NewComparison,
  type NewRuling,
  type Verdict,
} from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { Type } from 'class-transformer';
import {
  ArrayMaxSize,
  IsArray,
  IsIn,
  IsNumber,
  IsObject,
  IsString,
  IsUUID,
  Max,
  MaxLength,
  Min,
  MinLength,
  ValidateIf,
  ValidateNested,
} from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';

const FINITE = { allowNaN: false, allowInfinity: false };

class ComparisonSettingsDto implements Partial<ComparisonSettings> {
  @ApiProperty({ required: false, minimum: 0.05, maximum: 50, description: 'clouds closer than this are tried as one, km/s' })
  @Omittable()
  @IsNumber(FINITE)
  @Min(0.05)
  @Max(50)
  matchKmPerS?: number;

  @ApiProperty({ required: false, minimum: -1000, maximum: 1000, description: 'added to the velocities of A, km/s' })
  @Omittable()
  @IsNumber(FINITE)
  @Min(-1000)
  @Max(1000)
  offsetAKmPerS?: number;

  @ApiProperty({ required: false, minimum: -1000, maximum: 1000, description: 'added to the velocities of B, km/s' })
  @Omittable()
  @IsNumber(FINITE)
  @Min(-1000)
  @Max(1000)
  offsetBKmPerS?: number;

  @ApiProperty({ required: false, type: [Number], description: 'clouds to be measured besides those found, km/s' })
  @Omittable()
  @IsArray()
  @ArrayMaxSize(8)
  @IsNumber(FINITE, { each: true })
  @Min(-3000, { each: true })
  @Max(3000, { each: true })
  extraCloudsKmPerS?: number[];

  @ApiProperty({ required: false, minimum: 10, maximum: 500, description: 'profiles are kept this far about the clouds, km/s' })
  @Omittable()
  @IsNumber(FINITE)
  @Min(10)
  @Max(500)
  profileRangeKmPerS?: number;
}

export class ComparisonRerunDto implements ComparisonRerun {
  @ApiProperty({ required: false, type: ComparisonSettingsDto })
  @Omittable()
  @IsObject()
  @ValidateNested()
  @Type(() => ComparisonSettingsDto)
  settings?: ComparisonSettingsDto;

  @ApiProperty({ required: false, minLength: 1, maxLength: 200 })
  @Tidy()
  @Omittable()
  @IsString()
  @MinLength(1)
  @MaxLength(200)
  name?: string;
}

export class NewComparisonDto extends ComparisonRerunDto implements NewComparison {
  @ApiProperty({ format: 'uuid' })
  @IsUUID()
  spectrumA!: string;

  @ApiProperty({ format: 'uuid' })
  @IsUUID()
  spectrumB!: string;
}

export class RulingDto implements NewRuling {
  @ApiProperty({ enum: VERDICTS, nullable: true, description: 'null takes the ruling back' })
  @ValidateIf((_, value) => value !== null)
  @IsIn(VERDICTS)
  verdict!: Verdict | null;

  @ApiProperty({ minLength: 1, maxLength: 2000, description: 'why' })
  @Tidy()
  @IsString()
  @MinLength(1)
  @MaxLength(2000)
  remark!: string;
}
