import { Body, Controller, Delete, Get, HttpCode, Post } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Invitation } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { InvitationsService } from './invitations.service.js';
import { NewInvitationDto } from './new-invitation.dto.js';

@ApiTags('members')
@Controller('programmes/:programmeId/invitations')
export class InvitationsController {
  constructor(private readonly invitations: InvitationsService) {}

  @Get()
  @NeedsRole('lead')
  @ApiOperation({ summary: 'Invitations that wait to be accepted' })
  list(@UuidParam('programmeId') programmeId: string): Promise<Invitation[]> {
    return this.invitations.list(programmeId);
  }

  @Post()
  @NeedsRole('lead')
  @ApiOperation({ summary: 'Invite somebody by mail; an earlier invitation of the same address is taken back' })
  invite(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string, @Body() dto: NewInvitationDto): Promise<Invitation> {
    return this.invitations.invite(actor, programmeId, dto);
  }

  @Delete(':invitationId')
  @HttpCode(204)
  @NeedsRole('lead')
  @ApiOperation({ summary: 'Take an invitation back; its link stops working' })
  revoke(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('invitationId') invitationId: string,
  ): Promise<void> {
    return this.invitations.revoke(actor, programmeId, invitationId);
  }
}
