import { Controller, Get, Req, Res } from '@nestjs/common';
import { ApiOperation, ApiProduces, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsRole } from '../../common/auth/rules.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { ProgrammeEvents } from './programme-events.service.js';

/** Bytes that may wait for a page that does not read them; a page that is let go connects again and loads everything anew. */
const MOST_UNREAD = 4 * 1024 * 1024;

@ApiTags('events')
@Controller('programmes/:programmeId/events')
export class EventsController {
  constructor(private readonly events: ProgrammeEvents) {}

  @Get()
  @NeedsRole('reader')
  @ApiProduces('text/event-stream')
  @ApiOperation({ summary: 'What happens in the programme, as server-sent events' })
  stream(
    @CurrentActor() actor: Actor,
    @UuidParam('programmeId') programmeId: string,
    @Req() request: Request,
    @Res() response: Response,
  ): void {
    response.writeHead(200, { 'Content-Type': 'text/event-stream; charset=utf-8', 'Cache-Control': 'no-store', 'X-Accel-Buffering': 'no' });
    const leave = this.events.subscribe({
      actor,
      programmeId,
      write: (text) => void (response.writableLength > MOST_UNREAD ? response.destroy() : response.write(text)),
      end: () => void response.end(),
    });
    request.once('close', leave);
  }
}
