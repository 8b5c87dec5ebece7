import { REVIEW_ACTIONS, type Decision, type ReviewAction } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsIn, IsString, Length, MaxLength, ValidateIf } from 'class-validator';
import { Omittable } from '../../../common/http/omittable.js';
import { Tidy } from '../../../common/http/tidy.js';

const NotNull = () => ValidateIf((_, value) => value !== null);

export class DecisionDto implements Decision {
  @ApiProperty({ enum: REVIEW_ACTIONS })
  @IsIn(REVIEW_ACTIONS)
  action: ReviewAction;

  @ApiProperty({ type: String, nullable: true, description: 'null: unidentified' })
  @NotNull()
  @IsString()
  @Length(1, 200)
  lineId: string | null;

  @ApiProperty({ type: String, nullable: true })
  @NotNull()
  @IsString()
  @Length(1, 200)
  systemId: string | null;

  @ApiProperty({ required: false, maxLength: 2000 })
  @Omittable()
  @Tidy()
  @IsString()
  @MaxLength(2000)
  remark?: string;
}
