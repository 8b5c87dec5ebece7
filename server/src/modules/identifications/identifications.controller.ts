import { Body, Controller, Get, HttpCode, Param, Post, UseInterceptors } from '@nestjs/common';
import { ApiHeader, ApiOperation, ApiParam, ApiTags } from '@nestjs/swagger';
import type { Identification } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { indexParam } from '../../common/http/index-param.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { DecisionDto } from './dto/decision.dto.js';
import { IdentificationsService } from './identifications.service.js';

@ApiTags('identifications')
@Controller('programmes/:programmeId')
export class IdentificationsController {
  constructor(private readonly identifications: IdentificationsService) {}

  @Get('spectra/:spectrumId/identifications')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Decisions on the lines of a spectrum, by wavelength' })
  list(@UuidParam('programmeId') programmeId: string, @UuidParam('spectrumId') spectrumId: string): Promise<Identification[]> {
    return this.identifications.list({ programmeId }, spectrumId);
  }

  /** To propose takes an analyst; to accept, reject or reopen a reviewer, which is checked with the action. */
  @Post('analyses/:analysisId/features/:featureIndex/decision')
  @HttpCode(200)
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiParam({ name: 'featureIndex', type: Number })
  @ApiHeader({ name: 'If-Match', required: true, description: 'the version that was seen, as in "3"; "0" when nobody has decided yet' })
  @ApiOperation({ summary: 'Propose, accept, reject or reopen what a feature is' })
  decide(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('analysisId') analysisId: string,
    @Param('featureIndex', indexParam) featureIndex: number,
    @IfMatch() version: number,
    @Body() dto: DecisionDto,
  ): Promise<Identification> {
    return this.identifications.decide(actor, { programmeId }, { analysisId, featureIndex, version }, dto);
  }
}
