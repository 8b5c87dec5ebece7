import { Body, Controller, Delete, Get, Header, HttpCode, Param, Post, Put, StreamableFile, UseInterceptors } from '@nestjs/common';
import { ApiHeader, ApiOperation, ApiProduces, ApiTags } from '@nestjs/swagger';
import { ROLE_FOR, type ComparisonSummary, type VerdictRuling } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { contentDisposition } from '../../common/http/content-disposition.js';
import { IfMatch } from '../../common/http/if-match.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { ComparisonsService } from './comparisons.service.js';
import { ComparisonRerunDto, NewComparisonDto, RulingDto } from './dto/comparison.dto.js';
import { RulingsService } from './rulings.service.js';

@ApiTags('comparisons')
@Controller('programmes/:programmeId/comparisons')
export class ComparisonsController {
  constructor(
    private readonly comparisons: ComparisonsService,
    private readonly rulings: RulingsService,
  ) {}

  @Get()
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Comparisons of a programme, newest first, without those that a re-run superseded' })
  list(@UuidParam('programmeId') programmeId: string): Promise<ComparisonSummary[]> {
    return this.comparisons.list({ programmeId });
  }

  @Post()
  @NeedsRole('analyst')
  @ApiOperation({ summary: 'Compare the sightlines of two analysed spectra' })
  create(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @Body() dto: NewComparisonDto,
  ): Promise<ComparisonSummary> {
    return this.comparisons.create(actor, { programmeId }, dto);
  }

  @Get(':comparisonId')
  @NeedsRole('reader')
  @Header('Content-Type', 'application/json; charset=utf-8')
  @ApiOperation({ summary: 'A comparison with its settings, rulings and, when it is complete, its result' })
  get(@UuidParam('programmeId') programmeId: string, @UuidParam('comparisonId') id: string): Promise<string> {
    return this.comparisons.getAsJson({ programmeId }, id);
  }

  @Post(':comparisonId/rerun')
  @NeedsRole('analyst')
  @ApiOperation({ summary: 'Compare again, with the newest analyses: a new comparison that supersedes this one and keeps its rulings' })
  rerun(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('comparisonId') id: string,
    @Body() dto: ComparisonRerunDto,
  ): Promise<ComparisonSummary> {
    return this.comparisons.rerun(actor, { programmeId }, id, dto);
  }

  /** Whoever asked for it may delete it; others need to be reviewers, which is checked with the row. */
  @Delete(':comparisonId')
  @HttpCode(204)
  @NeedsRole('analyst')
  @ApiHeader({ name: 'If-Match', required: true, description: 'the version that was seen, as in "1"' })
  @ApiOperation({ summary: 'Delete a comparison and the rulings on it' })
  remove(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('comparisonId') id: string,
    @IfMatch() version: number,
  ): Promise<void> {
    return this.comparisons.remove(actor, { programmeId }, id, version);
  }

  @Get(':comparisonId/report.csv')
  @NeedsRole('reader')
  @Header('Content-Type', 'text/csv; charset=utf-8; header=present')
  @ApiProduces('text/csv')
  @ApiOperation({ summary: 'Verdicts and columns of a comparison' })
  async report(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('comparisonId') id: string,
  ): Promise<StreamableFile> {
    const { fileName, csv } = await this.comparisons.report(actor, { programmeId }, id);
    const bytes = Buffer.from(csv, 'utf8');
    return new StreamableFile(bytes, { disposition: contentDisposition(fileName), length: bytes.length });
  }

  @Put(':comparisonId/lines/:lineKey/ruling')
  @NeedsRole(ROLE_FOR.accept)
  @UseInterceptors(VersionEtag)
  @ApiHeader({ name: 'If-Match', required: true, description: 'the version of the ruling that was seen; "0" when there is none yet' })
  @ApiOperation({ summary: 'Overrule the verdict on a line, with a remark' })
  rule(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('comparisonId') id: string,
    @Param('lineKey') lineKey: string,
    @IfMatch() version: number,
    @Body() dto: RulingDto,
  ): Promise<VerdictRuling> {
    return this.rulings.rule(actor, { programmeId }, { id, lineKey, version }, dto);
  }
}
