import { Body, Controller, Get, Patch, Post, Query } from '@nestjs/common';
import { ApiOperation, ApiQuery, ApiTags } from '@nestjs/swagger';
import type { AccountPage, AccountRow, Invitation, MailState } from '@foreveil/shared';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsAdministrator } from '../../common/auth/rules.js';
import { UuidParam } from '../../common/http/uuid-param.js';
import { EmailDto } from '../accounts/dto/accounts.dto.js';
import { InvitationsService } from '../invitations/invitations.service.js';
import { AdminService } from './admin.service.js';
import { ChangeAccountDto } from './change-account.dto.js';

@ApiTags('administration')
@Controller('admin')
export class AdminController {
  constructor(
    private readonly admin: AdminService,
    private readonly invitations: InvitationsService,
  ) {}

  @Get('accounts')
  @NeedsAdministrator()
  @ApiQuery({ name: 'after', required: false })
  @ApiQuery({ name: 'find', required: false })
  @ApiOperation({ summary: 'Accounts by address, a hundred at a time' })
  accounts(@Query('after') after?: unknown, @Query('find') find?: unknown): Promise<AccountPage> {
    return this.admin.accounts(text(after), text(find));
  }

  @Patch('accounts/:userId')
  @NeedsAdministrator()
  @ApiOperation({ summary: 'Close or open an account, give or take the right to administer' })
  change(@CurrentActor() actor: Actor, @UuidParam('userId') userId: string, @Body() dto: ChangeAccountDto): Promise<AccountRow> {
    return this.admin.change(actor, userId, dto);
  }

  @Get('invitations')
  @NeedsAdministrator()
  @ApiOperation({ summary: 'Invitations to the site that wait to be accepted' })
  open(): Promise<Invitation[]> {
    return this.invitations.list(null);
  }

  @Post('invitations')
  @NeedsAdministrator()
  @ApiOperation({ summary: 'Invite somebody to open an account' })
  invite(@CurrentActor() actor: Actor, @Body() { email }: EmailDto): Promise<Invitation> {
    return this.invitations.inviteToSite(actor, email);
  }

  @Get('mail')
  @NeedsAdministrator()
  @ApiOperation({ summary: 'How many messages wait, failed, or left without an answer' })
  mail(): Promise<MailState> {
    return this.admin.mail();
  }
}

/** A repeated parameter is none. NUL cannot be stored, so nothing has it. */
const text = (value: unknown): string => (typeof value === 'string' ? value.replaceAll('\u0000', '').slice(0, 254) : '');
