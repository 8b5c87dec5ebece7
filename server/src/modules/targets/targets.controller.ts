import { Body, Controller, Get, Patch, Post, UseInterceptors } from '@nestjs/common';
import { ApiHeader, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Target, TargetSummary } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { ChangeTargetDto, NewTargetDto } from './dto/target.dto.js';
import { TargetsService } from './targets.service.js';

@ApiTags('targets')
@Controller('programmes/:programmeId/targets')
export class TargetsController {
  constructor(private readonly targets: TargetsService) {}

  @Get()
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Targets of a programme with their spectra' })
  list(@UuidParam('programmeId') programmeId: string): Promise<TargetSummary[]> {
    return this.targets.list({ programmeId });
  }

  @Post()
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'Add a target' })
  create(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string, @Body() dto: NewTargetDto): Promise<Target> {
    return this.targets.create(actor, { programmeId }, dto);
  }

  @Get(':targetId')
  @NeedsRole('reader')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'A target with its spectra and identifications' })
  get(@UuidParam('programmeId') programmeId: string, @UuidParam('targetId') id: string): Promise<Target> {
    return this.targets.get({ programmeId }, id);
  }

  @Patch(':targetId')
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiHeader({ name: 'If-Match', required: true, description: 'the version that was seen, as in "3"' })
  @ApiOperation({ summary: 'Change a target' })
  change(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('targetId') id: string,
    @IfMatch() version: number,
    @Body() dto: ChangeTargetDto,
  ): Promise<Target> {
    return this.targets.change(actor, { programmeId }, id, version, dto);
  }
}
