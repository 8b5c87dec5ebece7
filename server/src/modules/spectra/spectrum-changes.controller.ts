import { Body, Controller, Delete, Get, HttpCode, Patch, Post, Query, UseInterceptors } from '@nestjs/common';
import { ApiHeader, ApiOperation, ApiQuery, ApiTags } from '@nestjs/swagger';
import type { KnownFile, ReadingEvent, RemovedSpectrum, SpectrumDetail } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { ChangeReadingDto, ChangeSpectrumDto, KnownFilesDto } from './dto/change-spectrum.dto.js';
import { plainCorrections } from './dto/corrections.dto.js';
import { SpectraService } from './spectra.service.js';
import { SpectrumChanges } from './spectrum-changes.service.js';

const IF_MATCH = { name: 'If-Match', required: true, description: 'the version that was seen, as in "3"' };

@ApiTags('spectra')
@Controller('programmes/:programmeId')
export class SpectrumChangesController {
  constructor(
    private readonly changes: SpectrumChanges,
    private readonly spectra: SpectraService,
  ) {}

  @Get('known-files')
  @NeedsRole('reader')
  @ApiQuery({ name: 'sha256', type: String, description: 'hashes in hexadecimal, commas between them, 50 at most' })
  @ApiOperation({ summary: 'Which files, told by their SHA-256, are in the programme already' })
  known(@UuidParam('programmeId') programmeId: string, @Query() { sha256 }: KnownFilesDto): Promise<KnownFile[]> {
    return this.spectra.known({ programmeId }, sha256);
  }

  @Get('removed-spectra')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Removed spectra, which can be put back, the last one first' })
  removed(@UuidParam('programmeId') programmeId: string): Promise<RemovedSpectrum[]> {
    return this.changes.removed({ programmeId });
  }

  @Patch('spectra/:spectrumId')
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiHeader(IF_MATCH)
  @ApiOperation({ summary: 'Rename a spectrum, or move it to another target' })
  change(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('spectrumId') id: string,
    @IfMatch() version: number,
    @Body() dto: ChangeSpectrumDto,
  ): Promise<SpectrumDetail> {
    return this.changes.change(actor, { programmeId }, id, version, dto);
  }

  @Delete('spectra/:spectrumId')
  @HttpCode(204)
  @NeedsRole('analyst')
  @ApiHeader(IF_MATCH)
  @ApiOperation({ summary: 'Remove a spectrum; with decisions on it, a lead only. It can be put back' })
  remove(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('spectrumId') id: string,
    @IfMatch() version: number,
  ): Promise<void> {
    return this.changes.remove(actor, { programmeId }, id, version);
  }

  @Post('spectra/:spectrumId/restore')
  @HttpCode(200)
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'Put a removed spectrum back' })
  restore(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('spectrumId') id: string,
  ): Promise<SpectrumDetail> {
    return this.changes.restore(actor, { programmeId }, id);
  }

  @Get('spectra/:spectrumId/reading')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'All the ways in which the file of a spectrum was read, the first one first' })
  readings(@UuidParam('programmeId') programmeId: string, @UuidParam('spectrumId') id: string): Promise<ReadingEvent[]> {
    return this.changes.readings({ programmeId }, id);
  }

  @Patch('spectra/:spectrumId/reading')
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiHeader(IF_MATCH)
  @ApiOperation({ summary: 'Read the file of a spectrum anew with other corrections, and analyse it' })
  reread(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('spectrumId') id: string,
    @IfMatch() version: number,
    @Body() { corrections, recipe }: ChangeReadingDto,
  ): Promise<SpectrumDetail> {
    return this.changes.reread(actor, { programmeId }, id, version, { corrections: plainCorrections(corrections), recipe });
  }
}
