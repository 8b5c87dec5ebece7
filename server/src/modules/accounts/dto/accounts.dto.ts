import { CHOOSABLE_MAIL_KINDS, MAIL_CHOICES, type ChoosableMail, type MailChoice } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsEmail, IsIn, IsString, Length, Matches, MaxLength } from 'class-validator';
import { Transform } from 'class-transformer';
import { Tidy } from '../../../common/http/tidy.js';

/** An address as mail servers everywhere take it, in small letters; nothing that could begin a header or name a second recipient. */
export function MailAddress(): PropertyDecorator {
  const decorators = [
    ApiProperty({ example: 'name@example.org', maxLength: 254 }),
    Transform(({ value }) => (typeof value === 'string' ? value.trim().toLowerCase() : value)),
    MaxLength(254),
    IsEmail({ allow_utf8_local_part: false, allow_ip_domain: false }, { message: 'must be one e-mail address' }),
    Matches(/^[^"\s(),:;<>[\\\]]+$/, { message: 'must be one e-mail address' }),
  ];
  return (target, key) => decorators.forEach((decorate) => decorate(target, key));
}

/** A password as typed; what it must be is checked where its owner is known. */
export function Password(): PropertyDecorator {
  const decorators = [ApiProperty({ maxLength: 1024, format: 'password' }), IsString(), Length(1, 1024)];
  return (target, key) => decorators.forEach((decorate) => decorate(target, key));
}

export function Secret(): PropertyDecorator {
  const decorators = [ApiProperty({ description: 'what stands behind # in the link' }), IsString(), Length(1, 200)];
  return (target, key) => decorators.forEach((decorate) => decorate(target, key));
}

export class EmailDto {
  @MailAddress()
  email: string;
}

export class PersonNameDto {
  @ApiProperty({ minLength: 1, maxLength: 120 })
  @Tidy()
  @IsString()
  @Length(1, 120)
  @Matches(/^[^\r\n\t]*$/, { message: 'name must be one line' })
  name: string;
}

export class SecretDto {
  @Secret()
  secret: string;
}

export class PasswordDto {
  @Password()
  password: string;
}

export class NewPasswordDto extends SecretDto {
  @Password()
  password: string;
}

export class ChangePasswordDto {
  @Password()
  current: string;

  @Password()
  password: string;
}

export class ChangeEmailDto extends EmailDto {
  @Password()
  password: string;
}

export class SignUpDto extends PersonNameDto {
  @Secret()
  secret: string;

  @Password()
  password: string;
}

export class ClaimDto extends SignUpDto {
  @MailAddress()
  email: string;
}

export class CodeDto {
  @ApiProperty({ example: '123456' })
  @IsString()
  @Length(6, 40)
  code: string;
}

export class MailChoiceDto {
  @ApiProperty({ enum: CHOOSABLE_MAIL_KINDS })
  @IsIn(CHOOSABLE_MAIL_KINDS)
  kind: ChoosableMail;

  @ApiProperty({ enum: MAIL_CHOICES })
  @IsIn([...MAIL_CHOICES])
  choice: MailChoice;
}
