import { Body, Controller, Delete, Get, Header, HttpCode, Post, Query, StreamableFile } from '@nestjs/common';
import { ApiOperation, ApiProduces, ApiTags } from '@nestjs/swagger';
import type { FoundIdentification, Page, SavedSearch } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsSignIn } from '../../common/auth/rules.js';
import { contentDisposition } from '../../common/http/content-disposition.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { IdentificationQueryDto, SavedSearchDto, SearchPageDto } from './dto/search.dto.js';
import { SearchService } from './search.service.js';

/** Across all programmes that a person is a member of; what they may not read is not found. */
@ApiTags('search')
@Controller()
export class SearchController {
  constructor(private readonly search: SearchService) {}

  @Get('search/identifications')
  @NeedsSignIn()
  @ApiOperation({ summary: 'Identifications by species, velocity, wavelength, width and companions, a page at a time' })
  find(@CurrentActor() actor: Actor, @Query() query: SearchPageDto): Promise<Page<FoundIdentification>> {
    return this.search.find(actor, { ...query, limit: query.limit ?? 100 });
  }

  @Get('search/identifications.csv')
  @NeedsSignIn()
  @Header('Content-Type', 'text/csv; charset=utf-8; header=present')
  @ApiProduces('text/csv')
  @ApiOperation({ summary: 'What a search finds, as CSV' })
  async csv(@CurrentActor() actor: Actor, @Query() query: IdentificationQueryDto): Promise<StreamableFile> {
    const bytes = Buffer.from(await this.search.csv(actor, query), 'utf8');
    return new StreamableFile(bytes, { disposition: contentDisposition('identifications.csv'), length: bytes.length });
  }

  @Get('saved-searches')
  @NeedsSignIn()
  @ApiOperation({ summary: 'Searches that you keep' })
  saved(@CurrentActor() actor: Actor): Promise<SavedSearch[]> {
    return this.search.saved(actor);
  }

  @Post('saved-searches')
  @NeedsSignIn()
  @ApiOperation({ summary: 'Keep a search; one of the same name is replaced' })
  save(@CurrentActor() actor: Actor, @Body() dto: SavedSearchDto): Promise<SavedSearch> {
    return this.search.save(actor, dto);
  }

  @Delete('saved-searches/:savedSearchId')
  @HttpCode(204)
  @NeedsSignIn()
  @ApiOperation({ summary: 'Keep a search no longer' })
  remove(@CurrentActor() actor: Actor, @UuidParam('savedSearchId') id: string): Promise<void> {
    return this.search.remove(actor, id);
  }
}
