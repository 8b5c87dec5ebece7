import { Body, Controller, Get, HttpCode, Post, UseInterceptors } from '@nestjs/common';
import { ApiHeader, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Identification, UnplacedDecision } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { PlaceDecisionDto } from './dto/place-decision.dto.js';
import { UnplacedService } from './unplaced.service.js';

const SEEN = { name: 'If-Match', required: true, description: 'the version that was seen, as in "3"' };

@ApiTags('identifications')
@Controller('programmes/:programmeId')
export class UnplacedController {
  constructor(private readonly unplaced: UnplacedService) {}

  @Get('spectra/:spectrumId/unplaced-decisions')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Decisions that belong to no feature of the current analysis' })
  list(@UuidParam('programmeId') programmeId: string, @UuidParam('spectrumId') spectrumId: string): Promise<UnplacedDecision[]> {
    return this.unplaced.list({ programmeId }, spectrumId);
  }

  @Post('identifications/:identificationId/keep')
  @HttpCode(200)
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiHeader(SEEN)
  @ApiOperation({ summary: 'Say that a decision stands although the current analysis does not find its feature' })
  keep(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('identificationId') id: string,
    @IfMatch() version: number,
  ): Promise<Identification> {
    return this.unplaced.keep(actor, { programmeId }, { id, version });
  }

  /** What was proposed an analyst may move; what was decided, a reviewer, which is checked with the row. */
  @Post('identifications/:identificationId/place')
  @HttpCode(200)
  @NeedsRole('analyst')
  @UseInterceptors(VersionEtag)
  @ApiHeader(SEEN)
  @ApiOperation({ summary: 'Put a decision without a feature on a feature without a decision' })
  place(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('identificationId') id: string,
    @IfMatch() version: number,
    @Body() dto: PlaceDecisionDto,
  ): Promise<Identification> {
    return this.unplaced.place(actor, { programmeId }, { id, version }, dto);
  }
}
