import { Controller, Get, Param } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { ReceivedMail, ReceivedMailSummary } from '@foreveil/shared';
import { Public } from '../../../common/auth/rules.js';
import { ReceivedMailService } from './received-mail.service.js';

/** Open to everybody, as whoever accepts an invitation has no account yet; in production there is no such server and nothing here. */
@ApiTags('mail')
@Controller('mail/received')
export class ReceivedMailController {
  constructor(private readonly received: ReceivedMailService) {}

  @Get()
  @Public()
  @ApiOperation({ summary: 'What the mail server of the demonstration received; not found elsewhere' })
  list(): Promise<ReceivedMailSummary[]> {
    return this.received.list();
  }

  @Get(':mailId')
  @Public()
  @ApiOperation({ summary: 'One message that it received' })
  get(@Param('mailId') mailId: string): Promise<ReceivedMail> {
    return this.received.get(mailId);
  }
}
