import type { LineQuery, Medium, NewLineList } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { Type } from 'class-transformer';
import { ArrayMaxSize, IsArray, IsBoolean, IsIn, IsInt, IsNumber, IsString, IsUUID, Length, Max, MaxLength, Min } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';

const FINITE = { allowNaN: false, allowInfinity: false };
const MEDIA: readonly Medium[] = ['vacuum', 'air'];

export class NewLineListDto implements NewLineList {
  @Tidy()
  @IsString()
  @Length(1, 120)
  name: string;

  @Tidy()
  @IsString()
  @Length(1, 40)
  version: string;

  @Omittable()
  @Tidy()
  @IsString()
  @MaxLength(1000)
  citation?: string;

  @Omittable()
  @IsIn(MEDIA)
  medium?: Medium;

  @Omittable()
  @IsUUID()
  baseId?: string;

  @Omittable()
  @IsArray()
  @ArrayMaxSize(10_000)
  @IsString({ each: true })
  @MaxLength(200, { each: true })
  remove?: string[];

  @Omittable()
  @IsUUID()
  previousId?: string;

  @Omittable()
  @IsBoolean()
  dryRun?: boolean;
}

export class LineQueryDto implements LineQuery {
  @ApiProperty({ required: false, description: 'vacuum nm' })
  @Omittable()
  @Type(() => Number)
  @IsNumber(FINITE)
  @Min(0)
  fromNm?: number;

  @ApiProperty({ required: false, description: 'vacuum nm' })
  @Omittable()
  @Type(() => Number)
  @IsNumber(FINITE)
  @Min(0)
  toNm?: number;

  @ApiProperty({ required: false, description: 'as in "Na I"; the beginning of a name is enough' })
  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 20)
  species?: string;

  @ApiProperty({ required: false, description: 'highest lower energy, cm^-1' })
  @Omittable()
  @Type(() => Number)
  @IsNumber(FINITE)
  @Min(0)
  lowerEnergyTo?: number;

  @ApiProperty({ required: false, description: '`next` of the page before' })
  @Omittable()
  @IsString()
  @MaxLength(20)
  after?: string;

  @ApiProperty({ required: false, minimum: 1, maximum: 500, default: 100 })
  @Omittable()
  @Type(() => Number)
  @IsInt()
  @Min(1)
  @Max(500)
  limit?: number;
}
