import { TOKEN_SCOPES, type NewAccessToken, type TokenScope } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsIn, IsInt, IsString, Length, Max, Min } from 'class-validator';
import { Tidy } from '../../common/http/tidy.js';

export class NewTokenDto implements NewAccessToken {
  @ApiProperty({ minLength: 1, maxLength: 120 })
  @Tidy()
  @IsString()
  @Length(1, 120)
  name: string;

  @ApiProperty({ enum: TOKEN_SCOPES })
  @IsIn([...TOKEN_SCOPES])
  scope: TokenScope;

  @ApiProperty({ minimum: 1, maximum: 366, description: 'days that it works' })
  @IsInt()
  @Min(1)
  @Max(366)
  days: number;
}
