import { Body, Controller, Get, Header, Post, Req, Res, StreamableFile, UploadedFile, UseInterceptors } from '@nestjs/common';
import { ApiBody, ApiConsumes, ApiOperation, ApiProduces, ApiTags } from '@nestjs/swagger';
import type { SpectrumDetail, SpectrumSummary } from '@foreveil/shared';
import type { Request, Response } from 'express';
import { Readable } from 'node:stream';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { contentDisposition } from '../../common/http/content-disposition.js';
import { hasFresh } from '../../common/http/fresh.js';
import { Immutable } from '../../common/http/immutable.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { VersionEtag } from '../../common/http/version-etag.js';
import { SpectraService } from './spectra.service.js';
import type { UploadedFile as FileOnDisk } from './upload-storage.js';
import { UploadedFileInterceptor } from './uploaded-file.interceptor.js';

const UPLOAD_BODY = {
  type: 'object',
  required: ['file', 'meta'],
  properties: {
    file: { type: 'string', format: 'binary' },
    meta: { type: 'string', description: 'JSON: targetId or targetName, and targetKind, label, corrections' },
  },
};

@ApiTags('spectra')
@Controller('programmes/:programmeId/spectra')
export class SpectraController {
  constructor(private readonly spectra: SpectraService) {}

  @Get()
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Spectra of a programme, oldest first' })
  list(@UuidParam('programmeId') programmeId: string): Promise<SpectrumSummary[]> {
    return this.spectra.list({ programmeId });
  }

  @Post()
  @NeedsRole('analyst')
  @UseInterceptors(UploadedFileInterceptor)
  @ApiOperation({ summary: 'Upload a spectrum; its analysis starts by itself' })
  @ApiConsumes('multipart/form-data')
  @ApiBody({ schema: UPLOAD_BODY })
  upload(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UploadedFile() file: FileOnDisk | undefined,
    @Body('meta') meta: unknown,
  ): Promise<SpectrumDetail> {
    return this.spectra.upload(actor, { programmeId }, { file, meta });
  }

  @Get(':spectrumId')
  @NeedsRole('reader')
  @UseInterceptors(VersionEtag)
  @ApiOperation({ summary: 'A spectrum with what was read from its file' })
  get(@UuidParam('programmeId') programmeId: string, @UuidParam('spectrumId') id: string): Promise<SpectrumDetail> {
    return this.spectra.get({ programmeId }, id);
  }

  @Get(':spectrumId/samples')
  @NeedsRole('reader')
  @ApiProduces('application/octet-stream')
  @ApiOperation({ summary: 'Columns of a spectrum, little-endian: wavelength, flux, sigma, bad' })
  async samples(
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('spectrumId') id: string,
    @Req() request: Request,
    @Res({ passthrough: true }) response: Response,
  ): Promise<StreamableFile | undefined> {
    const { revision, sizeBytes, chunks } = await this.spectra.samples({ programmeId }, id);
    if (hasFresh(request, response, `samples-${id}-${revision}`)) return undefined;
    return new StreamableFile(Readable.from(chunks(), { objectMode: false }), { length: sizeBytes });
  }

  @Get(':spectrumId/original')
  @NeedsRole('reader')
  @UseInterceptors(Immutable)
  @Header('Content-Security-Policy', 'sandbox')
  @ApiProduces('application/octet-stream')
  @ApiOperation({ summary: 'The file as it was delivered' })
  async original(@UuidParam('programmeId') programmeId: string, @UuidParam('spectrumId') id: string): Promise<StreamableFile> {
    const { fileName, sizeBytes, slices } = await this.spectra.original({ programmeId }, id);
    return new StreamableFile(Readable.from(slices), { disposition: contentDisposition(fileName), length: sizeBytes });
  }
}
