import { Body, Controller, Headers, HttpCode, Post, Res, UseGuards } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { InvitationLook } from '@foreveil/shared';
import type { Response } from 'express';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsSession, Public } from '../../common/auth/rules.js';
import { SessionCookies } from '../../common/auth/session-cookies.js';
import { AccountsService } from '../accounts/accounts.service.js';
import { SecretDto, SignUpDto } from '../accounts/dto/accounts.dto.js';
import { SignInThrottleGuard } from '../accounts/sign-in-throttle.guard.js';
import { JoiningService } from './joining.service.js';

@ApiTags('accounts')
@Controller()
@UseGuards(SignInThrottleGuard)
export class JoiningController {
  constructor(
    private readonly joining: JoiningService,
    private readonly accounts: AccountsService,
    private readonly cookies: SessionCookies,
  ) {}

  @Post('auth/invitations/look')
  @HttpCode(200)
  @Public()
  @ApiOperation({ summary: 'What an invitation is to, for who holds its link' })
  look(@Body() { secret }: SecretDto): Promise<InvitationLook> {
    return this.joining.look(secret);
  }

  @Post('auth/invitations/sign-up')
  @HttpCode(204)
  @Public()
  @ApiOperation({ summary: 'Open an account with the invited address, join, and be signed in' })
  async signUp(@Body() dto: SignUpDto, @Headers('user-agent') device = '', @Res({ passthrough: true }) response: Response): Promise<void> {
    const userId = await this.joining.signUp(dto);
    await this.cookies.give(response, await this.accounts.open(userId, device));
  }

  @Post('account/invitations/accept')
  @HttpCode(200)
  @NeedsSession()
  @ApiOperation({ summary: 'Join with the account one is signed in to' })
  accept(@CurrentActor() actor: Actor, @Body() { secret }: SecretDto): Promise<{ programmeId: string | null }> {
    return this.joining.accept(actor, secret);
  }
}
