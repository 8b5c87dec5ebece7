import { Body, Controller, Delete, Get, HttpCode, Patch, Post, UseInterceptors } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { MemberDetail } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { RoleDto } from './dto/role.dto.js';
import { MembersService } from './members.service.js';

@ApiTags('members')
@Controller('programmes/:programmeId')
export class MembersController {
  constructor(private readonly members: MembersService) {}

  @Get('members')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Members with their roles; leads see addresses too' })
  list(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string): Promise<MemberDetail[]> {
    return this.members.list(actor, programmeId);
  }

  @Patch('members/:userId')
  @NeedsRole('lead')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'Change the role of a member; counts from their next request on' })
  changeRole(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('userId') userId: string,
    @IfMatch() version: number,
    @Body() { role }: RoleDto,
  ): Promise<MemberDetail> {
    return this.members.changeRole(actor, programmeId, userId, role, version);
  }

  @Delete('members/:userId')
  @HttpCode(204)
  @NeedsRole('lead')
  @ApiOperation({ summary: 'Remove a member' })
  remove(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('userId') userId: string,
    @IfMatch() version: number,
  ): Promise<void> {
    return this.members.remove(actor, programmeId, userId, version);
  }

  @Post('leave')
  @HttpCode(204)
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Leave the programme' })
  leave(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string): Promise<void> {
    return this.members.leave(actor, programmeId);
  }
}
