import { Controller, Get, Inject, type BeforeApplicationShutdown } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Knex } from 'knex';
import { Public } from '../../common/auth/rules.js';
import { DomainError } from '../../common/errors/domain-error.js';
import { KNEX } from '../../database/knex.js';

@ApiTags('health')
@Controller('health')
export class HealthController implements BeforeApplicationShutdown {
  private stopping = false;

  constructor(@Inject(KNEX) private readonly db: Knex) {}

  beforeApplicationShutdown(): void {
    this.stopping = true;
  }

  @Get('live')
  @Public()
  @ApiOperation({ summary: 'Whether the process answers' })
  live(): { status: 'live' } {
    return { status: 'live' };
  }

  @Get('ready')
  @Public()
  @ApiOperation({ summary: 'Whether requests can be served: database and its tables' })
  async ready(): Promise<{ status: 'ready' }> {
    if (this.stopping) throw new DomainError('unavailable', 'The server is stopping.', { retryAfter: 5 });
    const { rows } = await this.db.raw<{ rows: { table: string | null }[] }>(`select to_regclass('audit')::text as "table"`);
    if (!rows[0]?.table) throw new DomainError('unavailable', 'The database has no tables yet: npm run db -- migrate');
    return { status: 'ready' };
  }
}
