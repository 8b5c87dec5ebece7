import { Body, Controller, Get, Headers, HttpCode, Post, Res, UseGuards } from '@nestjs/common';
import { ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Me } from '@foreveil/shared';
import type { Response } from 'express';
import { CurrentActor, type Actor } from '../../common/auth/actor.js';
import { NeedsSession, NeedsSignIn, Public } from '../../common/auth/rules.js';
import { SessionCookies } from '../../common/auth/session-cookies.js';
import { AccountsService } from './accounts.service.js';
import { SignInDto } from './dto/sign-in.dto.js';
import { SignInThrottleGuard } from './sign-in-throttle.guard.js';

@ApiTags('accounts')
@Controller('auth')
export class AccountsController {
  constructor(
    private readonly accounts: AccountsService,
    private readonly cookies: SessionCookies,
  ) {}

  @Post('sign-in')
  @HttpCode(200)
  @Public()
  @UseGuards(SignInThrottleGuard)
  @ApiOperation({ summary: 'Sign in; the answer sets the session cookie' })
  async signIn(@Body() dto: SignInDto, @Headers('user-agent') device = '', @Res({ passthrough: true }) response: Response): Promise<Me> {
    const { claims, me } = await this.accounts.signIn(dto, device);
    await this.cookies.give(response, claims);
    return me;
  }

  @Post('sign-out')
  @HttpCode(204)
  @NeedsSession()
  @ApiOperation({ summary: 'Sign out: the session ends at once, on every page' })
  async signOut(@CurrentActor() actor: Actor, @Res({ passthrough: true }) response: Response): Promise<void> {
    await this.accounts.signOut(actor);
    this.cookies.takeBack(response);
  }

  @Get('me')
  @NeedsSignIn()
  @ApiOperation({ summary: 'The signed-in person' })
  me(@CurrentActor() { userId, email, name, administrator }: Actor): Me {
    return { id: userId, email, name, administrator };
  }
}
