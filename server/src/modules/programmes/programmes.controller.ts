import { Body, Controller, Delete, Get, HttpCode, Patch, Post, UseInterceptors } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Programme, ProgrammeSummary, StagedProgramme } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole, NeedsSignIn } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { ChangeProgrammeDto } from './dto/change-programme.dto.js';
import { NewProgrammeDto } from './dto/new-programme.dto.js';
import { ProgrammesService } from './programmes.service.js';

@ApiTags('programmes')
@Controller()
export class ProgrammesController {
  constructor(private readonly programmes: ProgrammesService) {}

  @Get('programmes')
  @NeedsSignIn()
  @ApiOperation({ summary: 'Programmes of the signed-in person' })
  list(@CurrentActor() actor: Actor): Promise<ProgrammeSummary[]> {
    return this.programmes.list(actor);
  }

  @Post('programmes')
  @NeedsSignIn()
  @ApiOperation({ summary: 'Start a programme and lead it' })
  create(@CurrentActor() actor: Actor, @Body() dto: NewProgrammeDto): Promise<Programme> {
    return this.programmes.create(actor, dto);
  }

  @Get('programmes/:programmeId')
  @NeedsRole('reader')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'A programme with its members' })
  get(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string): Promise<Programme> {
    return this.programmes.get(actor, programmeId);
  }

  @Patch('programmes/:programmeId')
  @NeedsRole('lead')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'Change name and description' })
  change(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @IfMatch() version: number,
    @Body() dto: ChangeProgrammeDto,
  ): Promise<Programme> {
    return this.programmes.change(actor, programmeId, dto, version);
  }

  @Delete('programmes/:programmeId')
  @HttpCode(204)
  @NeedsRole('lead')
  @ApiOperation({ summary: 'Delete; leads can have it back for 30 days' })
  stage(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string, @IfMatch() version: number): Promise<void> {
    return this.programmes.stage(actor, programmeId, version);
  }

  @Post('programmes/:programmeId/recover')
  @HttpCode(200)
  @NeedsRole('lead', { staged: true })
  @ApiOperation({ summary: 'Have a deleted programme back' })
  recover(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string): Promise<Programme> {
    return this.programmes.recover(actor, programmeId);
  }

  @Get('staged-programmes')
  @NeedsSignIn()
  @ApiOperation({ summary: 'Deleted programmes that one may have back' })
  staged(@CurrentActor() actor: Actor): Promise<StagedProgramme[]> {
    return this.programmes.staged(actor);
  }
}
