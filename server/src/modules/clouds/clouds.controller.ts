import { Body, Controller, Delete, Get, HttpCode, Patch, Post, Put, UseInterceptors } from '@nestjs/common';
import { ApiHeader, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Cloud, CloudSummary } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { CloudsService } from './clouds.service.js';
import { ChangeCloudDto, NewCloudDto } from './dto/cloud.dto.js';

const SEEN = { name: 'If-Match', required: true, description: 'the version that was seen, as in "3"' };

@ApiTags('clouds')
@Controller('programmes/:programmeId/clouds')
export class CloudsController {
  constructor(private readonly clouds: CloudsService) {}

  @Get()
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Clouds of a programme, by name' })
  list(@UuidParam('programmeId') programmeId: string): Promise<CloudSummary[]> {
    return this.clouds.list({ programmeId });
  }

  @Post()
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'Name a cloud by its velocity range, with sightlines if wished' })
  create(@CurrentActor() actor: Actor, @UuidParam('programmeId') programmeId: string, @Body() dto: NewCloudDto): Promise<Cloud> {
    return this.clouds.create(actor, { programmeId }, dto);
  }

  @Get(':cloudId')
  @NeedsRole('reader')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'A cloud with its sightlines and what the newest comparisons measured in it' })
  get(@UuidParam('programmeId') programmeId: string, @UuidParam('cloudId') id: string): Promise<Cloud> {
    return this.clouds.get({ programmeId }, id);
  }

  @Patch(':cloudId')
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiHeader(SEEN)
  @ApiOperation({ summary: 'Change the name, the velocity range or the notes of a cloud' })
  change(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('cloudId') id: string,
    @IfMatch() version: number,
    @Body() dto: ChangeCloudDto,
  ): Promise<Cloud> {
    return this.clouds.change(actor, { programmeId }, { id, version }, dto);
  }

  @Delete(':cloudId')
  @HttpCode(204)
  @NeedsRole('reviewer')
  @ApiHeader(SEEN)
  @ApiOperation({ summary: 'Delete a cloud; spectra and comparisons stay' })
  remove(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('cloudId') id: string,
    @IfMatch() version: number,
  ): Promise<void> {
    return this.clouds.remove(actor, { programmeId }, { id, version });
  }

  @Put(':cloudId/sightlines/:spectrumId')
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'Add a spectrum to the sightlines of a cloud; adding it twice changes nothing' })
  addSightline(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('cloudId') id: string,
    @UuidParam('spectrumId') spectrumId: string,
  ): Promise<Cloud> {
    return this.clouds.addSightline(actor, { programmeId }, id, spectrumId);
  }

  @Delete(':cloudId/sightlines/:spectrumId')
  @HttpCode(204)
  @NeedsRole('analyst')
  @ApiOperation({ summary: 'Take a spectrum out of the sightlines of a cloud' })
  removeSightline(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('cloudId') id: string,
    @UuidParam('spectrumId') spectrumId: string,
  ): Promise<void> {
    return this.clouds.removeSightline(actor, { programmeId }, id, spectrumId);
  }
}
