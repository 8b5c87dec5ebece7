import type { AnalysisSettings, NewAnalysis } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { Type } from 'class-transformer';
import { IsBoolean, IsNumber, IsObject, Max, Min, ValidateIf, ValidateNested } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';

const FINITE = { allowNaN: false, allowInfinity: false };

class SettingsDto implements Partial<AnalysisSettings> {
  @ApiProperty({ required: false, minimum: 0.001, maximum: 1000, description: 'expected number of false features in the whole spectrum' })
  @Omittable()
  @IsNumber(FINITE)
  @Min(0.001)
  @Max(1000)
  falseFeatures?: number;

  @ApiProperty({
    required: false,
    nullable: true,
    type: Number,
    minimum: 0,
    maximum: 50,
    description: 'visual extinction, mag; null: none',
  })
  @ValidateIf((_, value) => value !== undefined && value !== null)
  @IsNumber(FINITE)
  @Min(0)
  @Max(50)
  extinctionAv?: number | null;

  @ApiProperty({ required: false, description: 'use the local continuum even where a Planck fit is possible' })
  @Omittable()
  @IsBoolean()
  localContinuum?: boolean;

  @ApiProperty({ required: false, minimum: 1, maximum: 3000, description: 'systems are looked for within plus or minus this, km/s' })
  @Omittable()
  @IsNumber(FINITE)
  @Min(1)
  @Max(3000)
  velocityRangeKmPerS?: number;
}

export class NewAnalysisDto implements NewAnalysis {
  @ApiProperty({ required: false, type: SettingsDto })
  @Omittable()
  @IsObject()
  @ValidateNested()
  @Type(() => SettingsDto)
  settings?: SettingsDto;
}
