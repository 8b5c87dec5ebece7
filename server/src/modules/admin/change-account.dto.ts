import { ApiProperty } from '@nestjs/swagger';
import { IsBoolean } from 'class-validator';
import { Omittable } from '../../common/http/omittable.js';

export class ChangeAccountDto {
  @ApiProperty({ required: false, description: 'whether its person can sign in' })
  @Omittable()
  @IsBoolean()
  active?: boolean;

  @ApiProperty({ required: false, description: 'whether its person manages accounts' })
  @Omittable()
  @IsBoolean()
  administrator?: boolean;
}
