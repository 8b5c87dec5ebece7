import { Controller, Get, Header, StreamableFile } from '@nestjs/common';
import { ApiOperation, ApiProduces, ApiTags } from '@nestjs/swagger';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { contentDisposition } from '../../common/http/content-disposition.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { ReportsService } from './reports.service.js';

@ApiTags('reports')
@Controller('programmes/:programmeId')
export class ReportsController {
  constructor(private readonly reports: ReportsService) {}

  @Get('targets/:targetId/report.csv')
  @NeedsRole('reader')
  @Header('Content-Type', 'text/csv; charset=utf-8; header=present')
  @ApiProduces('text/csv')
  @ApiOperation({ summary: 'Line report of a target: all its spectra' })
  async ofTarget(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('targetId') targetId: string,
  ): Promise<StreamableFile> {
    return asFile(await this.reports.lines(actor, { programmeId }, { targetId }));
  }

  @Get('spectra/:spectrumId/report.csv')
  @NeedsRole('reader')
  @Header('Content-Type', 'text/csv; charset=utf-8; header=present')
  @ApiProduces('text/csv')
  @ApiOperation({ summary: 'Line report of one spectrum' })
  async ofSpectrum(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('spectrumId') spectrumId: string,
  ): Promise<StreamableFile> {
    return asFile(await this.reports.lines(actor, { programmeId }, { spectrumId }));
  }
}

function asFile({ fileName, csv }: { fileName: string; csv: string }): StreamableFile {
  const bytes = Buffer.from(csv, 'utf8');
  return new StreamableFile(bytes, { disposition: contentDisposition(fileName), length: bytes.length });
}
