import { Controller, Get, Inject } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Knex } from 'knex';
import { NeedsSignIn } from '../../common/auth/rules.js';
import { KNEX } from '../../database/knex.js';
import { findLineLists, type LineListRow } from './line-list-store.js';

@ApiTags('line lists')
@Controller('line-lists')
export class LineListsController {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  @Get()
  @NeedsSignIn()
  @ApiOperation({ summary: 'Line lists that analyses can use, the default first' })
  list(): Promise<LineListRow[]> {
    return findLineLists(this.db);
  }
}
