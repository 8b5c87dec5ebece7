import { Body, Controller, Get, Header, HttpCode, Post } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { AnalysisRun, AnalysisSummary } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { AnalysesService } from './analyses.service.js';
import { NewAnalysisDto } from './dto/new-analysis.dto.js';

@ApiTags('analyses')
@Controller('programmes/:programmeId')
export class AnalysesController {
  constructor(private readonly analyses: AnalysesService) {}

  @Get('spectra/:spectrumId/analyses')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Analyses of a spectrum with their settings, newest first' })
  list(@UuidParam('programmeId') programmeId: string, @UuidParam('spectrumId') spectrumId: string): Promise<AnalysisRun[]> {
    return this.analyses.list({ programmeId }, spectrumId);
  }

  @Post('spectra/:spectrumId/analyses')
  @NeedsRole('analyst')
  @ApiOperation({ summary: 'Analyse a spectrum again, with other settings' })
  request(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('spectrumId') spectrumId: string,
    @Body() dto: NewAnalysisDto,
  ): Promise<AnalysisSummary> {
    return this.analyses.request(actor, { programmeId }, spectrumId, dto);
  }

  @Get('analyses/:analysisId')
  @NeedsRole('reader')
  @Header('Content-Type', 'application/json; charset=utf-8')
  @ApiOperation({ summary: 'An analysis with its settings and, when it is complete, its result' })
  get(@UuidParam('programmeId') programmeId: string, @UuidParam('analysisId') id: string): Promise<string> {
    return this.analyses.getAsJson({ programmeId }, id);
  }

  @Post('analyses/:analysisId/cancel')
  @HttpCode(200)
  @NeedsRole('analyst')
  @ApiOperation({ summary: 'Cancel an analysis that has not ended' })
  cancel(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('analysisId') id: string,
  ): Promise<AnalysisSummary> {
    return this.analyses.cancel(actor, { programmeId }, id);
  }
}
