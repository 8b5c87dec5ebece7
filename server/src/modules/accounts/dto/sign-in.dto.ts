import type { SignIn } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsString, Length } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';

export class SignInDto implements SignIn {
  @ApiProperty({ example: 'name@example.org', maxLength: 254 })
  @IsString()
  @Length(3, 254)
  email: string;

  @ApiProperty({ maxLength: 1024, format: 'password' })
  @IsString()
  @Length(1, 1024)
  password: string;

  @ApiProperty({ required: false, maxLength: 40, description: 'of the authenticator app, or a recovery code' })
  @Omittable()
  @IsString()
  @Length(6, 40)
  code?: string;
}
