import {
  Body,
  Controller,
  Delete,
  Get,
  Header,
  HttpCode,
  Post,
  Put,
  Query,
  StreamableFile,
  UploadedFile,
  UseInterceptors,
} from '@nestjs/common';
import { FileInterceptor } from '@nestjs/platform-express';
import { ApiBody, ApiConsumes, ApiOperation, ApiProduces, ApiTags } from '@nestjs/swagger';
import {
  linesCsv,
  type Line,
  type LineListAnswer,
  type LineListChanges,
  type LineListDetail,
  type LineListSummary,
  type Page,
} from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { contentDisposition } from '../../common/http/content-disposition.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { LineQueryDto } from './dto/line-list.dto.js';
import { LineListsService } from './line-lists.service.js';

const UPLOAD_BODY = {
  type: 'object',
  required: ['file', 'meta'],
  properties: {
    file: { type: 'string', format: 'binary', description: 'CSV with a row of names, or a VOTable' },
    meta: { type: 'string', description: 'JSON: name, version, and citation, medium, baseId, remove, previousId, dryRun' },
  },
};

@ApiTags('line lists')
@Controller('programmes/:programmeId/line-lists')
export class ProgrammeLineListsController {
  constructor(private readonly lists: LineListsService) {}

  @Get()
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Line lists that this programme can use: the shared ones and its own, all versions' })
  list(@UuidParam('programmeId') programmeId: string): Promise<LineListSummary[]> {
    return this.lists.list({ programmeId });
  }

  @Post()
  @HttpCode(201)
  @NeedsRole('lead')
  @UseInterceptors(FileInterceptor('file'))
  @ApiConsumes('multipart/form-data')
  @ApiBody({ schema: UPLOAD_BODY })
  @ApiOperation({ summary: 'Add a list or a new version of one; with dryRun only show what it would be' })
  add(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UploadedFile() file: Express.Multer.File | undefined,
    @Body('meta') meta: unknown,
  ): Promise<LineListAnswer> {
    return this.lists.add(actor, { programmeId }, file?.buffer, meta);
  }

  @Get(':lineListId')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'A list: its species, and what rests on it' })
  get(@UuidParam('programmeId') programmeId: string, @UuidParam('lineListId') id: string): Promise<LineListDetail> {
    return this.lists.get({ programmeId }, id);
  }

  @Get(':lineListId/lines')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'Lines of a list by wavelength range, species and lower energy, a page at a time' })
  lines(
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('lineListId') id: string,
    @Query() query: LineQueryDto,
  ): Promise<Page<Line>> {
    return this.lists.lines({ programmeId }, id, query);
  }

  @Get(':lineListId/lines.csv')
  @NeedsRole('reader')
  @Header('Content-Type', 'text/csv; charset=utf-8; header=present')
  @ApiProduces('text/csv')
  @ApiOperation({ summary: 'All lines of a list, as they can be uploaded again' })
  async csv(@UuidParam('programmeId') programmeId: string, @UuidParam('lineListId') id: string): Promise<StreamableFile> {
    const { list, lines } = await this.lists.whole({ programmeId }, id);
    const bytes = Buffer.from(linesCsv(lines), 'utf8');
    return new StreamableFile(bytes, { disposition: contentDisposition(`${list.name} ${list.version}.csv`), length: bytes.length });
  }

  @Get(':lineListId/diff/:otherListId')
  @NeedsRole('reader')
  @ApiOperation({ summary: 'What changed since another version or list' })
  diff(
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('lineListId') id: string,
    @UuidParam('otherListId') other: string,
  ): Promise<LineListChanges> {
    return this.lists.diff({ programmeId }, id, other);
  }

  @Put(':lineListId/archive')
  @NeedsRole('lead')
  @ApiOperation({ summary: 'Offer a list no longer for analyses; what rests on it keeps it' })
  archive(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('lineListId') id: string,
  ): Promise<LineListSummary> {
    return this.lists.archive(actor, { programmeId }, id, true);
  }

  @Delete(':lineListId/archive')
  @NeedsRole('lead')
  @ApiOperation({ summary: 'Offer a list again' })
  restore(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @UuidParam('lineListId') id: string,
  ): Promise<LineListSummary> {
    return this.lists.archive(actor, { programmeId }, id, false);
  }
}
