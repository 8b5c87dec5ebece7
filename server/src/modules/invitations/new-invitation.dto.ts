import { MEMBER_ROLES, type MemberRole, type NewInvitation } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsIn } from 'class-validator';
import { EmailDto } from '../accounts/dto/accounts.dto.js';

export class NewInvitationDto extends EmailDto implements NewInvitation {
  @ApiProperty({ enum: MEMBER_ROLES })
  @IsIn([...MEMBER_ROLES])
  role: MemberRole;
}
