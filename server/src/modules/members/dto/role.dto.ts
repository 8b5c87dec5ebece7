import { MEMBER_ROLES, type MemberRole } from '@foreveil/shared';
import { ApiProperty } from '@nestjs/swagger';
import { IsIn } from 'class-validator';

export class RoleDto {
  @ApiProperty({ enum: MEMBER_ROLES })
  @IsIn([...MEMBER_ROLES])
  role: MemberRole;
}
