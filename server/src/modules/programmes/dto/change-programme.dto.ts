import { ApiProperty } from '@nestjs/swagger';
import { IsString, Length, MaxLength } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';

export class ChangeProgrammeDto {
  @ApiProperty({ required: false, minLength: 1, maxLength: 120 })
  @Omittable()
  @Tidy()
  @IsString()
  @Length(1, 120)
  name?: string;

  @ApiProperty({ required: false, maxLength: 4000 })
  @Omittable()
  @Tidy()
  @IsString()
  @MaxLength(4000)
  description?: string;
}
